import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { checkNow } from '../../src/check/check.ts';
import { parseFamily, parseModel } from '../../src/model/formula.ts';
import { familyJson, familyLatex, printFamily } from '../../src/report/family.ts';
import { plotFamily } from '../../src/report/family-plot.ts';
import { searchNow } from '../../src/search/search.ts';
import { classifyNow } from '../../src/theory/family/classify.ts';

const folder = mkdtempSync(join(tmpdir(), 'holdfast-family-'));
afterAll(() => rmSync(folder, { recursive: true }));
const root = new URL('../..', import.meta.url).pathname;

function holdfast(...args: string[]) {
  return spawnSync(process.execPath, ['--import', 'tsx', join(root, 'src/cli/main.ts'), 'family', ...args], {
    encoding: 'utf8',
    cwd: root,
  });
}

const FORMULA = 'ZZ + g X + (h^2 - 1) Z';
const result = classifyNow(parseFamily(FORMULA), { range: 3 });

describe('holdfast family', () => {
  it('prints JSON whose points and conditions the plain search confirms', () => {
    const plot = join(folder, 'map.svg');
    const state = join(folder, 'state.json');
    const proofs = join(folder, 'proofs');
    const run = holdfast(
      FORMULA,
      '--range=3',
      '--json',
      `--picture=${plot}`,
      `--checkpoint=${state}`,
      `--certificates=${proofs}`,
    );
    expect(run.stderr).toBe(
      `${result.cases.length - 1} certificates written and accepted; 1 cases have no rational point at hand, or no Hamiltonian.\n`,
    );
    for (const name of readdirSync(proofs))
      expect(checkNow(readFileSync(join(proofs, name), 'utf8')).status).toBe('accepted');
    expect(readdirSync(proofs).length).toBe(result.cases.length - 1);
    expect(run.status).toBe(0);
    const document = JSON.parse(run.stdout);
    expect(document).toEqual(JSON.parse(JSON.stringify(familyJson(result))));
    for (const { point, dimensionByRange } of document.cases)
      if (point !== null)
        expect(searchNow(parseModel(FORMULA, { parameters: point }), { range: 3 }).dimensionByRange).toEqual(
          dimensionByRange,
        );
    expect(readFileSync(plot, 'utf8')).toBe(plotFamily(result, { left: -3, right: 3, bottom: -3, top: 3 }));
    // All cases closed: the second run reads its answer from the checkpoint, and refuses one of another range.
    expect(existsSync(state)).toBe(true);
    expect(holdfast(FORMULA, '--range=3', '--json', `--checkpoint=${state}`).stdout).toBe(run.stdout);
    expect(holdfast(FORMULA, '--range=2', `--checkpoint=${state}`).status).toBe(2);
    writeFileSync(state, '{"holdfast"');
    expect(holdfast(FORMULA, '--range=3', `--checkpoint=${state}`).stderr).toContain('checkpoint: expected');
  });

  it.each([
    ['a coefficient that is no polynomial', ['XX / a + Z', '--range=3'], 'a division by a constant'],
    ['too many candidates', ['a XX + Z', '--range=9'], 'has 196,608 candidates'],
    [
      'a map of three parameters',
      ['a XX + b YY + c Z', '--range=2', '--picture=x.svg'],
      'two free parameters',
    ],
  ])('refuses %s', (_, args, message) => {
    const { status, stderr, stdout } = holdfast(...args);
    expect(stderr).toContain(message);
    expect(stdout).toBe('');
    expect(status).toBeGreaterThan(0);
  });
});

describe('reports of a family', () => {
  it('say the conditions, the charges, the evidence and the cautions', () => {
    const text = printFamily(result);
    expect(text).toContain('general couplings');
    expect(text).toMatch(/0, 2, 4 +h \+ 1 = 0|0, 2, 4 +h - 1 = 0/);
    expect(text).toContain('range 3: ZXZ - g YY + (g^2 - 1) X');
    // h² = 3 has no rational point, and says so.
    expect(text).toContain(`agrees in ${result.cases.length - 1} of ${result.cases.length} cases`);
    expect(text).toContain('may be empty over the reals');
    expect(text).toContain('by itself it proves neither');
    expect(text).toContain('quasilocal');
  });

  it('typeset a table with one line a set', () => {
    const latex = familyLatex(classifyNow(parseFamily('Jx XX + Jy YY + 2 ZZ + h_z Z'), { range: 2 }));
    expect(latex).toContain('$J_{x} - J_{y} = 0$');
    expect(latex.split('\n').filter((l) => l.endsWith('\\\\')).length).toBeGreaterThan(2);
    expect(latex).not.toContain('*');
  });
});
