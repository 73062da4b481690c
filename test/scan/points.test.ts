import { describe, expect, it } from 'vitest';
import { pointsIn } from '../../src/scan/points.ts';
import { distinctBelow, SeededRandom } from '../../src/scan/random.ts';
import { isIn, overlap, pointsOfShard, shardFromText, shardOf, textFromShard } from '../../src/scan/shard.ts';
import { property } from '../support/random.ts';

const AXES = [
  { name: 'g', from: '-1', to: '1', steps: 4 },
  { name: 'h', values: ['0', '1/3', '7'] },
];

const all = (plan: Parameters<typeof pointsIn>[0]) => {
  const points = pointsIn(plan);
  return Array.from({ length: points.count }, (_, i) => points.at(i).join(' '));
};

describe('points', () => {
  it('of a grid: every combination, exact, the last parameter fastest', () => {
    expect(all({ parameters: AXES, points: 'grid' })).toEqual(
      ['-1', '-1/2', '0', '1/2', '1'].flatMap((g) => ['0', '1/3', '7'].map((h) => `${g} ${h}`)),
    );
  });

  it('of a list: as they stand', () => {
    const list = [
      ['1', '2'],
      ['-1/2', '0'],
    ];
    expect(all({ parameters: [{ name: 'g' }, { name: 'h' }], points: { list } })).toEqual(['1 2', '-1/2 0']);
  });

  it('of a sample: different points of the grid, the same for the same seed', () => {
    const grid = new Set(all({ parameters: AXES, points: 'grid' }));
    const sample = (size: number, seed: number) => all({ parameters: AXES, points: { sample: size, seed } });
    expect(new Set(sample(15, 3))).toEqual(grid);
    expect(sample(6, 3)).toEqual(sample(15, 3).slice(0, 6));
    expect(sample(6, 3)).not.toEqual(sample(6, 4));
    expect(sample(6, 3).every((point) => grid.has(point))).toBe(true);
  });

  it('are drawn from grids too large to list', () => {
    const axes = Array.from({ length: 20 }, (_, i) => ({ name: `c${i}`, from: '0', to: '1', steps: 99_999 }));
    const points = all({ parameters: axes, points: { sample: 50, seed: 1 } });
    expect(new Set(points).size).toBe(50);
  });
});

describe('seeded numbers', () => {
  it('are those of SplitMix64', () => {
    // First outputs for seed 1234567, common practice: the values that implementations of the generator print for comparison (from memory).
    const random = new SeededRandom(1_234_567n);
    expect([random.next(), random.next(), random.next()]).toEqual([
      6_457_827_717_110_365_317n,
      3_203_168_211_198_807_973n,
      9_817_491_932_198_370_423n,
    ]);
  });

  it('choose every number about equally often', () => {
    const counts = new Array<number>(10).fill(0);
    for (let seed = 0n; seed < 2_000n; seed++)
      for (const n of distinctBelow(10n, 3, new SeededRandom(seed))) counts[Number(n)]!++;
    // Mean 600, standard deviation about 20.
    for (const count of counts) expect(Math.abs(count - 600)).toBeLessThan(100);
  });
});

describe('shards', () => {
  property('every point is in exactly one shard, in rising order', 50, (random) => {
    const [count, total] = [random.integer(1, 12), random.integer(0, 40)];
    const seen = Array.from({ length: count }, (_, i) => [...pointsOfShard(shardOf(i, count), total)]);
    expect(seen.flat().sort((a, b) => a - b)).toEqual(Array.from({ length: total }, (_, p) => p));
    seen.forEach((points, i) => {
      expect(points.every((p) => isIn(shardOf(i, count), p))).toBe(true);
    });
  });

  property('overlap tells whether two shards of different divisions can share a point', 60, (random) => {
    const [n, m] = [random.integer(1, 9), random.integer(1, 9)];
    const [a, b] = [shardOf(random.below(n), n), shardOf(random.below(m), m)];
    const shared = [...pointsOfShard(a, n * m)].some((p) => isIn(b, p));
    expect(overlap(a, b)).toBe(shared);
  });

  it('are written i/n from 1 and refused out of range', () => {
    expect(textFromShard(shardFromText('3/20'))).toBe('3/20');
    for (const bad of ['0/20', '21/20', '1/0', '3', '3/20/1', '-1/2', '1.5/2', '3 / 20', ''])
      expect(() => shardFromText(bad), bad).toThrow(/shard: expected/);
  });
});
