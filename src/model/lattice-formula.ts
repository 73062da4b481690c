/** Formulas on lattices: words along the bonds of a named lattice, or letters site by site, `X_{0,0} X_{1,0}`. */
import type { Operator } from '../algebra/operator.ts';
import { spanOf } from '../algebra/word.ts';
import { InputError } from '../errors.ts';
import { Box, type Extent, Lattice, type LatticeSite } from '../lattice/lattice.ts';
import { type Parameters, parseDensity, parseSites } from './formula.ts';
import { type LatticeModel, latticeModel, type PlacedStrings } from './lattice-model.ts';
import { bondModel, LATTICES, type LatticeName } from './lattices.ts';
import { MAX_WORD_LENGTH } from './limits.ts';
import type { Site, Syntax } from './syntax.ts';
import { refuse } from './tokens.ts';

export interface LatticeFormulaOptions {
  /** One entry a direction. */
  readonly extents: readonly Extent[];
  /** Spins a cell, 1 by default. A site then has a last number or letter for the spin: `X_{0,1,a}`. */
  readonly cell?: number;
  readonly parameters?: Parameters;
  /** Terms in one place, counted from the first cell of each direction. */
  readonly local?: string;
}

/**
 * A Hamiltonian site by site; on one direction also in words.
 *
 * @throws InputError as `parseModel` and `latticeModel`
 */
export function parseLatticeModel(formula: string, options: LatticeFormulaOptions): LatticeModel {
  const { extents, cell = 1, parameters, local } = options;
  const lattice = new Lattice(cell, extents);
  return latticeModel(
    lattice,
    placedStrings(formula, lattice, parameters),
    local === undefined ? null : placedStrings(local, lattice),
  );
}

/** The same density on every bond (two-letter words) and every spin (one-letter words) of a named lattice. */
export function parseBondModel(
  name: LatticeName,
  formula: string,
  { extents, parameters }: { readonly extents?: readonly Extent[]; readonly parameters?: Parameters } = {},
): LatticeModel {
  const density = parseDensity(formula, parameters === undefined ? {} : { parameters });
  if (density.span > 2)
    throw new InputError(
      'formula',
      'words of two letters for bonds and of one for spins',
      `${density.span} letters`,
    );
  const bonds = density.filter((word) => spanOf(word) === 2);
  const field = density.filter((word) => spanOf(word) === 1);
  return bondModel(LATTICES[name], { bonds, field }, extents);
}

/** A word begins in cell 0; sites stand where they say. */
function placedStrings(formula: string, lattice: Lattice, parameters?: Parameters): PlacedStrings {
  let box = new Box(
    lattice.cell,
    lattice.extents.map(() => 0),
    lattice.extents.map(() => 1),
  );
  const place = (syntax: Syntax) => {
    const at = (site: Site) => siteOf(site, syntax.text, lattice);
    const sites = syntax.sites.map(at);
    if (sites.length > 0) box = Box.around(lattice.cell, sites);
    if (box.spins > MAX_WORD_LENGTH)
      refuse(syntax.text, 0, `sites in a block of at most ${MAX_WORD_LENGTH} spins`, `${box.spins}`);
    return (site: Site) => box.indexOf(at(site));
  };
  const hasWords = !/_/.test(formula);
  if (hasWords && lattice.dimension === 1) {
    const operator: Operator = parseDensity(formula, {
      cell: lattice.cell,
      ...(parameters === undefined ? {} : { parameters }),
    });
    const cells = Math.max(1, Math.ceil(operator.span / lattice.cell));
    return { operator, box: new Box(lattice.cell, [0], [cells]) };
  }
  const operator = parseSites(formula, place, parameters);
  return { operator, box };
}

function siteOf({ coordinates, leg, at }: Site, text: string, { cell, dimension }: Lattice): LatticeSite {
  const numbers = coordinates.map((c) => c.value);
  const wanted = cell === 1 ? dimension : dimension + 1;
  const all = leg === null ? numbers : [...numbers, leg];
  // A single spin a cell needs no number of its own, but may have one.
  if (all.length !== wanted && !(cell === 1 && all.length === dimension + 1))
    refuse(
      text,
      at,
      `${dimension} cell number${dimension === 1 ? '' : 's'}${cell === 1 ? '' : ' and a spin of the cell'}`,
      `${all.length} in all`,
    );
  const spin = all.length > dimension ? all[dimension]! : 0;
  if (!(spin >= 0 && spin < cell))
    refuse(text, at, `a spin of a cell of ${cell}, counted from 0 or a`, `${spin}`);
  return { cell: all.slice(0, dimension), spin };
}
