/** What is done at one point of a plan, and what is kept of it: a plain value, the same bytes whoever computes it. */
import { textFromRational } from '../algebra/rational.ts';
import { assertCertifiable, certificateNow } from '../certificate/certificate.ts';
import { terms } from '../certificate/document.ts';
import { HoldfastError, InputError, LimitError } from '../errors.ts';
import { parseDensity } from '../model/formula.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { modelFromDocument } from '../model/schema.ts';
import { parseSyntax } from '../model/syntax.ts';
import { innerProduct } from '../physics/inner-product.ts';
import { correctionBytes, nearestCharge, residual, smallestCorrection } from '../physics/residual.ts';
import { estimate } from '../search/estimate.ts';
import { methodFor, planOf } from '../search/plan.ts';
import type { Charge, SearchResult } from '../search/result.ts';
import { searchNow, searchSector } from '../search/search.ts';
import { type Grading, type Sector, sectorsOf } from '../search/sectors.ts';
import type { Progress, SnapshotStore } from '../search/sweep.ts';
import { everyRangeCertificate } from '../theory/certificate.ts';
import { decide } from '../theory/decide.ts';
import { type PointsPlan, type ScanTask, sha256 } from './plan.ts';
import { type Points, sectorsIn } from './points.ts';
import type { CertificateNote, Outcome, PointAnswer } from './record.ts';

/** An outcome, and the text of the certificate that it names. */
export interface PointResult {
  readonly outcome: Outcome;
  readonly certificate: string | null;
}

/** The Hamiltonian at a point. @throws InputError where it is zero, or a value divides by zero */
export function hamiltonianAt(plan: PointsPlan, values: readonly string[]): Hamiltonian {
  const { model, task } = plan;
  const used = task.kind === 'residual' ? parseSyntax(model.formula).names : null;
  return modelFromDocument(
    { formula: model.formula, cell: model.cell },
    valuesOf(plan, values, (name) => used === null || used.has(name)),
  );
}

/** The values at a point of all parameters that are used. */
function valuesOf(
  { model, parameters }: PointsPlan,
  values: readonly string[],
  isUsed: (name: string) => boolean,
): Map<string, string> {
  const free = parameters.map(({ name }, i) => [name, values[i]!] as const);
  return new Map([...Object.entries(model.parameters), ...free].filter(([name]) => isUsed(name)));
}

/**
 * Does the task of a plan at a point. A fault of the point itself (a zero Hamiltonian) is an answer like others; what may go better
 * another time (memory) is marked as failed.
 *
 * @param onProgress called with the share done of a search, 0 … 1; throwing from it ends the work with that error
 */
export async function runPoint(
  plan: PointsPlan,
  values: readonly string[],
  onProgress: (done: number) => void = () => {},
  storeFor?: StoreFor,
): Promise<PointResult> {
  try {
    const { answer, certificate } = answerAt(plan, values, onProgress, storeFor);
    if (certificate === null) return { outcome: { status: 'done', answer }, certificate: null };
    if ('none' in certificate) return { outcome: { status: 'done', answer, certificate }, certificate: null };
    const { text } = certificate;
    const note: CertificateNote = { id: await sha256(text) };
    return { outcome: { status: 'done', answer, certificate: note }, certificate: text };
  } catch (error) {
    // One line: where in the formula it is at fault is no matter of the point.
    if (error instanceof InputError)
      return { outcome: { status: 'refused', reason: error.message.split('\n')[0]! }, certificate: null };
    // An allocation that the machine refuses arrives as a RangeError.
    if (error instanceof HoldfastError || error instanceof RangeError)
      return { outcome: { status: 'failed', reason: error.message }, certificate: null };
    throw error;
  }
}

interface Answered {
  readonly answer: PointAnswer;
  readonly certificate: { readonly text: string } | { readonly none: string } | null;
}

/** The sectors of a task at a point: at most as many as it names, or more where the arrays need them. */
export function sectorGrading(
  h: Hamiltonian,
  { range, sectors }: Extract<ScanTask, { kind: 'search' }>,
): Grading {
  return planOf(h, { range, method: 'exhaustive', sectors }).sectors[0]!.grading;
}

/** Checkpoints of a search. */
export type StoreFor = (h: Hamiltonian, range: number) => (sector: Sector) => SnapshotStore;

function answerAt(
  plan: PointsPlan,
  values: readonly string[],
  onProgress: (done: number) => void,
  storeFor: StoreFor | undefined,
): Answered {
  const h = hamiltonianAt(plan, values);
  const { task } = plan;
  switch (task.kind) {
    case 'search': {
      const options = {
        range: task.range,
        onProgress: ({ done }: Progress) => onProgress(done),
        ...(storeFor === undefined ? {} : { store: storeFor(h, task.range) }),
      };
      if (task.sectors > 1) {
        const sector = sectorsOf(sectorGrading(h, task))[Number(values.at(-1)) - 1];
        // A model with fewer sectors leaves the last parts of its point empty.
        const part =
          sector === undefined
            ? { charges: [], primes: [] }
            : searchSector(h, sector, { ...options, method: 'exhaustive' });
        return {
          answer: { kind: 'sector', primes: [...part.primes], charges: written(h, part.charges) },
          certificate: null,
        };
      }
      const result = searchNow(h, options);
      return {
        answer: searchAnswer(result, task.charges),
        certificate: task.certificates ? certified(() => certificateNow(result)) : null,
      };
    }
    case 'decide':
      return {
        answer: decideAnswer(h, task),
        certificate: task.certificates ? certified(() => everyRangeCertificate(h)) : null,
      };
    case 'residual':
      return { answer: residualAnswer(h, plan, task, values), certificate: null };
  }
}

/** A certificate that would be too large, or a model for which there is none, leaves the answer as it is. */
function certified(write: () => string): { text: string } | { none: string } {
  try {
    return { text: write() };
  } catch (error) {
    if (error instanceof LimitError) return { none: error.message };
    throw error;
  }
}

export function searchAnswer(result: SearchResult, withCharges: boolean): PointAnswer {
  const { hamiltonian, dimensionByRange, minimumCells, charges } = result;
  return {
    kind: 'search',
    dimensionByRange: [...dimensionByRange],
    minimumCells,
    ...(withCharges ? { charges: written(hamiltonian, charges) } : {}),
  };
}

function written(h: Hamiltonian, charges: readonly Charge[]) {
  return charges.map(({ range, parity, density }) => ({
    range,
    parity,
    terms: terms(h.chain, density) as [string, string][],
  }));
}

function decideAnswer(
  h: Hamiltonian,
  { range, waveNumbers }: Extract<ScanTask, { kind: 'decide' }>,
): PointAnswer {
  const verdict = decide(h, { waveNumbers, ...(range === null ? {} : { searchRange: range }) });
  const bound = 'bound' in verdict ? verdict.bound : null;
  return {
    kind: 'decide',
    verdict: verdict.kind,
    from: 'from' in verdict ? verdict.from : null,
    perRange: verdict.kind === 'complete' ? verdict.perRange : verdict.kind === 'none' ? 0 : null,
    bound: bound && {
      group: bound.group,
      from: bound.from,
      generic: bound.generic,
      exceptional: bound.exceptional.map(({ range: at, atMost }) => [at, atMost] as [number, number]),
    },
    theorem: verdict.kind === 'by citation' ? verdict.citation.theorem.id : null,
    reason: 'reason' in verdict ? verdict.reason : null,
    dimensionByRange: [...verdict.search.dimensionByRange],
    waveNumbers:
      verdict.waveNumbers === null
        ? null
        : verdict.waveNumbers.kind === 'open'
          ? `open: ${verdict.waveNumbers.reason}`
          : verdict.waveNumbers.noneOfRange3
            ? 'covered: none of range 3 or more'
            : 'covered',
  };
}

function residualAnswer(
  h: Hamiltonian,
  plan: PointsPlan,
  { candidate, range }: Extract<ScanTask, { kind: 'residual' }>,
  values: readonly string[],
): PointAnswer {
  const { names } = parseSyntax(candidate);
  const parameters = valuesOf(plan, values, (name) => names.has(name));
  const density = parseDensity(candidate, { cell: plan.model.cell, parameters });
  const { conserved, commutator } = residual(h, density);
  const squaredNorm = textFromRational(innerProduct(h.chain, commutator, commutator));
  if (range === null) return { kind: 'residual', conserved, squaredNorm };
  if (conserved)
    return { kind: 'residual', conserved, squaredNorm, correctionRange: 0, squaredDistance: '0' };
  const correction = smallestCorrection(h, density, { range });
  const { distance } = nearestCharge(searchNow(h, { range }), density);
  return {
    kind: 'residual',
    conserved,
    squaredNorm,
    correctionRange: correction?.range ?? null,
    squaredDistance: textFromRational(distance),
  };
}

/** What the points of a plan need, from some of them. */
export interface PlanEstimate {
  /** Bytes at the peak, the largest of the points looked at; a certificate and dear models may take a few times more. */
  readonly bytes: number;
  /** Seconds a point, their mean: a rough guess. */
  readonly seconds: number;
}

/** Points that are looked at: spread over all of them, first and last included. */
const LOOKED_AT = 64;

/** The lemmas and a short search: well under a second for one spin a cell, and about five times as much for each spin more. */
const DECIDE_SECONDS = 0.2;
const BASE_BYTES = 150e6;

/**
 * Memory and time of a plan.
 *
 * @throws LimitError where a range does not fit any machine, or cannot be certified; InputError when no point has a Hamiltonian
 */
export function estimatePlan(plan: PointsPlan, points: Points): PlanEstimate {
  const { task } = plan;
  let bytes = 0;
  let seconds = 0;
  let looked = 0;
  let refusal: InputError | undefined;
  const looks = Math.min(LOOKED_AT, points.count);
  for (let i = 0; i < looks; i++) {
    const point = looks === 1 ? 0 : Math.floor((i * (points.count - 1)) / (looks - 1));
    let h: Hamiltonian;
    try {
      h = hamiltonianAt(plan, points.at(point));
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      refusal = error;
      continue;
    }
    if (task.kind === 'search' && task.certificates) assertCertifiable(h, task.range);
    const need = task.range === null ? { bytes: 0, seconds: 0 } : needOf(h, task.range, sectorsIn(plan));
    const correction =
      task.kind === 'residual' && task.range !== null ? correctionBytes(plan.model.cell, task.range) : 0;
    const certificates = task.kind === 'search' && task.certificates ? 2 : 1;
    bytes = Math.max(bytes, need.bytes, BASE_BYTES + correction);
    seconds +=
      certificates * need.seconds +
      (task.kind === 'decide' ? DECIDE_SECONDS * 5 ** (plan.model.cell - 1) : 0.02);
    looked++;
  }
  if (looked === 0) throw refusal ?? new InputError('plan', 'a point', 'none');
  return { bytes, seconds: seconds / looked };
}

/** What growth needs follows the answer, which nobody knows beforehand: a guess. */
const GROWTH = { bytes: 500e6, seconds: 10 };

/** Of one part. */
function needOf(
  h: Hamiltonian,
  range: number,
  sectors: number,
): { readonly bytes: number; readonly seconds: number } {
  if (sectors === 1 && methodFor(h, range) === 'growth') return GROWTH;
  const all = planOf(h, { range, method: 'exhaustive', sectors }).sectors.length;
  const { bytes, seconds } = estimate(h, range, { together: 1, all });
  return { bytes, seconds: seconds / all };
}
