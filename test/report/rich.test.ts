import { inspect } from 'node:util';
import katex from 'katex';
import { describe, expect, it } from 'vitest';
import {
  Chain,
  displayOf,
  Operator,
  Polynomial,
  parseModel,
  rich,
  search,
  searchNow,
} from '../../src/index.ts';

const result = searchNow(parseModel('2 XX + 3 YY + 5 ZZ'), { range: 5 });

describe('rich output', () => {
  it('has each form that a notebook may ask for', () => {
    const display = (rich(result) as unknown as Record<symbol, () => ReturnType<typeof displayOf>>)[
      Symbol.for('Jupyter.display')
    ]!();
    expect(display).toEqual(displayOf(result));
    expect(display['image/svg+xml']).toMatch(/^<svg/);
    expect(display['text/html']).toContain('<math');
    expect(display['text/plain']).toBe(`${rich(result)}`);
    katex.renderToString(display['text/latex'], { displayMode: true, throwOnError: true, strict: 'error' });
    const none = displayOf(searchNow(parseModel('ZXZ + X'), { range: 1 }));
    katex.renderToString(none['text/latex'].slice(1, -1), { throwOnError: true });
  });
});

describe('in a console', () => {
  it('every object has a short form', async () => {
    expect(inspect(result)).toBe('SearchResult(range ≤ 5: 4 charges, complete; dimensions 0 1 2 3 4)');
    expect(inspect(result.charges[0])).toBe('Charge(range 2, even: 2 XX + 3 YY + 5 ZZ)');
    expect(inspect(result.charges[3])).toMatch(/^Charge\(range 5, odd: .* … 40 terms\)$/);
    expect(inspect(result.hamiltonian)).toBe('Hamiltonian(2 XX + 3 YY + 5 ZZ; range 2)');
    expect(inspect(Operator.of({ XX: '1/2' }))).toBe('Operator(1/2 XX)');
    expect(inspect(Polynomial.of([[[1, 2], 3]]))).toBe('Polynomial(3*x0*x1^2)');
    expect(inspect(new Chain(2))).toBe('Chain(2 spins a cell)');
    expect(inspect(await search(parseModel('ZZ + X + Z'), { range: 2 }))).toContain('1 charge, complete');
  });

  it('which copies, JSON and comparisons do not see', () => {
    expect(Object.keys(result.charges[0]!)).toEqual(['range', 'parity', 'density']);
    expect(Object.isFrozen(result) && Object.isFrozen(result.charges[0])).toBe(true);
  });
});
