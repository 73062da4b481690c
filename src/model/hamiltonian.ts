/** A validated model: an exact translation-invariant Hamiltonian on a chain of cells. */
import type { Operator } from '../algebra/operator.ts';
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
  return Object.freeze({
    chain,
    density: normal,
    range: chain.rangeOf(normal),
    reflection: chain.reflectionOf(normal),
  });
}
