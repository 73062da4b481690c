/** How charges relate: commutators, inner products, parities, and which are derivatives of a ladder. All exact. */
import { Operator } from '../algebra/operator.ts';
import type { Rational } from '../algebra/rational.ts';
import { letterCounts } from '../algebra/word.ts';
import type { Chain } from '../lattice/chain.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { SearchResult } from '../search/result.ts';
import { currentOf } from './currents.ts';
import { innerProduct } from './inner-product.ts';
import { orthogonalTo } from './overlaps.ts';
import { Span } from './span.ts';

export interface Commutator {
  readonly a: number;
  readonly b: number;
  /** The density of i[Q_a, Q_b], in representatives; not zero. */
  readonly density: Operator;
  /** i[Q_a, Q_b] = Σ expansion[i] Q_i; null when it reaches beyond the searched range. It is conserved either way. */
  readonly expansion: readonly Rational[] | null;
}

/** The sign under a map of all spins, or null where the sum is neither even nor odd. */
export type Sign = 1 | -1 | null;

export interface Parities {
  /** Under the mirror image that turns the order of all spins. */
  readonly reflection: Sign;
  /** Under conjugation by ∏X, ∏Y, ∏Z over all spins. */
  readonly flipX: Sign;
  readonly flipY: Sign;
  readonly flipZ: Sign;
  /** Under transposition in the Z basis, Y → −Y: for real H the sign under time reversal without spin flip. */
  readonly transposition: Sign;
}

export interface Derivative {
  /** Index of the charge the ladder was applied to. */
  readonly from: number;
  /** The density of i[B, Q]. */
  readonly density: Operator;
  /** i[B, Q] = Σ expansion[i] Q_i; null when it is no combination of the charges found. */
  readonly expansion: readonly Rational[] | null;
  readonly conserved: boolean;
}

export interface ChargeAlgebra {
  /** Pairs a < b that do not commute; all others do, exactly. */
  readonly commutators: readonly Commutator[];
  /** (Q_a|Q_b) per cell at infinite temperature. */
  readonly gram: readonly (readonly Rational[])[];
  /** Orthogonal combinations, Q_i minus its projection on those before; squared norms are `norms`. */
  readonly orthogonal: readonly Operator[];
  readonly norms: readonly Rational[];
  readonly parities: readonly Parities[];
  readonly derivatives: readonly Derivative[];
}

/** Cost: pairs of charges × the product of their numbers of strings × range. `chargeAlgebraSteps` can be stopped on its way. */
export function chargeAlgebra(result: SearchResult): ChargeAlgebra {
  const steps = chargeAlgebraSteps(result);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
  }
}

/** The same in steps, each the work for one charge; yields the share done. */
export function* chargeAlgebraSteps(result: SearchResult): Generator<number, ChargeAlgebra> {
  const { charges, hamiltonian } = result;
  const { chain } = hamiltonian;
  const span = new Span();
  for (const { density } of charges) span.add(density);
  const commutators: Commutator[] = [];
  const derivatives: Derivative[] = [];
  for (const [a, qa] of charges.entries()) {
    yield a / charges.length;
    for (let b = a + 1; b < charges.length; b++) {
      const density = chain.bracket(qa.density, charges[b]!.density).times(2);
      if (!density.isZero()) commutators.push({ a, b, density, expansion: span.coordinates(density) });
    }
    const derivative = boostDerivative(hamiltonian, qa.density);
    derivatives.push({
      from: a,
      density: derivative,
      expansion: span.coordinates(derivative),
      conserved: chain.bracket(hamiltonian.density, derivative).isZero(),
    });
  }
  const directions: { density: Operator; norm: Rational }[] = [];
  for (const { density } of charges) {
    const direction = orthogonalTo(chain, density, directions);
    directions.push({ density: direction, norm: innerProduct(chain, direction, direction) });
  }
  return Object.freeze({
    commutators,
    gram: charges.map((a) => charges.map((b) => innerProduct(chain, a.density, b.density))),
    orthogonal: directions.map((d) => d.density),
    norms: directions.map((d) => d.norm),
    parities: charges.map(({ density }) => paritiesOf(chain, density)),
    derivatives,
  });
}

export function paritiesOf(chain: Chain, density: Operator): Parities {
  const q = chain.normalise(density);
  const sign = (image: Operator): Sign => (image.equals(q) ? 1 : image.equals(q.times(-1)) ? -1 : null);
  const flip = (axis: 0 | 1 | 2): Sign =>
    sign(
      q.mapIntegers((word, value) => {
        const counts = letterCounts(word);
        // Letters that anticommute with the flip: the two other axes.
        const odd = (counts[(axis + 1) % 3]! + counts[(axis + 2) % 3]!) & 1;
        return [word, odd === 1 ? -value : value];
      }),
    );
  return {
    reflection: sign(q.mapWords((word) => chain.reflect(word, 'spins'))),
    flipX: flip(0),
    flipY: flip(1),
    flipZ: flip(2),
    transposition: sign(
      q.mapIntegers((word, value) => [word, (letterCounts(word)[1] & 1) === 1 ? -value : value]),
    ),
  };
}

/**
 * The density of i[B, Q] for the boost B = Σ_j j·h_j of a charge Q, up to the sign convention of B. It equals minus the sum of the
 * currents of h_j under the flow of Q, so it is translation invariant although B is not. h is the density of H with each
 * term spread evenly over the places it may take within the range of H; another density adds a commutator of Q with a
 * local sum. Source: "Integrability from a single conservation law in quantum spin chains", arXiv:2508.20713 (2026), for the ladder.
 */
export function boostDerivative(h: Hamiltonian, charge: Operator): Operator {
  return currentOf(h.chain, charge, spread(h)).density.times(-1);
}

/** The density of H, each term in the mean of its places on cells 0 … range − 1. */
function spread({ chain, density, range }: Hamiltonian): Operator {
  let sum = Operator.zero;
  for (let r = 1; r <= range; r++) {
    const part = density.filter((word) => chain.range(word) === r);
    const places = range - r + 1;
    for (let at = 0; at < places; at++)
      sum = sum.plus(
        part
          .mapWords((word) => chain.translate(word, at))
          .times({ numerator: 1n, denominator: BigInt(places) }),
      );
  }
  return sum;
}
