/**
 * Currents of charges, exact. For a density q_j = τ_j(q) and a generator G = Σ τ_m(g) with [G, Q] = 0,
 *
 *     i[G, q_j] = J_j − J_{j+1},   J_j = τ_j(J).
 *
 * J is unique up to a constant, but belongs to the density: another density of the same Q has another J. G = H gives the ordinary
 * current, G = Q_b the current of Q_a under the flow of Q_b. Source of the equation: "Transport and conservation laws",
 * Phys. Rev. B 55, 11029 (1997); currents of generalised flows are common practice, no source.
 */
import { Operator } from '../algebra/operator.ts';
import { firstSpin, type Word } from '../algebra/word.ts';
import { InputError } from '../errors.ts';
import type { Chain } from '../lattice/chain.ts';

/** An operator at a definite place: spin 0 of `operator` is the first spin of cell `cell` (mostly negative). */
export interface Placed {
  readonly cell: number;
  readonly operator: Operator;
}

export interface Current {
  /** J_0, where it stands. J_j is its translate by j cells. */
  readonly placed: Placed;
  /** The density of Σ_j J_j, in representatives. */
  readonly density: Operator;
}

/** `i[G, q]` for the whole sum G and a local operator q that stands on cells 0, 1, …. Cost: terms of g × terms of q × range. */
export function localCommutator(chain: Chain, generator: Operator, local: Operator): Placed {
  const g = chain.normalise(generator);
  const range = chain.rangeOf(g);
  if (g.isZero() || local.isZero()) return { cell: 0, operator: Operator.zero };
  const cells = Math.ceil(local.span / chain.cell);
  const moved = local.mapWords((word) => chain.translate(word, range - 1));
  let sum = Operator.zero;
  for (let at = 0; at < cells + range - 1; at++)
    sum = sum.plus(g.mapWords((word) => chain.translate(word, at)).bracket(moved));
  return { cell: 1 - range, operator: sum.times(2) };
}

/**
 * The current of the density `density` under the flow of `generator`.
 *
 * @throws InputError when the sum of the density is not conserved by the generator: there is then no current
 */
export function currentOf(chain: Chain, generator: Operator, density: Operator): Current {
  const { cell, operator } = localCommutator(chain, generator, density);
  const byRepresentative = new Map<Word, [at: number, value: bigint][]>();
  for (const [word, value] of operator.numerators) {
    const representative = chain.representative(word);
    const list = byRepresentative.get(representative);
    const entry: [number, bigint] = [Math.floor(firstSpin(word) / chain.cell), value];
    if (list === undefined) byRepresentative.set(representative, [entry]);
    else list.push(entry);
  }
  // i[G, q]_c = J_c − J_{c−1} for the coefficients at cell c of one representative: J sums them up from the left.
  const terms: [Word, bigint][] = [];
  for (const [representative, list] of byRepresentative) {
    list.sort((a, b) => a[0] - b[0]);
    let running = 0n;
    list.forEach(([at, value], i) => {
      running += value;
      if (running !== 0n && i + 1 < list.length)
        for (let c = at; c < list[i + 1]![0]; c++) terms.push([chain.translate(representative, c), running]);
    });
    if (running !== 0n)
      throw new InputError('current', 'a density whose sum is conserved by the generator', 'another one');
  }
  const local = Operator.fromIntegers(terms, operator.denominator);
  return Object.freeze({
    placed: Object.freeze({ cell, operator: local }),
    density: chain.normalise(local),
  });
}

/** Does `i[G, q_j] = J_j − J_{j+1}` hold, term by term? An independent look at a current, by plain subtraction. */
export function isContinuous(
  chain: Chain,
  generator: Operator,
  density: Operator,
  { placed }: Current,
): boolean {
  const left = localCommutator(chain, generator, density);
  const lowest = Math.min(left.cell, placed.cell);
  const lift = ({ cell, operator }: Placed, by = 0) =>
    operator.mapWords((word) => chain.translate(word, cell + by - lowest));
  return lift(left).equals(lift(placed).minus(lift(placed, 1)));
}
