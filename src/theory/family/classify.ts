/**
 * Families: for which couplings does a charge appear?
 *
 * A queue of open cases. Each is eliminated with pivots that vanish nowhere on it; where a coefficient may vanish the case splits, and
 * the vanishing parts join the queue. Closed cases are disjoint, cover the whole real parameter space, and each has one answer: the
 * dimension by range, and charges with polynomial coefficients that are re-multiplied exactly.
 */
import { Polynomial } from '../../algebra/polynomial.ts';
import type { Rational } from '../../algebra/rational.ts';
import { CancelledError, InputError, LimitError, show, VerificationError } from '../../errors.ts';
import { primeField, primesBelow } from '../../linear/field.ts';
import { type Family, familyAt, parseModel } from '../../model/formula.ts';
import { candidateCount } from '../../search/estimate.ts';
import { searchNow } from '../../search/search.ts';
import { type Case, EVERYWHERE, equationsOf, exclude, impose } from './case.ts';
import { commutesOn, type PolynomialDensity, primitiveDensity, termsOn } from './charges.ts';
import { CaseElimination, type NullSpace, UnluckyPoint } from './elimination.ts';
import { type FamilyEquations, familyEquations } from './equations.ts';
import { modularPoint, rationalPoint, seededRandom } from './point.ts';

export interface FamilyCharge {
  readonly range: number;
  /** Polynomial coefficients in the free parameters of the case; commutes with H everywhere on it. */
  readonly density: PolynomialDensity;
}

export interface FamilyCase {
  readonly where: Case;
  /** Polynomials in all parameters that vanish on the case. */
  readonly equations: readonly Polynomial[];
  /** Polynomials that vanish nowhere on the case. */
  readonly nonZero: readonly Polynomial[];
  /** Entry j − 1: the dimension of the space of charges of range ≤ j, the same everywhere on the case. */
  readonly dimensionByRange: readonly number[];
  /** A basis, by rising range; empty where it is not written out: H vanishes there, or is a field on spins that do not interact. */
  readonly charges: readonly FamilyCharge[];
  /** A rational point of the case at which the plain search gave the same dimensions; null: none found, the case may be empty. */
  readonly point: readonly Rational[] | null;
}

export interface FamilyResult {
  readonly family: Family;
  readonly range: number;
  readonly cases: readonly FamilyCase[];
  /** The statement holds on the infinite chain and on every ring of at least so many cells. */
  readonly minimumCells: number;
  readonly milliseconds: number;
}

export interface FamilyProgress {
  readonly open: number;
  readonly closed: number;
}

export interface FamilyOptions {
  readonly range: number;
  /** Called while it runs; throwing from it stops the run and nothing is returned. */
  readonly onProgress?: (progress: FamilyProgress) => void;
  /** Called whenever a case has been closed, with what is needed to go on from there. */
  readonly onState?: (state: FamilyState) => void;
  /** A state of an earlier run of the same family and range. */
  readonly resume?: FamilyState;
}

/** A run between two cases. */
export interface FamilyState {
  readonly open: readonly Case[];
  readonly closed: readonly FamilyCase[];
}

/** Candidates a family may have: coefficients are polynomials, so a candidate costs some hundred times what it costs a search. */
export const MAX_FAMILY_CANDIDATES = 20_000;

/** Attempts at one case, each with another prime and point. */
const MAX_ATTEMPTS = 12;

/** All cases of a family up to a range. @throws as `familySteps` */
export function classifyNow(family: Family, options: FamilyOptions): FamilyResult {
  const steps = familySteps(family, options.range, options.resume, options.onState);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
    options.onProgress?.(step.value);
  }
}

/** Milliseconds of work between two looks at the signal. */
const SLICE = 25;

/** As `classifyNow`, but leaves the event loop free between slices of work. @throws CancelledError on abort; else as `familySteps` */
export async function classify(
  family: Family,
  { range, onProgress, signal, resume, onState }: FamilyOptions & { readonly signal?: AbortSignal },
): Promise<FamilyResult> {
  const steps = familySteps(family, range, resume, onState);
  let last = performance.now();
  for (;;) {
    if (signal?.aborted) throw new CancelledError('family');
    const step = steps.next();
    if (step.done) return step.value;
    if (performance.now() - last < SLICE) continue;
    onProgress?.(step.value);
    await new Promise((resolve) => setTimeout(resolve));
    last = performance.now();
  }
}

/**
 * The run in small steps of some milliseconds, for callers that show progress or stay responsive.
 *
 * @throws InputError without a free parameter or with a bad range; LimitError when there are too many candidates
 */
export function* familySteps(
  family: Family,
  range: number,
  resume: FamilyState = { open: [EVERYWHERE], closed: [] },
  onState: (state: FamilyState) => void = () => {},
): Generator<FamilyProgress, FamilyResult> {
  if (!(Number.isInteger(range) && range >= 1))
    throw new InputError('family', 'a range of one cell or more, a whole number', show(range));
  if (family.parameters.length === 0)
    throw new InputError('family', 'at least one parameter without a value', 'none (that is a plain search)');
  const candidates = candidateCount(family.chain.cell, range);
  if (candidates > MAX_FAMILY_CANDIDATES)
    throw new LimitError(
      `family: range ${range} has ${candidates.toLocaleString('en')} candidates; a family may have ${MAX_FAMILY_CANDIDATES.toLocaleString('en')}`,
    );
  const started = performance.now();
  const equations = familyEquations(family, range);
  const open = [...resume.open];
  const closed = [...resume.closed];
  while (open.length > 0) {
    const where = open.pop()!;
    const steps = closeCase(family, equations, where, (cases) => void open.push(...cases));
    for (;;) {
      const step = steps.next();
      if (step.done) {
        closed.push(step.value);
        onState({ open: [...open], closed: [...closed] });
        break;
      }
      yield { open: open.length + 1, closed: closed.length };
    }
  }
  const reach = Math.max(...family.terms.map(([word]) => family.chain.range(word)));
  return Object.freeze({
    family,
    range,
    cases: Object.freeze(closed),
    minimumCells: 2 * range + 2 * reach - 3,
    milliseconds: performance.now() - started,
  });
}

function* closeCase(
  family: Family,
  equations: FamilyEquations,
  start: Case,
  spawn: (cases: readonly Case[]) => void,
): Generator<void, FamilyCase> {
  const count = family.parameters.length;
  let where = start;
  const primes = primesBelow();
  for (let attempt = 0; attempt < MAX_ATTEMPTS; attempt++) {
    const field = primeField(primes.next().value as number);
    const random = seededRandom(attempt + 1);
    const point = modularPoint(where, count, field, random);
    if (point === undefined) continue;
    const terms = termsOn(where, family);
    if (terms.every((p) => p.isZero())) return everythingConserved(family, equations.range, where);
    const free = freeSpins(family, equations.range, where, terms, spawn);
    if (free !== undefined) return free;
    const elimination = new CaseElimination(equations, terms, where, field, point, spawn);
    let found: NullSpace;
    try {
      found = yield* elimination.run();
    } catch (error) {
      if (!(error instanceof UnluckyPoint)) throw error;
      where = error.where;
      continue;
    }
    where = found.where;
    const h: PolynomialDensity = family.terms.map(([word], t) => [word, terms[t]!]);
    const charges: FamilyCharge[] = found.vectors
      .map(({ range, entries }) => ({
        range,
        density: primitiveDensity(
          entries.map(([column, p]) => [equations.strings[column]!, p] as const),
          count,
        ),
      }))
      .reverse();
    let exact = true;
    for (const charge of charges) {
      exact &&= commutesOn(where, family.chain, h, charge.density);
      yield;
    }
    if (!exact) continue;
    const dimensionByRange = Array.from(
      { length: equations.range },
      (_, j) => charges.filter((q) => q.range <= j + 1).length,
    );
    const witness = rationalPoint(where, count, seededRandom(7)) ?? null;
    if (witness !== null) {
      const plain = searchNow(familyAt(family, witness), { range: equations.range }).dimensionByRange;
      if (plain.some((d, j) => d !== dimensionByRange[j]))
        throw new VerificationError(
          `family: the case has dimensions ${dimensionByRange}, the plain search at a point of it ${plain}`,
        );
    }
    return closedCase(where, dimensionByRange, charges, witness);
  }
  throw new VerificationError(`family: a case could not be closed in ${MAX_ATTEMPTS} attempts`);
}

function everythingConserved({ chain, parameters }: Family, range: number, where: Case): FamilyCase {
  const dimensions = Array.from({ length: range }, (_, j) => candidateCount(chain.cell, j + 1));
  return closedCase(where, dimensions, [], rationalPoint(where, parameters.length, seededRandom(7)) ?? null);
}

/**
 * Spins that do not interact: on a chain of single spins every field h ≠ 0 is a rotation of |h| Z, the same at every cell, and a
 * rotation keeps ranges. So the dimensions are those of Z, on all of the case; the charges are those of Z rotated, whose coefficients
 * need |h| and are not written out. Undefined where spins interact.
 */
function freeSpins(
  family: Family,
  range: number,
  where: Case,
  terms: readonly Polynomial[],
  spawn: (cases: readonly Case[]) => void,
): FamilyCase | undefined {
  const { chain, parameters } = family;
  if (chain.cell !== 1 || family.terms.some(([word], t) => !terms[t]!.isZero() && chain.range(word) > 1))
    return undefined;
  const length = terms.reduce((sum, p) => sum.plus(p.times(p)), Polynomial.zero);
  const rest = exclude(where, length);
  spawn(impose(where, length));
  if (rest === undefined)
    throw new VerificationError('family: a field that vanishes everywhere was not reduced to zero');
  const { dimensionByRange } = searchNow(parseModel('Z'), { range });
  return closedCase(
    rest,
    dimensionByRange,
    [],
    rationalPoint(rest, parameters.length, seededRandom(7)) ?? null,
  );
}

function closedCase(
  where: Case,
  dimensionByRange: readonly number[],
  charges: readonly FamilyCharge[],
  point: readonly Rational[] | null,
): FamilyCase {
  return Object.freeze({
    where,
    equations: Object.freeze(equationsOf(where)),
    nonZero: where.nonZero,
    dimensionByRange: Object.freeze(dimensionByRange),
    charges: Object.freeze(charges),
    point,
  });
}
