/** A validated model: an exact translation-invariant Hamiltonian on a chain of cells. */
import type { Operator } from '../algebra/operator.ts';
import { clipped, printedAs } from '../algebra/printed.ts';
import { InputError } from '../errors.ts';
import type { Chain, Reflection } from '../lattice/chain.ts';

/** `H = Σ_j τ_j(density)`: immutable, `density` in representatives and without the identity. */
export interface Hamiltonian {
  readonly chain: Chain;
  readonly density: Operator;
  /** Cells from the first to the last on which one term acts. */
  readonly range: number;
  readonly reflection: Reflection | null;
}

/**
 * Normalises a density to representatives; a constant is dropped, since it commutes with everything.
 *
 * @throws InputError when nothing is left: the zero Hamiltonian conserves everything and nothing is to be found
 */
export function hamiltonianOf(chain: Chain, density: Operator): Hamiltonian {
  const normal = chain.normalise(density);
  if (normal.isZero()) throw new InputError('model', 'a density with a term that is not a constant', 'zero');
  const h: Hamiltonian = {
    chain,
    density: normal,
    range: chain.rangeOf(normal),
    reflection: chain.reflectionOf(normal),
  };
  return Object.freeze(printedAs(h, shortForm));
}

function shortForm({ chain, density, range }: Hamiltonian): string {
  const cell = chain.cell === 1 ? '' : `, ${chain.cell} spins a cell`;
  return `Hamiltonian(${clipped(density.toString(), `${density.size} terms`)}; range ${range}${cell})`;
}
