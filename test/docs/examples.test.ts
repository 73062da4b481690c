/** The scripts of docs/examples run as a reader would run them, and so do the cells of the notebook. */
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';

const FOLDER = resolve(import.meta.dirname, '../../docs/examples');

/** Facts that each script must print. */
const EXPECTED: Readonly<Record<string, readonly RegExp[]>> = {
  'charges.ts': [
    /^Exactly 4 independent charges of range ≤ 5/,
    /Σ 42 \(XYZ - ZYX\) - 75 \(XZY - YZX\) - 35 \(YXZ - ZXY\)/,
  ],
  'absence.ts': [
    /^charges of range ≤ 6: 1\naccepted sha256:[0-9a-f]{64}\n/,
    /because the output \w+ has no other source\.\n$/,
  ],
  // The third axis along the field and two equal couplings, or no field: "Complete classification …", arXiv:2411.02162 (2024).
  'couplings.ts': [
    /g = 1 {4}h = 1\/3 {2}4 charges, 1 of range 3/,
    /g = 2 {4}h = 1\/3 {2}1 charges, 0 of range 3/,
  ],
  // Phys. Rev. Lett. 56, 2453 (1986): 12 strings.
  'ladder.ts': [/range 3: XIZIYI - YIZIXI \+ IXIZIY - IYIZIX - 4 \(/],
  'paper.ts': [/^\\documentclass\{article\}/, /\\end\{document\}\n$/],
};

function run(program: string, args: readonly string[], input = ''): string {
  const { stdout, stderr, status } = spawnSync(program, args, {
    cwd: FOLDER,
    encoding: 'utf8',
    input,
    timeout: 60_000,
  });
  expect(status, stderr).toBe(0);
  return stdout;
}

describe('examples', () => {
  it('are the five listed here', () => {
    expect(
      readdirSync(FOLDER)
        .filter((f) => f.endsWith('.ts'))
        .sort(),
    ).toEqual(Object.keys(EXPECTED).sort());
  });

  it.each(Object.entries(EXPECTED))('%s says what it should', (script, facts) => {
    const printed = run(process.execPath, ['--import', 'tsx', script]);
    for (const fact of facts) expect(printed).toMatch(fact);
  });
});

const HAS_PYTHON = spawnSync('python3', ['--version']).status === 0;
if (!HAS_PYTHON) console.warn('left out: the cells of the notebook need python3');

interface Cell {
  readonly cell_type: 'markdown' | 'code';
  readonly id: string;
  readonly source: readonly string[];
  readonly outputs?: readonly unknown[];
}

describe('the notebook', () => {
  const notebook = JSON.parse(readFileSync(join(FOLDER, 'wire.ipynb'), 'utf8')) as {
    nbformat: number;
    cells: Cell[];
  };
  const scratch = mkdtempSync(join(tmpdir(), 'notebook-'));
  afterAll(() => rmSync(scratch, { recursive: true, force: true }));

  it('is a notebook of format 4 without stored output', () => {
    expect(notebook.nbformat).toBe(4);
    expect(new Set(notebook.cells.map((c) => c.id)).size).toBe(notebook.cells.length);
    for (const cell of notebook.cells) if (cell.cell_type === 'code') expect(cell.outputs).toEqual([]);
  });

  it.skipIf(!HAS_PYTHON)('runs from the first cell to the last', () => {
    // What the cells ask of IPython, and nothing else of it: the forms are printed by their kind and beginning.
    writeFileSync(
      join(scratch, 'shown.py'),
      [
        'import sys, types',
        'module = types.ModuleType("IPython.display")',
        'for kind in ("HTML", "SVG"):',
        '    setattr(module, kind, lambda data, kind=kind: f"<{kind}> {data[:40]}")',
        'module.display = print',
        'sys.modules["IPython"] = types.ModuleType("IPython")',
        'sys.modules["IPython.display"] = module',
        ...notebook.cells.filter((c) => c.cell_type === 'code').map((c) => c.source.join('')),
      ].join('\n'),
    );
    const printed = run('python3', [join(scratch, 'shown.py')]);
    expect(printed).toContain('<SVG> <svg xmlns=');
    expect(printed).toContain('<HTML> <iframe srcdoc="&lt;!doctype html');
    expect(printed).toContain('accepted sha256:');
  });
});
