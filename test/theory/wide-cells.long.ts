/** The bound of the pencil against exhaustive counts where both take seconds: cells of three spins, and random ladders. */
import { describe, expect, it } from 'vitest';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { everyRangeBound } from '../../src/theory/decide.ts';
import { decompose } from '../../src/theory/decompose.ts';
import { property } from '../support/random.ts';

function boundAndCount(formula: string, cell: number): [bound: number, count: number] | null {
  const h = parseModel(formula, { cell });
  const bound = everyRangeBound(decompose(h)!);
  if ('reason' in bound || bound.method !== 'cells') return null;
  const { dimensionByRange } = searchNow(h, { range: 3 });
  const atMost = bound.exceptional.find((e) => e.range === 3)?.atMost ?? bound.generic;
  return [atMost, dimensionByRange[2]! - dimensionByRange[1]!];
}

const tube = [0, 1, 2].flatMap((s) =>
  ['X', 'Y', 'Z'].map((p, i) => `${i + 2 + s} ${'I'.repeat(s)}${p}II${p}`),
);

describe('charges of range 3', () => {
  it.each([
    ['symmetric rungs and a field', ['XX', 'IYY', 'ZZ', 'IZ']],
    ['a three-spin term and antisymmetric couplings', ['ZZZ', 'X', 'IZ', 'XIIY', '-1 YIIX']],
  ])(
    'three spins a cell, %s: the bound is attained',
    (_, extra) => {
      const found = boundAndCount([...tube, ...extra].join(' + ').replaceAll('+ -', '- '), 3);
      expect(found).toEqual([0, 0]);
    },
    120_000,
  );

  property('random ladders, symmetric and antisymmetric: never more than the bound', 10, (random) => {
    const pairs = (['XX', 'YY', 'ZZ'] as const).flatMap(([a, b]) => [
      `${random.nonZero(3)} ${a}I${b}I`,
      `${random.nonZero(3)} I${a}I${b}`,
    ]);
    const value = random.nonZero(2);
    const others = ['XX', 'ZZ', 'XI', 'IZ', 'YX']
      .filter(() => random.chance(0.5))
      .map((w) => `${random.nonZero(3)} ${w}`);
    const skew = random.chance(0.5) ? [`${value} XIYI`, `${-value} YIXI`] : [];
    const found = boundAndCount([...pairs, ...skew, ...others].join(' + ').replaceAll('+ -', '- '), 2);
    if (found !== null) expect(found[1]).toBeLessThanOrEqual(found[0]);
  });
});
