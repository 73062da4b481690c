/** A Hamiltonian on any lattice: a density repeated over all cells where it fits, and terms that stand in one place. */
import { Operator } from '../algebra/operator.ts';
import { lcm } from '../algebra/rational.ts';
import { letterAt, spanOf } from '../algebra/word.ts';
import { InputError } from '../errors.ts';
import { Box, INFINITE, Lattice, type LatticeSite } from '../lattice/lattice.ts';
import type { Hamiltonian } from './hamiltonian.ts';

/** An integer times a Pauli string, letter by letter. */
export interface Term {
  readonly sites: readonly LatticeSite[];
  /** Codes as in `word.ts`: X = 1, Z = 2, Y = 3. */
  readonly letters: readonly number[];
  readonly coefficient: bigint;
}

/** `H · denominator = Σ over cells of repeated terms + local terms`. Immutable. */
export interface LatticeModel {
  readonly lattice: Lattice;
  /** Summed over all translates; in open directions over those that fit. */
  readonly repeated: readonly Term[];
  /** In one place: boundary fields, defects, couplings that depend on the position. Finite directions only. */
  readonly local: readonly Term[];
  readonly denominator: bigint;
}

/** Strings on a block of cells. */
export interface PlacedStrings {
  readonly box: Box;
  readonly operator: Operator;
}

/**
 * @param repeated the density; null where there is none
 * @param local terms that are not repeated
 * @throws InputError for terms that leave the lattice, a ring or open direction shorter than the interaction, local terms on an
 *   infinite lattice, and a model without terms
 */
export function latticeModel(
  lattice: Lattice,
  repeated: PlacedStrings | null,
  local: PlacedStrings | null = null,
): LatticeModel {
  const denominator = lcm(repeated?.operator.denominator ?? 1n, local?.operator.denominator ?? 1n);
  const model = {
    lattice,
    repeated: Object.freeze(termsOf(repeated, denominator)),
    local: Object.freeze(termsOf(local, denominator)),
    denominator,
  };
  if (model.repeated.length + model.local.length === 0)
    throw new InputError('model', 'a term that is not a constant', 'zero');
  for (const term of [...model.repeated, ...model.local]) checkSpins(lattice, term);
  for (const term of model.local)
    term.sites.forEach((site) => {
      lattice.extents.forEach((extent, d) => {
        if (extent.kind === 'infinite')
          throw new InputError(
            'model',
            'local terms in finite directions only: give an open or a ring length',
            `one on an infinite lattice, at ${printSite(site)}`,
          );
        if (!(site.cell[d]! >= 0 && site.cell[d]! < extent.cells))
          throw new InputError('model', `cells 0 to ${extent.cells - 1}`, printSite(site));
      });
    });
  reachOf(model.repeated, lattice.dimension).forEach((reach, d) => {
    const extent = lattice.extents[d]!;
    if (extent.kind !== 'infinite' && extent.cells < reach)
      throw new InputError(
        'model',
        `${extent.kind === 'ring' ? 'a ring' : 'an open lattice'} of at least ${reach} cells, the range of the interaction`,
        `${extent.cells}`,
      );
  });
  return Object.freeze(model);
}

/** The model of a chain, infinite or with another extent of its one direction; with terms in one place where it is finite. */
export function chainModel(h: Hamiltonian, extent = INFINITE, local: Operator = Operator.zero): LatticeModel {
  const { cell } = h.chain;
  const placed = (operator: Operator): PlacedStrings => ({
    operator,
    box: new Box(cell, [0], [Math.max(1, Math.ceil(operator.span / cell))]),
  });
  return latticeModel(new Lattice(cell, [extent]), placed(h.density), local.isZero() ? null : placed(local));
}

/** Cells from the first to the last that one term touches, in each direction; at least 1. */
export function reachOf(terms: readonly Term[], dimension: number): number[] {
  return Array.from({ length: dimension }, (_, d) =>
    terms.reduce((reach, { sites }) => {
      const at = sites.map((s) => s.cell[d]!);
      return Math.max(reach, Math.max(...at) - Math.min(...at) + 1);
    }, 1),
  );
}

export function printSite({ cell, spin }: LatticeSite): string {
  return `cell (${cell.join(', ')}), spin ${spin}`;
}

function checkSpins(lattice: Lattice, { sites }: Term): void {
  for (const site of sites) {
    if (site.cell.length !== lattice.dimension)
      throw new InputError('model', `sites with ${lattice.dimension} cell coordinates`, printSite(site));
    if (!(site.spin >= 0 && site.spin < lattice.cell))
      throw new InputError('model', `a spin of a cell of ${lattice.cell}`, printSite(site));
  }
}

function termsOf(placed: PlacedStrings | null, denominator: bigint): Term[] {
  if (placed === null) return [];
  const { box, operator } = placed;
  const terms: Term[] = [];
  for (const [word, value] of operator.numerators) {
    if (word === 0n) continue;
    const sites: LatticeSite[] = [];
    const letters: number[] = [];
    for (let spin = 0; spin < spanOf(word); spin++) {
      const letter = letterAt(word, spin);
      if (letter === 0) continue;
      sites.push(box.siteAt(spin));
      letters.push(letter);
    }
    terms.push({ sites, letters, coefficient: (value * denominator) / operator.denominator });
  }
  return terms;
}
