/**
 * Lattices: a cell of spins repeated in one, two or three directions, each infinite, closed to a ring, or open.
 *
 * A site is a cell and a spin of the cell. Everything that searches on a lattice sees it through three notions: the lattice, the
 * translations that leave a charge unchanged (or multiply it by a phase), and the window that its strings have to fit.
 * The infinite chain of `chain.ts` is the case of one infinite direction.
 */
import { InputError, show } from '../errors.ts';
import { MAX_CELL } from './chain.ts';

/** One direction of a lattice. */
export type Extent =
  | { readonly kind: 'infinite' }
  | { readonly kind: 'ring'; readonly cells: number }
  | { readonly kind: 'open'; readonly cells: number };

export const INFINITE: Extent = Object.freeze({ kind: 'infinite' });

/** Longest finite direction, in cells. */
export const MAX_CELLS = 1_000;

/** Cell coordinates, one number a direction, and the spin of the cell. */
export interface LatticeSite {
  readonly cell: readonly number[];
  readonly spin: number;
}

export class Lattice {
  /**
   * @param cell number of spins-1/2 in the repeating unit (the basis of the lattice)
   * @param extents one entry a direction, one to three directions
   */
  constructor(
    readonly cell: number,
    readonly extents: readonly Extent[],
  ) {
    if (!(Number.isInteger(cell) && cell >= 1 && cell <= MAX_CELL))
      throw new InputError('lattice', `a cell of 1 to ${MAX_CELL} spins`, show(cell));
    if (!(extents.length >= 1 && extents.length <= 3))
      throw new InputError('lattice', 'one, two or three directions', `${extents.length}`);
    for (const extent of extents)
      if (
        extent.kind !== 'infinite' &&
        !(Number.isInteger(extent.cells) && extent.cells >= 1 && extent.cells <= MAX_CELLS)
      )
        throw new InputError('lattice', `1 to ${MAX_CELLS} cells in a direction`, show(extent.cells));
  }

  get dimension(): number {
    return this.extents.length;
  }
}

/** A block of cells: strings on it are packed words, spins of a cell first, then cells along the first direction, and so on. */
export class Box {
  constructor(
    readonly cell: number,
    readonly low: readonly number[],
    /** Cells in each direction. */
    readonly size: readonly number[],
  ) {}

  get cells(): number {
    return this.size.reduce((product, s) => product * s, 1);
  }

  get spins(): number {
    return this.cells * this.cell;
  }

  /** The spin of the block that is a site; the site must lie in it. */
  indexOf(site: LatticeSite): number {
    let index = 0;
    for (let d = this.size.length - 1; d >= 0; d--)
      index = index * this.size[d]! + site.cell[d]! - this.low[d]!;
    return index * this.cell + site.spin;
  }

  siteAt(index: number): LatticeSite {
    let rest = Math.floor(index / this.cell);
    const cell = this.size.map((s, d) => {
      const at = rest % s;
      rest = (rest - at) / s;
      return at + this.low[d]!;
    });
    return { cell, spin: index % this.cell };
  }

  /** The smallest block that contains all the sites. */
  static around(cell: number, sites: readonly LatticeSite[]): Box {
    const dimension = sites[0]!.cell.length;
    const low = Array.from({ length: dimension }, (_, d) => Math.min(...sites.map((s) => s.cell[d]!)));
    const size = low.map((l, d) => Math.max(...sites.map((s) => s.cell[d]!)) - l + 1);
    return new Box(cell, low, size);
  }
}
