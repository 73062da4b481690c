/**
 * All wave numbers at once: for which ω on the unit circle has a chain charges Σ_j ω^j τ_j(q), q of range ≤ k?
 *
 * The equations are a matrix over Q[ω, 1/ω]. Its diagonal form, computed exactly, gives the dimension at all but finitely many ω
 * and, as roots of the diagonal entries, every exception; nothing is modular or numerical. Roots of unity are told by their
 * order, other points of the circle by a polynomial and isolating intervals for 2 cos θ, ω = e^{iθ}.
 */
import { cyclotomicPolynomial } from '../../algebra/cyclotomic.ts';
import {
  commonFactor,
  degree,
  divides,
  type Interval,
  primitivePart,
  quotientOf,
  realRootsBetween,
  squareFree,
  trimmed,
  type Univariate,
} from '../../algebra/univariate.ts';
import { InputError } from '../../errors.ts';
import { diagonalForm, type Laurent, type LaurentRow, laurent } from '../../linear/laurent.ts';
import type { LatticeModel } from '../../model/lattice-model.ts';
import { peel } from './peel.ts';
import { StringSpace } from './space.ts';
import { latticeSystem } from './system.ts';

/** A set of exceptional points on the unit circle, conjugate over Q or sharing a polynomial. */
export interface ExceptionalWaves {
  /** n where the points are the primitive n-th roots of unity; null for others. */
  readonly order: number | null;
  /** Integer coefficients, lowest power first: its roots on the unit circle are the points. */
  readonly polynomial: Univariate;
  readonly points: number;
  /** Dimension of the charges at each point. */
  readonly dimension: number;
  /** Of 2 cos θ, one a pair of conjugate points; for points that are no roots of unity. */
  readonly cosines: readonly Interval[];
}

export interface AllWaves {
  readonly range: number;
  /** Dimension of the charges at every point of the unit circle that is not listed. */
  readonly dimension: number;
  readonly exceptions: readonly ExceptionalWaves[];
  readonly candidates: number;
}

/** Stages of very different length: candidates, equations that settle one of them, the rest as a matrix, its diagonal form. */
export type WavesProgress = 'list' | 'peel' | 'assemble' | 'solve';

/** Width of isolating intervals: 2^−bits. */
const BITS = 30;

/**
 * @param onProgress called every few milliseconds; whatever it throws stops the work
 * @throws InputError unless the model is an infinite chain; LimitError for too many candidates
 */
export function allWaves(
  model: LatticeModel,
  range: number,
  onProgress: (stage: WavesProgress) => void = () => {},
): AllWaves {
  assertChain(model);
  const space = new StringSpace(model, [range], { steps: [1], exponents: [1], order: 1 });
  const keys = space.candidates(() => onProgress('list'));
  const left = peel(space, keys, () => onProgress('peel'));
  const { matrix, entries } = latticeSystem(
    space,
    keys,
    left,
    (e) => e,
    () => onProgress('assemble'),
  );
  const rows: LaurentRow[] = [];
  for (let r = 0; r < matrix.rows; r++) {
    const byColumn = new Map<number, Map<number, bigint>>();
    for (let i = matrix.start[r]!; i < matrix.start[r + 1]!; i++) {
      const { value, exponent } = entries[matrix.value[i]!]!;
      const sum = byColumn.get(matrix.column[i]!) ?? new Map<number, bigint>();
      sum.set(exponent, (sum.get(exponent) ?? 0n) + value);
      byColumn.set(matrix.column[i]!, sum);
    }
    const row: LaurentRow = new Map();
    for (const [column, sum] of byColumn) {
      const value = fromPowers(sum);
      if (value !== undefined) row.set(column, value);
    }
    if (row.size > 0) rows.push(row);
  }
  const { nullity, divisors } = diagonalForm(rows, matrix.columns, () => onProgress('solve'));
  return Object.freeze({
    range,
    dimension: nullity,
    exceptions: Object.freeze(exceptionsOf(divisors, nullity)),
    candidates: keys.length / space.limbs,
  });
}

/** @throws InputError unless the model is an infinite chain */
export function assertChain({ lattice: { extents } }: LatticeModel): void {
  if (extents.length !== 1 || extents[0]!.kind !== 'infinite')
    throw new InputError('all wave numbers', 'an infinite chain', 'another lattice');
}

function fromPowers(powers: ReadonlyMap<number, bigint>): Laurent | undefined {
  const low = Math.min(...powers.keys());
  const coefficients = new Array<bigint>(Math.max(...powers.keys()) - low + 1).fill(0n);
  for (const [e, v] of powers) coefficients[e - low]! += v;
  return laurent(low, coefficients);
}

function exceptionsOf(divisors: readonly Univariate[], generic: number): ExceptionalWaves[] {
  const found: ExceptionalWaves[] = [];
  let rest = divisors.map(squareFree);
  const highest = Math.max(0, ...rest.map(degree));
  // φ(n) ≥ √(n/2): no larger order has so small a degree.
  for (let n = 1; n <= 2 * highest * highest; n++) {
    if (eulerPhi(n) > highest) continue;
    const polynomial = cyclotomicPolynomial(n);
    const hits = rest.filter((f) => degree(f) >= degree(polynomial) && divides(polynomial, f)).length;
    if (hits === 0) continue;
    rest = rest.map((f) =>
      degree(f) >= degree(polynomial) && divides(polynomial, f) ? quotientOf(f, polynomial) : f,
    );
    found.push({ order: n, polynomial, points: degree(polynomial), dimension: generic + hits, cosines: [] });
  }
  // A root on the circle of a rational polynomial is one of the reversed polynomial, too.
  const circular = rest.map((f) => commonFactor(f, [...f].reverse())).filter((f) => degree(f) > 0);
  for (const factor of coprimeBase(circular)) {
    const cosines = realRootsBetween(inCosines(factor), -2n, 2n, BITS);
    if (cosines.length === 0) continue;
    found.push({
      order: null,
      polynomial: factor,
      points: 2 * cosines.length,
      dimension: generic + circular.filter((f) => divides(factor, f)).length,
      cosines,
    });
  }
  return found;
}

function eulerPhi(n: number): number {
  let phi = n;
  let rest = n;
  for (let p = 2; p * p <= rest; p++)
    if (rest % p === 0) {
      phi -= phi / p;
      while (rest % p === 0) rest /= p;
    }
  return rest > 1 ? phi - phi / rest : phi;
}

/** Pairwise coprime polynomials of which each of the square-free ones given is a product. */
function coprimeBase(polynomials: readonly Univariate[]): Univariate[] {
  const base: Univariate[] = [];
  for (const polynomial of polynomials) {
    let rest = primitivePart(polynomial);
    for (let i = 0; i < base.length && degree(rest) > 0; i++) {
      const common = commonFactor(base[i]!, rest);
      if (degree(common) === 0) continue;
      rest = quotientOf(rest, common);
      const other = quotientOf(base[i]!, common);
      base[i] = common;
      if (degree(other) > 0) base.push(other);
    }
    if (degree(rest) > 0) base.push(rest);
  }
  return base;
}

/** g with f(x) = x^m g(x + 1/x) for a palindromic f of degree 2m without roots ±1. */
function inCosines(f: Univariate): bigint[] {
  const m = degree(f) / 2;
  // x^k + x^−k as a polynomial in y: T₀ = 2, T₁ = y, T_{k+1} = y T_k − T_{k−1}.
  let [before, current]: bigint[][] = [[2n], [0n, 1n]];
  const sum = new Array<bigint>(m + 1).fill(0n);
  sum[0] = f[m]!;
  for (let k = 1; k <= m; k++) {
    current!.forEach((v, i) => {
      sum[i]! += v * f[m + k]!;
    });
    const next = [0n, ...current!];
    before!.forEach((v, i) => {
      next[i]! -= v;
    });
    [before, current] = [current, next];
  }
  return trimmed(sum);
}
