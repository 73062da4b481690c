import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, test } from 'vitest';
import { InputError, LimitError } from '../../src/errors.ts';
import { parseModel } from '../../src/model/formula.ts';
import { Addresses } from '../../src/search/addresses.ts';
import { search } from '../../src/search/background.ts';
import { candidateCount } from '../../src/search/estimate.ts';
import { planOf } from '../../src/search/plan.ts';
import type { SearchResult } from '../../src/search/result.ts';
import { searchNow } from '../../src/search/search.ts';
import { gradingOf, sectorCandidates, sectorsOf } from '../../src/search/sectors.ts';
import { Neighbourhood, windowTable } from '../../src/search/windows.ts';
import { property } from '../support/random.ts';

const folder = mkdtempSync(join(tmpdir(), 'holdfast-sectors-'));
afterAll(() => rmSync(folder, { recursive: true }));

const bytes = (result: SearchResult) =>
  JSON.stringify([
    result.dimensionByRange,
    result.charges.map((q) => [q.range, q.parity, q.density.toJSON()]),
  ]);

describe('gradings', () => {
  test.each([
    ['2 XX + 3 YY + 5 ZZ', 1, 3],
    ['XX + YY + ZZ + XIX + YIY + ZIZ', 1, 3],
    ['ZZ + X', 1, 2],
    ['XX + YY + X', 1, 2],
    ['ZZ + X + Z', 1, 1],
    // Complex in every basis of the letters, and no parity is left.
    ['2 XX + 3 YY + 5 ZZ + 7 X + 11 Y + 13 Z', 1, 0],
    ['XIXI + YIYI + IXIX + IYIY + 3 ZZII', 2, 3],
  ])('%s in cells of %i: 2^%i classes', (formula, cell, bits) => {
    expect(gradingOf(parseModel(formula, { cell })).bits).toBe(bits);
  });

  property('every term moves every candidate by the same shift', 40, (random) => {
    const cell = random.integer(1, 3);
    const h = random.hamiltonian({ cell, range: 2, terms: random.integer(1, 4) });
    const grading = gradingOf(h);
    const table = windowTable(h);
    const range = 3;
    const near = new Neighbourhood(table, range + 1);
    const places = new Addresses({ grading, value: 0 }, table.cellBits, range + 1);
    for (let i = 0; i < 50; i++) {
      const string = random.below(4 ** (cell * range - 1)) * 4 + random.integer(1, 3);
      near.visit(string, range);
      for (let j = 0; j < near.count; j++)
        expect(places.classOf(near.images[j]!)).toBe(places.classOf(string) ^ grading.shift);
    }
  });

  property('sectors share the candidates out, and addresses number each', 12, (random) => {
    const cell = random.integer(1, 2);
    const h = random.hamiltonian({ cell, range: 2, terms: random.integer(1, 3) });
    const range = cell === 1 ? 7 : 4;
    const sectors = sectorsOf(gradingOf(h));
    expect(sectors.reduce((sum, sector) => sum + sectorCandidates(sector, range), 0)).toBe(
      candidateCount(cell, range),
    );
    for (const sector of sectors) {
      const places = new Addresses(sector, 2 * cell, range);
      let [count, last] = [0, 0];
      places.forEach(1, 4 ** (cell * range), (string, address) => {
        if ((string & (4 ** cell - 1)) !== 0) count++;
        if (places.of(string) !== address || address <= last) expect.fail(`string ${string} at ${address}`);
        last = address;
      });
      expect(last).toBeLessThanOrEqual(places.size);
      expect(count).toBe(sectorCandidates(sector, range));
    }
  });
});

describe('the answer does not depend on sectors', () => {
  property('random models, one to three spins a cell', 16, (random) => {
    const cell = random.integer(1, 3);
    const h = random.hamiltonian({ cell, range: 2, terms: random.integer(3, 5) });
    const range = cell === 1 ? 6 : 2;
    const whole = bytes(searchNow(h, { range }));
    for (const sectors of [2, 4, 8]) expect(bytes(searchNow(h, { range, sectors }))).toBe(whole);
  });

  test('in threads, and from a checkpoint of the same sectors', async () => {
    const h = parseModel('2 XX + 3 YY + 5 ZZ');
    const whole = bytes(searchNow(h, { range: 8 }));
    const shares: number[] = [];
    const options = { range: 8, threads: 2, sectors: 4, checkpoint: folder };
    const first = await search(h, { ...options, onProgress: ({ done }) => void shares.push(done) });
    expect(bytes(first)).toBe(whole);
    expect(shares.every((share) => share >= 0 && share <= 1)).toBe(true);
    expect(bytes(await search(h, options))).toBe(whole);
    expect(bytes(await search(h, { ...options, sectors: 2 }))).toBe(whole);
  });

  test('sectors with small primes, some of them unlucky', () => {
    const h = parseModel('2 XX + 3 YY + 5 ZZ');
    const whole = bytes(searchNow(h, { range: 4 }));
    for (const primesBelow of [20, 32, 64, 128])
      expect(bytes(searchNow(h, { range: 4, sectors: 8, primesBelow }))).toBe(whole);
  });
});

describe('the plan', () => {
  test('16 spins take the sectors they need, or are refused', () => {
    const plan = (formula: string, range: number, sectors?: number) =>
      planOf(parseModel(formula), { range, method: 'exhaustive', sectors }).sectors.length;
    expect(plan('ZZ + X', 15)).toBe(1);
    expect(plan('ZZ + X', 16)).toBe(4);
    expect(plan('2 XX + 3 YY + 5 ZZ', 16)).toBe(4);
    expect(plan('2 XX + 3 YY + 5 ZZ', 16, 100)).toBe(8);
    expect(() => plan('ZZ + X + Z', 16)).toThrow(LimitError);
    expect(() => plan('ZZ + X', 17)).toThrow(LimitError);
  });

  test('bad numbers of sectors and threads', async () => {
    const h = parseModel('ZZ + X');
    for (const sectors of [0, -1, 1.5, Number.NaN])
      expect(() => searchNow(h, { range: 3, sectors })).toThrow(InputError);
    await expect(search(h, { range: 3, threads: 0 })).rejects.toThrow(InputError);
  });
});
