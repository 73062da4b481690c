/**
 * Overlaps with charges and Mazur's lower bound on long-time autocorrelations, exact.
 *
 * For A = Σ_j τ_j(a) without the identity, and charges Q_1 … Q_m with Gram matrix G and overlaps v_i = (A|Q_i), all per cell:
 *
 *     lim_{T→∞} 1/T ∫_0^T (A(t)|A) dt  ≥  vᵀ G⁻¹ v .
 *
 * A single local observable a has ⟨a Q_i⟩ = v_i, but ⟨Q_i Q_j⟩ = L·G_ij on a ring of L cells: its bound is vᵀ G⁻¹ v / L. Source:
 * "Transport and conservation laws", Phys. Rev. B 55, 11029 (1997).
 */
import { Operator } from '../algebra/operator.ts';
import { add, divide, type Exact, exact, multiply, type Rational, rational } from '../algebra/rational.ts';
import { InputError, VerificationError } from '../errors.ts';
import type { Chain } from '../lattice/chain.ts';
import type { SearchResult } from '../search/result.ts';
import { innerProduct } from './inner-product.ts';

export interface MazurBound {
  /** Charges of range ≤ `range` were used. */
  readonly range: number;
  readonly charges: number;
  /** vᵀ G⁻¹ v per cell: for the sum A the bound itself; for one local a on a ring of L cells divide by L. */
  readonly bound: Rational;
  /** The bound over (A|A): 1 says that A is a combination of charges, up to what the inner product does not see. */
  readonly share: Rational;
}

export interface OverlapOptions {
  /**
   * μ = ⟨Z⟩ of every spin, −1 < μ < 1: the infinite-temperature state at this magnetisation, with connected products. Needs ΣZ conserved.
   * The default 0 is the trace.
   */
  readonly magnetisation?: Exact;
}

/**
 * The bound as a function of the range of the charges used, 1 … `result.range`. More charges never lower it.
 *
 * @throws InputError for an observable without a part that acts on a spin, or a magnetisation that is not stationary
 */
export function mazurBounds(
  result: SearchResult,
  observable: Operator,
  options: OverlapOptions = {},
): readonly MazurBound[] {
  const magnetisation = options.magnetisation === undefined ? undefined : exact(options.magnetisation);
  const { chain, density } = result.hamiltonian;
  const a = chain.normalise(observable);
  if (a.isZero()) throw new InputError('overlap', 'an observable that acts on a spin', 'a constant');
  if (magnetisation !== undefined && magnetisation.numerator !== 0n)
    requireStationary(chain, density, magnetisation);
  const norm = innerProduct(chain, a, a, magnetisation);
  if (norm.numerator === 0n) throw new InputError('overlap', 'an observable that fluctuates', 'norm 0');
  const bounds: MazurBound[] = [];
  const projection = new Projection(chain, a, magnetisation);
  let used = 0;
  for (let range = 1; range <= result.range; range++) {
    for (; used < result.charges.length && result.charges[used]!.range <= range; used++)
      projection.include(result.charges[used]!.density);
    const { bound } = projection;
    bounds.push(Object.freeze({ range, charges: used, bound, share: divide(bound, norm) }));
  }
  return Object.freeze(bounds);
}

function requireStationary(
  chain: Chain,
  density: Operator,
  { numerator: n, denominator: d }: Rational,
): void {
  if (n >= d || -n >= d) throw new InputError('magnetisation', 'a value between -1 and 1', `${n}/${d}`);
  if (!chain.bracket(density, totalZ(chain)).isZero())
    throw new InputError('magnetisation', 'a Hamiltonian that conserves the sum of all Z', 'another one');
}

/** Σ Z over the spins of a cell. */
function totalZ(chain: Chain): Operator {
  return Operator.fromIntegers(
    Array.from({ length: chain.cell }, (_, s) => [2n << BigInt(2 * s), 1n] as const),
  );
}

/** Gram–Schmidt, one charge at a time: the projection grows by the square of the overlap with the new direction. */
class Projection {
  bound: Rational = rational(0n);
  readonly #directions: { density: Operator; norm: Rational }[] = [];

  constructor(
    readonly chain: Chain,
    readonly a: Operator,
    readonly magnetisation: Rational | undefined,
  ) {}

  include(charge: Operator): void {
    const direction = orthogonalTo(this.chain, charge, this.#directions, this.magnetisation);
    const norm = innerProduct(this.chain, direction, direction, this.magnetisation);
    if (norm.numerator < 0n) throw new VerificationError('overlap: a negative norm');
    if (norm.numerator === 0n) return;
    this.#directions.push({ density: direction, norm });
    const overlap = innerProduct(this.chain, this.a, direction, this.magnetisation);
    this.bound = add(this.bound, divide(multiply(overlap, overlap), norm));
  }
}

/** The part of a density orthogonal to others that are orthogonal to each other. */
export function orthogonalTo(
  chain: Chain,
  density: Operator,
  directions: readonly { readonly density: Operator; readonly norm: Rational }[],
  magnetisation?: Rational,
): Operator {
  let rest = density;
  for (const { density: d, norm } of directions) {
    const overlap = innerProduct(chain, rest, d, magnetisation);
    if (overlap.numerator !== 0n) rest = rest.minus(d.times(divide(overlap, norm)));
  }
  return rest;
}
