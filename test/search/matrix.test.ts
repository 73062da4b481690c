/** The matrix export: against the letter-by-letter matrix, and its rank by PARI/GP where that is installed. */
import { execFileSync, spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, test } from 'vitest';
import { plainMatrix } from '../../bench/external/matrix.ts';
import { textFromWord } from '../../src/algebra/word.ts';
import { InputError } from '../../src/errors.ts';
import { parseModel } from '../../src/model/formula.ts';
import { EquationMatrix } from '../../src/search/matrix.ts';
import { searchNow } from '../../src/search/search.ts';
import { property } from '../support/random.ts';

const folder = mkdtempSync(join(tmpdir(), 'holdfast-matrix-'));
afterAll(() => rmSync(folder, { recursive: true }));

/** Reads the SMS format strictly. */
function read(text: string) {
  const lines = text.split('\n');
  expect(lines.pop()).toBe('');
  expect(lines.pop()).toBe('0 0 0');
  const head = /^(\d+) (\d+) M$/.exec(lines.shift()!)!;
  const entries = lines.map((line) => /^(\d+) (\d+) (-?\d+)$/.exec(line)!.slice(1).map(Number));
  return { rows: Number(head[1]), columns: Number(head[2]), entries };
}

property('the same equations as built letter by letter, named by the legend', 15, (random) => {
  const cell = random.integer(1, 2);
  const h = random.hamiltonian({ cell, range: 2, terms: 4 });
  const range = cell === 1 ? 3 : 2;
  const equations = new EquationMatrix(h, range);
  const matrix = read([...equations.lines()].join(''));
  const names = { row: [] as string[], column: [] as string[] };
  for (const line of [...equations.legend()].join('').trim().split('\n')) {
    const [what, number, word] = line.split(' ') as ['row' | 'column', string, string];
    expect(Number(number)).toBe(names[what].length + 1);
    names[what].push(word);
  }
  expect([names.row.length, names.column.length]).toEqual([matrix.rows, matrix.columns]);
  // The plain matrix knows columns by name, and its rows in an order of its own: compare columns as multisets of values.
  const terms = [...h.density.numerators].map(
    ([word, value]) => [Number(value), textFromWord(word)] as const,
  );
  const plain = plainMatrix(terms, cell, range);
  const byColumn = (entries: readonly (readonly number[])[], name: (column: number) => string) => {
    const columns = new Map<string, number[]>();
    for (const [, column, value] of entries)
      columns.set(
        name(column!),
        [...(columns.get(name(column!)) ?? []), value!].sort((a, b) => a - b),
      );
    return [...columns].sort(([a], [b]) => (a < b ? -1 : 1));
  };
  expect(byColumn(matrix.entries, (c) => names.column[c - 1]!)).toEqual(
    byColumn(plain.entries, (c) => plain.words[c]!),
  );
  expect(matrix.columns).toBe(plain.columns);
  // Its rows include those whose entries have cancelled.
  expect(matrix.rows).toBe(new Set(plain.entries.map(([row]) => row)).size);
});

test('a range that is none', () => {
  expect(() => new EquationMatrix(parseModel('XX'), 0)).toThrow(InputError);
});

// PARI/GP, "A computer algebra system for number theory": `matrank` over the rationals, read from the exported file itself.
const gp = spawnSync('gp', ['--version-short']).status === 0;
if (!gp) console.warn('the rank of exported matrices is not compared: gp is not installed (Debian: pari-gp)');

describe.skipIf(!gp)('the rank by PARI/GP of what `holdfast matrix` writes', () => {
  test.each([
    ['XX + YY + 1/2 ZZ', 1, 4],
    ['ZZ + 2 X + 3 Z', 1, 4],
    ['XIXI + YIYI + IXIX + IYIY + 3 ZZ', 2, 2],
  ])('%s', (formula, cell, range) => {
    const output = join(folder, 'matrix.sms');
    const main = new URL('../../src/cli/main.ts', import.meta.url).pathname;
    execFileSync(process.execPath, [
      '--import',
      'tsx',
      main,
      'matrix',
      formula,
      `--cell=${cell}`,
      `--range=${range}`,
      `--output=${output}`,
    ]);
    const script = `
      lines = readstr("${output}");
      head = strsplit(lines[1], " ");
      m = matrix(eval(head[1]), eval(head[2]));
      for (i = 2, #lines - 1, e = apply(eval, strsplit(lines[i], " ")); m[e[1], e[2]] = e[3]);
      print(matrank(m));`;
    const answer = execFileSync('gp', ['-q', '-f', '-s', '1G'], {
      input: script.replace(/\n\s*/g, '\n'),
      encoding: 'utf8',
    });
    const result = searchNow(parseModel(formula, { cell }), { range });
    expect(Number(answer.trim())).toBe(result.candidates - result.charges.length);
    expect(readFileSync(`${output}.legend`, 'utf8')).toMatch(/^column 1 /);
  });
});
