/**
 * Two checkers, one verdict: `plain_checker.py` was written in another language from docs/certificate.md alone. Where they differ,
 * the page, or one of them, is wrong.
 */
import { spawnSync } from 'node:child_process';
import { describe, expect, test } from 'vitest';
import { certificateNow } from '../../src/certificate/certificate.ts';
import { checkNow } from '../../src/check/check.ts';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { mutantOf } from '../support/mutants.ts';
import { Random } from '../support/random.ts';

const python = spawnSync('python3', ['--version']).status === 0;
if (!python) console.warn('the checker in Python is left out: python3 is not installed (Debian: python3)');

const MODELS = [
  ['ZZ + 2 X + 3 Z', 1, 3],
  ['XX + YY + ZZ', 1, 3],
  ['XX + 1/2 YY - 3/5 ZZ', 1, 3],
  ['XX + 2 YY + 4 ZZ + 3 XY - 3 YX', 1, 3],
  ['ZZX + 1/3 X', 1, 2],
  ['ZZ + XI', 2, 1],
] as const;

/** Mutants a model; those that a limit of the TypeScript checker stops are no difference. */
const MUTANTS = 60;

describe.skipIf(!python)('the checker in Python', () => {
  test.each(MODELS)('gives the same verdict on %s and its mutants', (formula, cell, range) => {
    const original = certificateNow(searchNow(parseModel(formula, { cell }), { range }));
    const random = new Random(formula.length + range);
    const texts = [original, ...Array.from({ length: MUTANTS }, () => mutantOf(original, random))];
    const verdicts = texts.map(checkNow);
    const asked = texts.filter((_, i) => !/limits/.test((verdicts[i] as { reason?: string }).reason ?? ''));
    const answer = spawnSync('python3', [new URL('plain_checker.py', import.meta.url).pathname], {
      input: asked.map((text) => `${JSON.stringify(text)}\n`).join(''),
      encoding: 'utf8',
      timeout: 60_000,
    });
    expect(answer.stderr).toBe('');
    const lines = answer.stdout.trimEnd().split('\n');
    expect(lines.length).toBe(asked.length);
    asked.forEach((text, i) => {
      const verdict = checkNow(text);
      const line = verdict.status === 'accepted' ? `accepted ${verdict.id}` : verdict.status;
      expect(lines[i], `${JSON.stringify(verdict)}\n${text}`).toBe(line);
    });
    expect(lines[0]).toMatch(/^accepted/);
  });
});
