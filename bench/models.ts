/** The systems that are timed: formula, what the right answer is, and the times and memory they are to stay within. */
import { parseModel } from '../src/model/formula.ts';
import type { Hamiltonian } from '../src/model/hamiltonian.ts';

export interface Target {
  readonly seconds: number;
  readonly megabytes?: number;
  /** In times of one compiled pass over all non-zeros. */
  readonly passes?: number;
  /** Over the range before: what the candidates do, and 15 % more. */
  readonly growth?: number;
}

export interface BenchModel {
  readonly name: string;
  readonly title: string;
  readonly formula: string;
  readonly cell: number;
  /** Dimension of the space of charges of range ≤ k, for k not below the range of H: a run with another answer is not timed. */
  dimension(range: number): number;
  readonly smoke: readonly number[];
  readonly usual: readonly number[];
  /** Beyond the usual ones. */
  readonly large: readonly number[];
  readonly targets: Readonly<Record<number, Target>>;
}

const GROWTH = 4 * 1.15;

const LARGE: Readonly<Record<number, Target>> = {
  11: { seconds: 0.5, passes: 1.5, growth: GROWTH },
  12: { seconds: 1.5, megabytes: 250, passes: 1.5, growth: GROWTH },
  13: { seconds: 5, passes: 1.5, growth: GROWTH },
  14: { seconds: 20, megabytes: 2500, growth: GROWTH },
  15: { seconds: 120, megabytes: 10_000, growth: GROWTH },
};

/** Chains that may take longer than the three main ones, by a factor. */
function times(factor: number): Readonly<Record<number, Target>> {
  return Object.fromEntries(
    Object.entries(LARGE).map(([range, { seconds }]) => [
      range,
      { seconds: seconds * factor, growth: GROWTH },
    ]),
  );
}

const SMOKE = [5, 6, 7];
const USUAL = [5, 6, 7, 8, 9, 10, 11, 12];

/** Counts: see `test/outside/counts.test.ts`, where each has its source. */
export const MODELS: readonly BenchModel[] = [
  {
    name: 'xyz-field',
    title: 'XYZ chain, field in all directions',
    formula: '2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z',
    cell: 1,
    dimension: () => 1,
    smoke: SMOKE,
    usual: USUAL,
    large: [13, 14, 15],
    targets: { 8: { seconds: 0.2 }, 10: { seconds: 1.5, megabytes: 200 }, ...LARGE },
  },
  {
    name: 'xx-field',
    title: 'XX chain, field in the plane',
    formula: 'XX + YY + X',
    cell: 1,
    dimension: () => 1,
    smoke: SMOKE,
    usual: USUAL,
    large: [13, 14, 15],
    targets: LARGE,
  },
  {
    name: 'xyz',
    title: 'XYZ chain',
    formula: '2 XX + 3 YY + 5 ZZ',
    cell: 1,
    dimension: (range) => range - 1,
    smoke: SMOKE,
    usual: USUAL,
    large: [13, 14, 15],
    targets: LARGE,
  },
  {
    name: 'ising-mixed',
    title: 'Ising chain, mixed field',
    formula: 'ZZ + X + Z',
    cell: 1,
    dimension: () => 1,
    smoke: SMOKE,
    usual: USUAL,
    large: [13, 14],
    targets: times(3),
  },
  {
    name: 'ising-transverse',
    title: 'Ising chain, transverse field',
    formula: 'ZZ + X',
    cell: 1,
    dimension: (range) => 2 * (range - 1),
    smoke: SMOKE,
    usual: USUAL,
    large: [13, 14],
    targets: times(3),
  },
  {
    name: 'heisenberg-next',
    title: 'Heisenberg chain, next-nearest neighbours',
    formula: 'XX + YY + ZZ + 1/2 (XIX + YIY + ZIZ)',
    cell: 1,
    dimension: () => 4,
    smoke: SMOKE,
    usual: USUAL,
    large: [13, 14],
    targets: times(6),
  },
  {
    name: 'hubbard',
    title: 'Hubbard chain as a two-leg ladder, two spins a cell',
    formula: 'XIX + YIY + IXIX + IYIY + 3 ZZ',
    cell: 2,
    dimension: (range) => range + 1,
    smoke: [2, 3],
    usual: [2, 3, 4, 5],
    large: [6],
    targets: {},
  },
];

export function hamiltonianOfBench(model: BenchModel): Hamiltonian {
  return parseModel(model.formula, { cell: model.cell });
}

/** All representatives of range ≤ k. */
export function candidatesOf(cell: number, range: number): number {
  return 4 ** (cell * range) - 4 ** (cell * (range - 1));
}

/**
 * Pairs of a candidate and a placement of a term that do not commute: the non-zeros of the equations, each generated once.
 *
 * Closed form: of all strings of one range, those that anticommute with a placed term are half of (their number − the sum of
 * the signs ±1), and the sum of signs is a product over cells.
 */
export function nonZeros(h: Hamiltonian, range: number): number {
  const { chain, density } = h;
  const letters = 4 ** chain.cell;
  const mask = (1n << BigInt(2 * chain.cell)) - 1n;
  let total = 0;
  for (const word of density.numerators.keys()) {
    const length = chain.range(word);
    const acts = (cell: number): boolean =>
      cell >= 0 && cell < length && ((word >> BigInt(2 * chain.cell * cell)) & mask) !== 0n;
    for (let m = 1; m <= range; m++)
      for (let at = 1 - length; at < m; at++) {
        let strings = 1;
        let signs = 1;
        for (let cell = 0; cell < m; cell++) {
          // An end cell is not the identity, and the identity always has sign +1.
          const end = cell === 0 || cell === m - 1 ? 1 : 0;
          strings *= letters - end;
          signs *= (acts(cell - at) ? 0 : letters) - end;
        }
        total += (strings - signs) / 2;
      }
  }
  return total;
}
