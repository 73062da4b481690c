/** Every public name, layer by layer. What is not here may change without notice. */

export { type Cyclotomic, CyclotomicField } from './algebra/cyclotomic.ts';
export { Operator } from './algebra/operator.ts';
export { Polynomial } from './algebra/polynomial.ts';
export {
  type Exact,
  Fraction,
  type Rational,
  rationalFromText,
  textFromRational,
} from './algebra/rational.ts';
export {
  commute,
  compareWords,
  letterAt,
  type Phase,
  product,
  textFromWord,
  type Word,
  weightOf,
  wordFromText,
} from './algebra/word.ts';
export {
  assertCertifiable,
  type CertificateOptions,
  certificateBytes,
  certificateNow,
  certificateOf,
} from './certificate/certificate.ts';
export { type CertifiedResult, search, searchNow } from './certificate/certified.ts';
export { statementOf } from './certificate/document.ts';
export { VERSION } from './certificate/version.ts';
export { type CheckOptions, check, checkNow, type Verdict } from './check/check.ts';
export { CancelledError, HoldfastError, InputError, LimitError, VerificationError } from './errors.ts';
export { Chain, MAX_CELL, type Reflection } from './lattice/chain.ts';
export { Box, type Extent, INFINITE, Lattice, type LatticeSite } from './lattice/lattice.ts';
export type {
  CatalogueEntry,
  FamilyEntry,
  PublishedStatement,
  PublishedStatus,
  Source,
} from './model/catalogue/entry.ts';
export { CATALOGUE, catalogueEntry, catalogueModel, FAMILIES } from './model/catalogue/index.ts';
export {
  type Family,
  type FormulaOptions,
  familyAt,
  type Parameters,
  parseDensity,
  parseFamily,
  parseModel,
  parseSites,
} from './model/formula.ts';
export { type Hamiltonian, hamiltonianOf } from './model/hamiltonian.ts';
export { type LatticeFormulaOptions, parseBondModel, parseLatticeModel } from './model/lattice-formula.ts';
export { chainModel, type LatticeModel, latticeModel, type PlacedStrings } from './model/lattice-model.ts';
export {
  type LatticeDocument,
  latticeModelFromJson,
  latticeModelJsonSchema,
} from './model/lattice-schema.ts';
export {
  type Bond,
  bondModel,
  type Couplings,
  LATTICES,
  type LatticeName,
  type LatticeShape,
} from './model/lattices.ts';
export {
  familyFromDocument,
  jsonFromModel,
  type ModelDocument,
  modelFromDocument,
  modelFromJson,
  modelJsonSchema,
  readModelDocument,
} from './model/schema.ts';
export type { Site, Syntax } from './model/syntax.ts';
export {
  boostDerivative,
  type ChargeAlgebra,
  type Commutator,
  chargeAlgebra,
  chargeAlgebraSteps,
  type Derivative,
  type Parities,
  paritiesOf,
} from './physics/charge-algebra.ts';
export { type Current, currentOf, isContinuous, localCommutator, type Placed } from './physics/currents.ts';
export {
  type Axis,
  bilinearCharges,
  type Dispersion,
  type FreeFermions,
  freeFermions,
  ringMatrix,
} from './physics/free-fermions.ts';
export { innerProduct } from './physics/inner-product.ts';
export { Laurent, type LaurentMatrix } from './physics/laurent.ts';
export { type MazurBound, mazurBounds, type OverlapOptions } from './physics/overlaps.ts';
export {
  type Correction,
  type CorrectionOptions,
  correctionSteps,
  type NearestCharge,
  nearestCharge,
  type Residual,
  residual,
  smallestCorrection,
} from './physics/residual.ts';
export type { Rotation } from './physics/rotation.ts';
export {
  isStrictlyLocal,
  type Label,
  type LabelKind,
  labelCharges,
  type NamedSymmetries,
  namedSymmetries,
  staggeredCharges,
} from './physics/symmetries.ts';
export { boundPicture } from './report/bound-picture.ts';
export { citation } from './report/citation.ts';
export { decimalText } from './report/decimal.ts';
export { printVerdict } from './report/every-range.ts';
export { familyJson, familyLatex, printEveryRange, printFamily } from './report/family.ts';
export { type PlotWindow, plotFamily } from './report/family-plot.ts';
export {
  type GroupedDensity,
  groupTerms,
  type Symmetry,
  symmetriesOf,
  type TermGroup,
} from './report/grouping.ts';
export { resultToJson } from './report/json.ts';
export { latexDensity, latexEquation, latexResult } from './report/latex.ts';
export {
  allWavesToJson,
  latticeResultToJson,
  printAllWaves,
  printLatticeResult,
  sitesText,
} from './report/lattice.ts';
export { mathmlEquation } from './report/mathml.ts';
export { type PageOptions, reportPage } from './report/page.ts';
export { growthPicture, legendPicture, pictureOfCharge, pictureOfResult } from './report/picture.ts';
export { DISPLAY, type Display, displayOf, rich } from './report/rich.ts';
export { scanMap } from './report/scan-map.ts';
export { type ScanResults, scanCsv, scanJson } from './report/scan-table.ts';
export { type Story, type StoryLayer, type StoryStep, storyOf, tellLayer, tellStep } from './report/story.ts';
export { printCharge, printDensity, printResult, type TextOptions } from './report/text.ts';
export { CAUTIONS, verdictOf } from './report/verdict.ts';
export { type Collected, mergeRecords } from './scan/merge.ts';
export {
  type PointsPlan,
  planHash,
  planJsonSchema,
  type ReadPlan,
  readPlan,
  type ScanAxis,
  type ScanTask,
} from './scan/plan.ts';
export { type Points, pointsIn } from './scan/points.ts';
export {
  type CertificateNote,
  headerLine,
  type Outcome,
  type PointAnswer,
  type PointRecord,
  type RecordFile,
  readRecords,
  recordLine,
} from './scan/record.ts';
export { estimatePlan, hamiltonianAt, type PlanEstimate, type PointResult, runPoint } from './scan/run.ts';
export {
  pointsOfShard,
  type Shard,
  shardFromText,
  shardOf,
  textFromShard,
  WHOLE_PLAN,
} from './scan/shard.ts';
export {
  type BackgroundOptions,
  searchAllWaves,
  searchLattice,
  type WavesOptions,
} from './search/background.ts';
export { candidateCount, type Estimate, estimate } from './search/estimate.ts';
export {
  type AllWaves,
  allWaves,
  type ExceptionalWaves,
  type WavesProgress,
} from './search/lattice/all-waves.ts';
export { type RealDensity, realForms } from './search/lattice/real-form.ts';
export type { LatticeCharge, LatticeResult } from './search/lattice/result.ts';
export {
  estimateLattice,
  type LatticeEstimate,
  type LatticeOptions,
  type LatticeProgress,
  searchLatticeNow,
} from './search/lattice/search.ts';
export type { Translations } from './search/lattice/space.ts';
export { EquationMatrix, type MatrixSize } from './search/matrix.ts';
export type { Charge, Method, SearchResult } from './search/result.ts';
export { leadingWord, type SearchOptions } from './search/search.ts';
export type { OnProgress, Progress } from './search/sweep.ts';
export { everyRangeCertificate } from './theory/certificate.ts';
export type { Citation, PublishedTheorem } from './theory/citations.ts';
export { type DecideOptions, decide } from './theory/decide.ts';
export type { Case, Solved } from './theory/family/case.ts';
export type { PolynomialDensity } from './theory/family/charges.ts';
export {
  classify,
  classifyNow,
  type FamilyCase,
  type FamilyCharge,
  type FamilyOptions,
  type FamilyProgress,
  type FamilyResult,
  type FamilyState,
} from './theory/family/classify.ts';
export { everyRangeOf, type LocusVerdict } from './theory/family/every-range.ts';
export { type Answer, answersOf, type Locus } from './theory/family/loci.ts';
export { stateFromText, textFromState } from './theory/family/state.ts';
export {
  climbing,
  type LadderOptions,
  type LadderProgress,
  ladder,
  NoLadderError,
  type Rung,
} from './theory/ladder.ts';
export { PUBLISHED } from './theory/published/index.ts';
export type { EveryRangeBound, EveryRangeVerdict, Existence } from './theory/verdict.ts';
export type { AtWaveNumber, WaveNumberVerdict } from './theory/wave-numbers.ts';
