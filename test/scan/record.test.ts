import { describe, expect, it } from 'vitest';
import { mergeRecords } from '../../src/scan/merge.ts';
import { pointsIn } from '../../src/scan/points.ts';
import {
  headerLine,
  type Outcome,
  type PointRecord,
  RecordReader,
  readRecords,
  recordLine,
} from '../../src/scan/record.ts';
import { shardOf } from '../../src/scan/shard.ts';
import { property, type Random } from '../support/random.ts';

const HASH = `sha256:${'ab'.repeat(32)}`;
const POINTS = pointsIn({ parameters: [{ name: 'g', from: '0', to: '9', steps: 9 }], points: 'grid' });

const found = (first: number): Outcome => ({
  status: 'done',
  answer: { kind: 'search', dimensionByRange: [first, first + 1], minimumCells: 5 },
});
const record = (point: number, outcome = found(point), milliseconds = 1): PointRecord => ({
  point,
  at: [...POINTS.at(point)],
  outcome,
  milliseconds,
});
const FILE = headerLine(HASH, shardOf(1, 3)) + [1, 4, 7].map((p) => recordLine(record(p))).join('');

describe('files of results', () => {
  it('read back what was written', () => {
    expect(readRecords(FILE)).toEqual({
      plan: HASH,
      shard: shardOf(1, 3),
      records: [record(1), record(4), record(7)],
      torn: 0,
      damaged: [],
    });
  });

  it('give what is whole, cut at any byte', () => {
    for (let length = 0; length <= FILE.length; length++) {
      const { records, torn, damaged } = readRecords(FILE.slice(0, length));
      const lines = FILE.slice(0, length).split('\n').length - 1;
      expect(damaged).toEqual([]);
      expect(records).toHaveLength(Math.max(0, lines - 1));
      expect(torn).toBe(length - (FILE.lastIndexOf('\n', length - 1) + 1) * Number(length > 0));
    }
  });

  it('are the same read in pieces, cut anywhere', () => {
    for (const size of [1, 7, 64, 1000]) {
      const reader = new RecordReader();
      const text = `${FILE}{"point"`;
      for (let i = 0; i < text.length; i += size) reader.push(text.slice(i, i + size));
      expect(reader.finish()).toEqual(readRecords(text));
    }
  });

  it('say which lines are damaged, and keep the others', () => {
    const lines = FILE.split('\n');
    for (const bad of ['', 'null', '{"point":0}', lines[1]!.replace('"point"', '"pint"'), `${lines[1]}x`]) {
      const { records, damaged } = readRecords([lines[0], bad, lines[2], ''].join('\n'));
      expect([records.length, damaged]).toEqual([1, [2]]);
    }
    expect(readRecords(['{"plan":"x"}', lines[1], ''].join('\n'))).toMatchObject({
      plan: null,
      damaged: [1],
    });
    expect(readRecords(headerLine(HASH, shardOf(1, 3)).replace('2/3', '4/3'))).toMatchObject({ plan: null });
  });
});

describe('merging', () => {
  property('does not depend on order, repetition or times', 40, (random: Random) => {
    const records = Array.from({ length: 10 }, (_, p) => record(p));
    const some = random.shuffle([
      ...records,
      ...Array.from({ length: 5 }, () => ({ ...random.pick(records), milliseconds: random.below(99) })),
      ...Array.from({ length: 3 }, () =>
        record(random.below(10), { status: 'failed', reason: `out of memory ${random.below(3)}` }),
      ),
    ]);
    const merged = mergeRecords(POINTS, some);
    expect([...merged.outcomes].sort(([a], [b]) => a - b)).toEqual(records.map((r) => [r.point, r.outcome]));
    expect(merged).toMatchObject({ missing: [], failed: [], conflicts: [], strays: 0 });
  });

  it('names what is missing, failed, in conflict, or of no point', () => {
    const failed: Outcome = { status: 'failed', reason: 'out of memory' };
    const merged = mergeRecords(POINTS, [
      record(0),
      record(1, failed),
      record(2),
      record(2, found(99)),
      { ...record(3), at: ['77'] },
      { ...record(4), point: 10 },
      record(5, { status: 'refused', reason: 'zero' }),
    ]);
    expect(merged).toMatchObject({
      missing: [2, 3, 4, 6, 7, 8, 9],
      failed: [1],
      conflicts: [2],
      strays: 2,
    });
  });

  it('of two failures keeps the same one in either order', () => {
    const fail = (reason: string) => record(0, { status: 'failed', reason });
    const kept = (list: PointRecord[]) => mergeRecords(POINTS, list).outcomes.get(0);
    expect(kept([fail('b'), fail('a')])).toEqual(kept([fail('a'), fail('b')]));
  });
});
