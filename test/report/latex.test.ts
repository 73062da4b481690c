import katex from 'katex';
import { describe, expect, it } from 'vitest';
import { latexDensity, latexResult, parseModel, searchNow } from '../../src/index.ts';
import { latexText } from '../../src/report/latex.ts';
import { property } from '../support/random.ts';

/** KaTeX refuses what TeX would not compile; its warnings count too. */
function typeset(math: string, displayMode: boolean): string {
  return katex.renderToString(math, { displayMode, throwOnError: true, strict: 'error' });
}

describe('LaTeX', () => {
  property('densities can be typeset, and keep every word', 60, (random) => {
    const h = random.hamiltonian({ cell: random.integer(1, 2), terms: random.integer(1, 14) });
    const math = latexDensity(h, h.density);
    expect(() => typeset(math, false), math).not.toThrow();
    expect(math.match(/\\mathrm/g)).toHaveLength(h.density.size);
  });

  it.each([
    ['2 XX + 3 YY + 5 ZZ', 1, 6],
    ['1/2 XX - 3/7 Z', 1, 3],
    ['XIXI + YIYI + IXIX + IYIY + 4 ZZ', 2, 3],
    ['ZXZ + X', 1, 2],
  ] as const)('a document about %s compiles', (formula, cell, range) => {
    const result = searchNow(parseModel(formula, { cell }), { range });
    const document = latexResult(result);
    const equations = [
      ...document.matchAll(/\\begin\{align\*\}[\s\S]*?\\end\{align\*\}|\\\[([\s\S]*?)\\\]/g),
    ];
    expect(equations).toHaveLength(1 + result.charges.length + (result.expansionOfH === null ? 0 : 1));
    for (const [whole, inner] of equations) typeset(inner ?? whole, true);
    const prose = document.replace(/\\begin\{align\*\}[\s\S]*?\\end\{align\*\}|\\\[[\s\S]*?\\\]/g, '');
    for (const [, math] of prose.matchAll(/\$([^$]*)\$/g)) typeset(math!, false);
    // What is left is plain text and commands that every LaTeX has, in ASCII, with balanced braces.
    expect(document).toMatch(/^[\n -~]*$/);
    expect(document.split('{').length).toBe(document.split('}').length);
    expect(prose.replace(/\$[^$]*\$/g, '')).not.toMatch(/(?<!\\)[#&%_^]/);
    const words =
      result.charges.reduce((sum, q) => sum + q.density.size, 0) + result.hamiltonian.density.size;
    expect(document.match(/\\mathrm\{[IXYZ\\,]+\}/g)).toHaveLength(words + 1);
  });

  it('escapes what is special', () => {
    expect(latexText('50 % of {a_b} \\ ≤ 3')).toBe('50 \\% of \\{a\\_b\\} \\textbackslash{} $\\le$ 3');
  });
});
