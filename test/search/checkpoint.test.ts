import { spawn } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, expect, test } from 'vitest';
import { InputError } from '../../src/errors.ts';
import { parseModel } from '../../src/model/formula.ts';
import { search } from '../../src/search/background.ts';
import type { SearchResult } from '../../src/search/result.ts';
import { searchNow } from '../../src/search/search.ts';
import type { Snapshot } from '../../src/search/sweep.ts';
import { Random } from '../support/random.ts';

let folder: string;
beforeEach(() => {
  folder = mkdtempSync(join(tmpdir(), 'holdfast-'));
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

const charges = (result: SearchResult) => result.charges.map((q) => [q.range, q.parity, q.density.toJSON()]);

test('a search can go on from every layer', () => {
  for (const formula of [
    'XX + YY',
    '2 XX + 3 YY + 5 ZZ',
    'ZZ + 2 X + 3 Z',
    'XX + YY + ZZ + XIX + YIY + ZIZ',
  ]) {
    const h = parseModel(formula);
    const saved: Snapshot[] = [];
    const whole = searchNow(h, {
      range: 7,
      store: () => ({
        load: () => undefined,
        save: (_, snapshot) => void saved.push(structuredClone(snapshot)),
      }),
    });
    expect(saved.length).toBeGreaterThan(2);
    for (const snapshot of saved) {
      const resumed = searchNow(h, { range: 7, store: () => ({ load: () => snapshot, save: () => {} }) });
      expect(charges(resumed)).toEqual(charges(whole));
    }
  }
});

test('ten kills at random moments end in the same bytes', async () => {
  const random = new Random(7);
  const args = ['search', 'ZZ + 2 X + 3 Z', '--range', '9', '--json'];
  const run = (more: string[], killAfter?: number) =>
    new Promise<{ code: number | null; out: string }>((resolve) => {
      const child = spawn(process.execPath, ['--import', 'tsx', 'src/cli/main.ts', ...args, ...more]);
      let out = '';
      child.stdout.on('data', (chunk) => {
        out += chunk;
      });
      const timer = killAfter === undefined ? undefined : setTimeout(() => child.kill('SIGKILL'), killAfter);
      child.on('close', (code) => {
        clearTimeout(timer);
        resolve({ code, out });
      });
    });
  const timeless = (text: string) => text.replace(/"milliseconds": \d+/, '');
  const whole = await run([]);
  expect(whole.code).toBe(0);
  for (let kill = 0; kill < 10; kill++) await run(['--checkpoint', folder], random.integer(300, 1800));
  const resumed = await run(['--checkpoint', folder]);
  expect(resumed.code).toBe(0);
  expect(timeless(resumed.out)).toBe(timeless(whole.out));
});

test('a damaged file counts as absent, one of another search is refused, an unwritable folder too', async () => {
  const h = parseModel('XX + YY + 2 X');
  const reference = charges(await search(h, { range: 6, checkpoint: folder }));
  const [name] = readdirSync(folder).filter((f) => f.endsWith('.checkpoint'));
  const file = join(folder, name!);
  const bytes = readFileSync(file);
  for (const broken of [bytes.subarray(0, bytes.length - 8), bytes.subarray(0, 20), Buffer.from('{}\n')]) {
    writeFileSync(file, broken);
    expect(charges(await search(h, { range: 6, checkpoint: folder }))).toEqual(reference);
  }
  await expect(search(h, { range: 7, checkpoint: folder })).rejects.toThrow(InputError);
  await expect(search(parseModel('XX'), { range: 6, checkpoint: folder })).rejects.toThrow(/model and range/);
  await expect(search(h, { range: 4, checkpoint: join(file, 'inside') })).rejects.toThrow(/can be written/);
});
