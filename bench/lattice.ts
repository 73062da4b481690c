/** Searches on lattices, and the uniform chain through both engines: the fast path must stay what it was. */
import { Operator } from '../src/algebra/operator.ts';
import { parseModel } from '../src/model/formula.ts';
import { chainModel } from '../src/model/lattice-model.ts';
import { bondModel, LATTICES } from '../src/model/lattices.ts';
import { type LatticeOptions, searchLatticeNow } from '../src/search/lattice/search.ts';
import { searchNow } from '../src/search/search.ts';
import type { BenchOptions } from './options.ts';

interface Answer {
  readonly candidates: number;
  readonly charges: number;
}

/** Name, run, charges that are known. */
function cases(smoke: boolean): readonly (readonly [string, () => Answer, number])[] {
  const h = parseModel('XX + 2 YY + 3 ZZ + X');
  const range = smoke ? 6 : 8;
  const window = smoke ? [3, 2] : [3, 3];
  const xyz = Operator.of({ XX: 1, YY: 2, ZZ: 3 });
  const on = (model: ReturnType<typeof chainModel>, options: LatticeOptions) => () => {
    const { candidates, charges } = searchLatticeNow(model, options);
    return { candidates, charges: charges.length };
  };
  return [
    [
      `XYZ with a field, range ${range}, chain search`,
      () => {
        const { candidates, charges } = searchNow(h, { range });
        return { candidates, charges: charges.length };
      },
      1,
    ],
    [`the same, lattice search`, on(chainModel(h), { window: range }), 1],
    [`the same, wave number 1/3`, on(chainModel(h), { window: range, wave: '1/3' }), 0],
    [
      `XYZ on the square, window ${window.join(' × ')}`,
      on(bondModel(LATTICES.square, { bonds: xyz }), { window }),
      1,
    ],
  ];
}

export async function benchLattice({ smoke, progress, table, failure }: BenchOptions): Promise<void> {
  const rows: string[][] = [];
  for (const [name, run, known] of cases(smoke)) {
    progress(name);
    const before = process.cpuUsage();
    const { candidates, charges } = run();
    const { user, system } = process.cpuUsage(before);
    if (charges !== known) failure(`${name}: ${charges} charges, ${known} are known`);
    else rows.push([name, candidates.toLocaleString('en'), ((user + system) / 1e6).toFixed(2)]);
  }
  table({
    name: 'lattice',
    title: 'Searches on lattices',
    columns: ['search', 'candidates', 'processor seconds'],
    rows,
    notes: ['One sample each, in one process; the uniform chain through both engines.'],
  });
}
