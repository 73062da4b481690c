/** The search that follows growth: time and memory beside what stays alive, at ranges that no list of candidates reaches. */
import { primeFieldsBelow } from '../src/linear/field.ts';
import { livingByGrowth } from '../src/search/growth.ts';
import { type BenchModel, candidatesOf, hamiltonianOfBench } from './models.ts';
import type { BenchOptions } from './options.ts';
import { measurePoint } from './search.ts';
import { megabytes, seconds } from './table.ts';

type Growing = Pick<BenchModel, 'name' | 'title' | 'formula' | 'cell' | 'dimension' | 'usual' | 'large'>;

/** Counts: see `test/outside/counts.test.ts`, where each has its source. */
const GROWING: readonly Growing[] = [
  {
    name: 'xyz-field',
    title: 'XYZ chain, field in all directions',
    formula: '2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z',
    cell: 1,
    dimension: () => 1,
    usual: [12, 14, 16, 18, 20],
    large: [24],
  },
  {
    name: 'xyz',
    title: 'XYZ chain',
    formula: '2 XX + 3 YY + 5 ZZ',
    cell: 1,
    dimension: (range) => range - 1,
    usual: [10, 12, 14],
    large: [16],
  },
  {
    name: 'heisenberg-ladder',
    title: 'Heisenberg ladder',
    formula: 'XIXI + YIYI + ZIZI + IXIX + IYIY + IZIZ + 2 (XX + YY + ZZ)',
    cell: 2,
    dimension: () => 4,
    usual: [4, 6, 8],
    large: [],
  },
  {
    name: 'hubbard',
    title: 'Hubbard model as a ladder',
    formula: 'XIXI + YIYI + IXIX + IYIY + 3 ZZ',
    cell: 2,
    dimension: (range) => range + 1,
    usual: [5, 6, 7, 8],
    large: [],
  },
];

export async function benchGrowth(options: BenchOptions): Promise<void> {
  const rows: string[][] = [];
  for (const growing of GROWING) {
    if (options.models !== undefined && !options.models.includes(growing.name)) continue;
    const model: BenchModel = { ...growing, smoke: [4], targets: {} };
    const usual = options.smoke
      ? model.smoke
      : options.large
        ? [...model.usual, ...model.large]
        : model.usual;
    for (const range of options.ranges ?? usual) {
      options.progress(`${model.name}, range ${range}, by growth`);
      const point = await measurePoint(model, range, options, 'growth');
      if (point === undefined) break;
      const field = primeFieldsBelow().next().value!;
      const alive = livingByGrowth(hamiltonianOfBench(model), range, field);
      rows.push([
        model.title,
        `${range}`,
        candidatesOf(model.cell, range).toPrecision(3),
        `${alive?.length}`,
        `${point.answer.dimension}`,
        point.samples > 1 ? `${seconds(point.median)} ± ${seconds(point.deviation)}` : seconds(point.median),
        megabytes(point.answer.peak),
      ]);
    }
  }
  options.table({
    name: 'growth',
    title: 'The search that follows growth',
    columns: [
      'model',
      'range',
      'candidates, never visited',
      'living strings',
      'charges',
      'time',
      'peak memory',
    ],
    rows,
    notes: [
      'Living strings are what the first stage hands to the final system, strings of ranges 1 and 2 included.',
    ],
  });
}
