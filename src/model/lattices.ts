/**
 * Lattices of the trade by their bonds, and Hamiltonians with one two-spin coupling a class of bonds.
 *
 * A bond leads from a spin of a cell to a spin of the cell at an offset. The named ones list every bond of a cell once, grouped
 * in classes that a model may couple differently.
 */
import { Operator } from '../algebra/operator.ts';
import { lcm } from '../algebra/rational.ts';
import { letterAt, spanOf, type Word } from '../algebra/word.ts';
import { InputError, show } from '../errors.ts';
import { Box, type Extent, INFINITE, Lattice } from '../lattice/lattice.ts';
import { type LatticeModel, latticeModel, type PlacedStrings } from './lattice-model.ts';

export interface Bond {
  readonly from: number;
  readonly to: number;
  /** Cells from the first spin's cell to the second's, in each direction. */
  readonly offset: readonly number[];
}

export interface LatticeShape {
  readonly dimension: number;
  /** Spins a cell. */
  readonly basis: number;
  /** Bonds of one cell by class. */
  readonly bonds: Readonly<Record<string, readonly Bond[]>>;
}

const bond = (from: number, to: number, ...offset: number[]): Bond => ({ from, to, offset });

/** Nearest neighbours; the classes are the directions of the bonds. Common practice, no source. */
export const LATTICES = {
  chain: { dimension: 1, basis: 1, bonds: { x: [bond(0, 0, 1)] } },
  square: { dimension: 2, basis: 1, bonds: { x: [bond(0, 0, 1, 0)], y: [bond(0, 0, 0, 1)] } },
  triangular: {
    dimension: 2,
    basis: 1,
    bonds: { x: [bond(0, 0, 1, 0)], y: [bond(0, 0, 0, 1)], z: [bond(0, 0, 1, -1)] },
  },
  honeycomb: {
    dimension: 2,
    basis: 2,
    bonds: { x: [bond(0, 1, -1, 0)], y: [bond(0, 1, 0, -1)], z: [bond(0, 1, 0, 0)] },
  },
  cubic: {
    dimension: 3,
    basis: 1,
    bonds: { x: [bond(0, 0, 1, 0, 0)], y: [bond(0, 0, 0, 1, 0)], z: [bond(0, 0, 0, 0, 1)] },
  },
} as const satisfies Record<string, LatticeShape>;

export type LatticeName = keyof typeof LATTICES;

/** What acts on a lattice: two-letter densities on bonds, one-letter densities on spins. */
export interface Couplings {
  /** By class of bonds: the first letter acts on the spin a bond leads from. A single operator couples every class alike. */
  readonly bonds: Operator | Readonly<Record<string, Operator>>;
  /** On every spin, or one a spin of the cell. */
  readonly field?: Operator | readonly Operator[];
}

/**
 * @param extents infinite in every direction by default
 * @throws InputError for a class of bonds the shape does not have, couplings of other than two spins, and as `latticeModel`
 */
export function bondModel(
  shape: LatticeShape,
  { bonds, field }: Couplings,
  extents: readonly Extent[] = Array.from({ length: shape.dimension }, () => INFINITE),
): LatticeModel {
  if (extents.length !== shape.dimension)
    throw new InputError('lattice', `${shape.dimension} directions`, `${extents.length}`);
  const classes = Object.entries(shape.bonds);
  for (const [name, list] of classes)
    for (const { from, to, offset } of list)
      if (!(inCell(from, shape.basis) && inCell(to, shape.basis) && offset.length === shape.dimension))
        throw new InputError(
          `bond ${name}`,
          `spins of a cell of ${shape.basis} and an offset of ${shape.dimension} cells`,
          `${from} to ${to}, offset (${offset.join(', ')})`,
        );
  const couplings: [string, Operator][] =
    bonds instanceof Operator
      ? classes.map(([name]) => [name, bonds])
      : Object.entries(bonds as Readonly<Record<string, Operator>>);
  const reach = Math.max(0, ...classes.flatMap(([, list]) => list.flatMap((b) => b.offset.map(Math.abs))));
  const box = new Box(
    shape.basis,
    extents.map(() => -reach),
    extents.map(() => 2 * reach + 1),
  );
  const terms: [Word, bigint][] = [];
  const fields = field === undefined ? [] : field instanceof Operator ? spread(field, shape.basis) : field;
  const all = [...couplings.map(([, operator]) => operator), ...(fields as readonly Operator[])];
  const denominator = all.reduce((d, operator) => lcm(d, operator.denominator), 1n);
  const put = (operator: Operator, spins: readonly number[], who: string): void => {
    for (const [word, value] of operator.numerators) {
      if (spanOf(word) > spins.length)
        throw new InputError(who, `words of at most ${spins.length} letters`, `${spanOf(word)}`);
      let placed = 0n;
      spins.forEach((spin, i) => {
        placed |= BigInt(letterAt(word, i)) << BigInt(2 * spin);
      });
      terms.push([placed, (value * denominator) / operator.denominator]);
    }
  };
  const home = extents.map(() => 0);
  for (const [name, operator] of couplings) {
    const list = Object.hasOwn(shape.bonds, name) ? shape.bonds[name]! : undefined;
    if (list === undefined)
      throw new InputError('bonds', `a class of bonds: ${classes.map(([c]) => c).join(', ')}`, show(name));
    for (const { from, to, offset } of list)
      put(
        operator,
        [box.indexOf({ cell: home, spin: from }), box.indexOf({ cell: offset, spin: to })],
        `bond ${name}`,
      );
  }
  if (fields.length > shape.basis)
    throw new InputError(
      'field',
      `at most ${shape.basis} operators, one a spin of the cell`,
      `${fields.length}`,
    );
  fields.forEach((operator, spin) => {
    put(operator, [box.indexOf({ cell: home, spin })], 'field');
  });
  const placed: PlacedStrings = { box, operator: Operator.fromIntegers(terms, denominator) };
  return latticeModel(new Lattice(shape.basis, extents), placed);
}

function inCell(spin: number, basis: number): boolean {
  return Number.isInteger(spin) && spin >= 0 && spin < basis;
}

function spread(operator: Operator, basis: number): readonly Operator[] {
  return Array.from({ length: basis }, () => operator);
}
