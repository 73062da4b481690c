/** All models and families with a published status or a count worth checking against, as data. */
import type { Exact } from '../../algebra/rational.ts';
import { InputError, show } from '../../errors.ts';
import { parseModel } from '../formula.ts';
import type { Hamiltonian } from '../hamiltonian.ts';
import { annni } from './annni.ts';
import { ashkinTeller } from './ashkin-teller.ts';
import { ashkinTellerSelfDual } from './ashkin-teller-self-dual.ts';
import { blockade } from './blockade.ts';
import { classicalIsing } from './classical-ising.ts';
import { decoupledHeisenberg } from './decoupled-heisenberg.ts';
import { dimerisedHeisenberg } from './dimerised-heisenberg.ts';
import { dimerisedXx } from './dimerised-xx.ts';
import type { CatalogueEntry, FamilyEntry } from './entry.ts';
import { exchangeLadder } from './exchange-ladder.ts';
import { antisymmetricExchangeFamily } from './families/antisymmetric-exchange.ts';
import { dimerisedHeisenbergFamily } from './families/dimerised-heisenberg.ts';
import { foldedXxzFamily } from './families/folded-xxz.ts';
import { fourSpinLadderFamily } from './families/four-spin-ladder.ts';
import { isingInAFieldFamily } from './families/ising-in-a-field.ts';
import { nextNearestHeisenbergFamily } from './families/next-nearest-heisenberg.ts';
import { nextNearestIsingFamily } from './families/next-nearest-ising.ts';
import { xyzInAFieldFamily } from './families/xyz-in-a-field.ts';
import { foldedXxz } from './folded-xxz.ts';
import { heisenberg } from './heisenberg.ts';
import { heisenbergLadder } from './heisenberg-ladder.ts';
import { hubbard } from './hubbard.ts';
import { hubbardNeighbourDensity } from './hubbard-neighbour-density.ts';
import { hubbardUnequalHopping } from './hubbard-unequal-hopping.ts';
import { mixedIsing } from './mixed-ising.ts';
import { nextNearestHeisenberg } from './next-nearest-heisenberg.ts';
import { staggeredFieldXx } from './staggered-field-xx.ts';
import { staggeredXxBond } from './staggered-xx-bond.ts';
import { staggeredZ } from './staggered-z.ts';
import { threeSpin } from './three-spin.ts';
import { transverseIsing } from './transverse-ising.ts';
import { xx } from './xx.ts';
import { xxAxialField } from './xx-axial-field.ts';
import { xxPlanarField } from './xx-planar-field.ts';
import { xxz } from './xxz.ts';
import { xxzAntisymmetric } from './xxz-antisymmetric.ts';
import { xxzAxialField } from './xxz-axial-field.ts';
import { xxzTiltedField } from './xxz-tilted-field.ts';
import { xyAxialField } from './xy-axial-field.ts';
import { xyz } from './xyz.ts';
import { xyzAntisymmetric } from './xyz-antisymmetric.ts';
import { xyzField } from './xyz-field.ts';
import { xyzGeneralField } from './xyz-general-field.ts';
import { zigzagClassical } from './zigzag-classical.ts';
import { zigzagIntegrable } from './zigzag-integrable.ts';

export const CATALOGUE: readonly CatalogueEntry[] = Object.freeze([
  xyz,
  xxz,
  xxzAxialField,
  heisenberg,
  xx,
  xxAxialField,
  xyAxialField,
  xxPlanarField,
  xyzField,
  xyzGeneralField,
  xxzTiltedField,
  transverseIsing,
  mixedIsing,
  xyzAntisymmetric,
  xxzAntisymmetric,
  nextNearestHeisenberg,
  decoupledHeisenberg,
  annni,
  zigzagIntegrable,
  zigzagClassical,
  classicalIsing,
  foldedXxz,
  threeSpin,
  blockade,
  staggeredZ,
  staggeredXxBond,
  heisenbergLadder,
  exchangeLadder,
  dimerisedHeisenberg,
  dimerisedXx,
  staggeredFieldXx,
  ashkinTellerSelfDual,
  ashkinTeller,
  hubbard,
  hubbardNeighbourDensity,
  hubbardUnequalHopping,
]);

export const FAMILIES: readonly FamilyEntry[] = Object.freeze([
  xyzInAFieldFamily,
  isingInAFieldFamily,
  nextNearestHeisenbergFamily,
  nextNearestIsingFamily,
  antisymmetricExchangeFamily,
  foldedXxzFamily,
  dimerisedHeisenbergFamily,
  fourSpinLadderFamily,
]);

/** The entry with an id. @throws InputError when there is none */
export function catalogueEntry(id: string): CatalogueEntry {
  const entry = CATALOGUE.find((e) => e.id === id);
  if (entry === undefined)
    throw new InputError('catalogue', `one of ${CATALOGUE.map((e) => e.id).join(', ')}`, show(id));
  return entry;
}

/** The Hamiltonian of an entry; some of its couplings may be given other values. */
export function catalogueModel(
  entry: CatalogueEntry,
  parameters: Readonly<Record<string, Exact>> = {},
): Hamiltonian {
  return parseModel(entry.formula, {
    cell: entry.cell,
    parameters: { ...entry.parameters, ...parameters },
  });
}
