/** Is this one conserved? The exact commutator of a candidate, its expansion in known charges, or the smallest correction. */
import { Operator } from '../algebra/operator.ts';
import { type Rational, rational } from '../algebra/rational.ts';
import type { Word } from '../algebra/word.ts';
import { InputError, LimitError, show, VerificationError } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { candidateCount } from '../search/estimate.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import type { SearchResult } from '../search/result.ts';
import { innerProduct } from './inner-product.ts';
import { orthogonalTo } from './overlaps.ts';
import { Span } from './span.ts';

export interface Residual {
  readonly conserved: boolean;
  /** The density of i[H, Q], exact, in representatives; zero when Q is conserved. */
  readonly commutator: Operator;
  /** Q = Σ expansion[i] · charges[i]. Null without a search result, when Q is not conserved, or has a longer range than was searched. */
  readonly expansion: readonly Rational[] | null;
}

/**
 * @param candidate a density; Q is the sum of its translates
 * @param found a search of the same H: the basis to expand in
 */
export function residual(h: Hamiltonian, candidate: Operator, found?: SearchResult): Residual {
  const q = h.chain.normalise(candidate);
  const commutator = h.chain.bracket(h.density, q).times(2);
  let expansion: readonly Rational[] | null = null;
  if (commutator.isZero() && found !== undefined) {
    if (found.hamiltonian.chain.cell !== h.chain.cell || !found.hamiltonian.density.equals(h.density))
      throw new InputError('residual', 'the search result of the same Hamiltonian', 'one of another');
    const span = new Span();
    for (const charge of found.charges) span.add(charge.density);
    expansion = span.coordinates(q);
    if (expansion === null && h.chain.rangeOf(q) <= found.range)
      throw new VerificationError('residual: a conserved sum outside a basis that is complete');
  }
  return Object.freeze({ conserved: commutator.isZero(), commutator, expansion });
}

export interface Correction {
  /** P, in representatives; `[H, Q + P] = 0` exactly. */
  readonly density: Operator;
  readonly range: number;
}

export interface CorrectionOptions {
  /** Largest range of the correction, in cells. */
  readonly range: number;
}

/** More candidates than this are refused: the system is held in memory, about 2 kB a candidate. */
const MAX_CANDIDATES = 300_000;
const BYTES_A_CANDIDATE = 2_000;

/**
 * The correction P of smallest range ≤ `range` with `[H, Q + P] = 0`, or null: a proof that there is none that leaves the strings of Q of its full
 * range as they are (without that, P = −Q would always do). A conserved Q needs none and gives the zero operator, of range 0.
 * Where charges could be added to P, P has none of their leading strings. The nearest charge, with every string free: `nearestCharge`.
 *
 * @throws InputError for a range that is no positive integer or a zero candidate; LimitError when there are too many candidates
 */
export function smallestCorrection(
  h: Hamiltonian,
  candidate: Operator,
  options: CorrectionOptions,
): Correction | null {
  const steps = correctionSteps(h, candidate, options);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
  }
}

/** The same in steps of a range each; yields the range that comes next, so that a caller can show it or stop. Errors as above. */
export function* correctionSteps(
  h: Hamiltonian,
  candidate: Operator,
  { range }: CorrectionOptions,
): Generator<number, Correction | null> {
  if (!(Number.isInteger(range) && range >= 1))
    throw new InputError('correction', 'a range of one cell or more, a whole number', show(range));
  const q = h.chain.normalise(candidate);
  if (q.isZero()) throw new InputError('correction', 'a candidate with a term that acts on a spin', 'zero');
  const image = h.chain.bracket(h.density, q);
  if (image.isZero()) return Object.freeze({ density: Operator.zero, range: 0 });
  const own = h.chain.rangeOf(q);
  for (let k = 1; k <= range; k++) {
    correctionBytes(h.chain.cell, k);
    yield k;
    const words = representatives(h, k).filter(
      (word) => !(q.numerators.has(word) && h.chain.range(word) === own),
    );
    const density = solve(h, image, words);
    if (density === null) continue;
    if (!h.chain.bracket(h.density, q.plus(density)).isZero())
      throw new VerificationError('correction: the corrected candidate does not commute');
    return Object.freeze({ density, range: h.chain.rangeOf(density) });
  }
  return null;
}

/**
 * Bytes that the correction of a range may take.
 *
 * @throws LimitError when there are too many candidates
 */
export function correctionBytes(cell: number, range: number): number {
  const candidates = candidateCount(cell, range);
  if (candidates > MAX_CANDIDATES)
    throw new LimitError(
      `correction: range ${range} has ${candidates} candidates, more than ${MAX_CANDIDATES}`,
    );
  return candidates * BYTES_A_CANDIDATE;
}

/** All representatives of range ≤ k, longest first: the order in which charges lead. */
function representatives({ chain }: Hamiltonian, k: number): Word[] {
  const words: Word[] = [];
  const first = (1n << BigInt(2 * chain.cell)) - 1n;
  for (let word = 1n; word < 4n ** BigInt(chain.cell * k); word++)
    if ((word & first) !== 0n) words.push(word);
  return words.reverse();
}

/**
 * P with i[H, P]/2 = −image among combinations of the words, or null. The null space of [image | M], by two bounds that meet: none of its
 * vectors has an entry at the image exactly when there is no P.
 */
function solve(h: Hamiltonian, image: Operator, words: readonly Word[]): Operator | null {
  const unit = h.density.denominator * image.denominator;
  const columns = [
    image,
    ...words.map((word) => h.chain.bracket(h.density, Operator.fromIntegers([[word, 1n]]))),
  ];
  const matrix = new MatrixBuilder<Word>();
  for (const [column, operator] of columns.entries())
    for (const [word, value] of operator.times(unit).numerators) matrix.add(word, column, value);
  const vector = exactNullSpace(matrix.finish(columns.length)).find(({ columns: at }) => at[0] === 0);
  if (vector === undefined) return null;
  const own = vector.values[0]!;
  return Operator.fromTerms(
    vector.columns.slice(1).map((c, i) => [words[c - 1]!, rational(vector.values[i + 1]!, own)] as const),
  );
}

export interface NearestCharge {
  /** The projection of Q on the charges found, in representatives. Zero when Q is orthogonal to all of them. */
  readonly density: Operator;
  /** (Q − projection | Q − projection) per cell, the squared distance at infinite temperature. */
  readonly distance: Rational;
}

/** The charge of range ≤ `found.range` nearest to Q in the infinite-temperature norm: the smallest correction by that measure. */
export function nearestCharge(found: SearchResult, candidate: Operator): NearestCharge {
  const { chain } = found.hamiltonian;
  const q = chain.normalise(candidate);
  const directions: { density: Operator; norm: Rational }[] = [];
  for (const charge of found.charges) {
    const density = orthogonalTo(chain, charge.density, directions);
    directions.push({ density, norm: innerProduct(chain, density, density) });
  }
  const rest = orthogonalTo(chain, q, directions);
  return Object.freeze({ density: q.minus(rest), distance: innerProduct(chain, rest, rest) });
}
