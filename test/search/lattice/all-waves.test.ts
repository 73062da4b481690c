import { describe, expect, it, test } from 'vitest';
import { CancelledError, LimitError } from '../../../src/errors.ts';
import { parseModel } from '../../../src/model/formula.ts';
import { chainModel } from '../../../src/model/lattice-model.ts';
import { searchAllWaves } from '../../../src/search/background.ts';
import { allWaves } from '../../../src/search/lattice/all-waves.ts';
import { searchLatticeNow } from '../../../src/search/lattice/search.ts';
import { property } from '../../support/random.ts';

test('in a thread: the same answer, stages in order, and an end when told', async () => {
  const model = chainModel(parseModel('XX + YY + 2 X'));
  const stages: string[] = [];
  const found = await searchAllWaves(model, 4, { onProgress: (stage) => void stages.push(stage) });
  expect(found).toEqual(allWaves(model, 4));
  const order = ['list', 'peel', 'assemble', 'solve'];
  expect(stages.every((stage) => order.includes(stage))).toBe(true);
  await expect(searchAllWaves(model, 4, { signal: AbortSignal.abort() })).rejects.toThrow(CancelledError);
  await expect(searchAllWaves(model, 8, { memory: 1e6 })).rejects.toThrow(LimitError);
});

const wavesOf = (formula: string, range: number) => allWaves(chainModel(parseModel(formula)), range);
const roots = (formula: string, range: number) =>
  wavesOf(formula, range).exceptions.map((e) => [e.order, e.dimension]);

describe('all wave numbers at once', () => {
  // The staggered exceptions: computed by two independent programs.
  it.each(['-XX + YY + 2 ZZ + 3 Z', 'XZ + ZX + 2 X'])('%s: only 0 and π', (formula) => {
    expect(wavesOf(formula, 4).dimension).toBe(0);
    expect(roots(formula, 4)).toEqual([
      [1, 1],
      [2, 1],
    ]);
  });

  it('mixed-field Ising has H at 0 and nothing at any other wave number', () => {
    expect(wavesOf('ZZ + X + Z', 5)).toMatchObject({
      dimension: 0,
      exceptions: [{ order: 1, dimension: 1 }],
    });
  });

  it('strictly local charges stand at every wave number', () => {
    expect(wavesOf('ZXZ', 3)).toMatchObject({ dimension: 3, exceptions: [] });
  });

  it('finds points of the circle that are no roots of unity', () => {
    // 3 (XX + YY) + 4 (XY − YX) is 5 (XX + YY) with the axes turned by θ a site, cos θ = 3/5, and e^{iθ} is no root of unity. The
    // pairing charges of that chain stand at π, and two turns away from it: ω = −e^{±2iθ}, 2 cos = −2 (2·9/25 − 1) = 14/25.
    const { exceptions, dimension } = wavesOf('3 XX + 3 YY + 4 XY - 4 YX', 3);
    expect(dimension).toBe(0);
    expect(exceptions.map((e) => e.order)).toEqual([1, null]);
    expect(exceptions[1]).toMatchObject({ polynomial: [25n, -14n, 25n], points: 2, dimension: 2 });
    const [{ low, high, denominator }] = exceptions[1]!.cosines as [
      { low: bigint; high: bigint; denominator: bigint },
    ];
    expect(low * 25n < 14n * denominator && 14n * denominator <= high * 25n).toBe(true);
    // A quarter turn in place of it: the same charges at 2π/4.
    expect(roots('XX + YY + XY - YX', 3)).toEqual([
      [1, 5],
      [4, 2],
    ]);
  });

  property('agrees with the search at single wave numbers', 10, (random) => {
    const model = chainModel(
      random.hamiltonian({ range: random.integer(2, 3), terms: random.integer(1, 3) }),
    );
    const all = allWaves(model, 3);
    for (const wave of ['0', '1/2', '1/3', '1/4', '1/5', '1/6']) {
      const order = wave === '0' ? 1 : Number(wave.slice(2));
      const expected = all.exceptions.find((e) => e.order === order)?.dimension ?? all.dimension;
      expect(searchLatticeNow(model, { window: 3, wave }).charges).toHaveLength(expected);
    }
  });

  it('refuses other lattices', () => {
    const model = chainModel(parseModel('XX'), { kind: 'open', cells: 4 });
    expect(() => allWaves(model, 2)).toThrow(/infinite chain/);
  });
});
