import { describe, expect, it } from 'vitest';
import { plainMatrix } from '../../bench/external/matrix.ts';
import { candidatesOf, hamiltonianOfBench, MODELS, nonZeros } from '../../bench/models.ts';
import { commute, firstSpin, shift, spanOf } from '../../src/algebra/word.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { property } from '../support/random.ts';

describe('the systems of the bench', () => {
  it('counts candidates', () => {
    for (const [cell, range] of [
      [1, 1],
      [1, 4],
      [2, 2],
    ] as const)
      expect(plainMatrix([[1, 'X']], cell, range).columns).toBe(candidatesOf(cell, range));
  });

  // Strings of all candidates, one by one, under every placement of every term.
  property('counts non-zeros in closed form', 12, (random, run) => {
    const cell = run % 2 === 0 ? 1 : 2;
    const range = cell === 1 ? 4 : 2;
    const h = random.hamiltonian({ cell, range: 3, terms: 4 });
    const chain = new Chain(cell);
    let count = 0;
    for (let word = 1n; word < 1n << BigInt(2 * cell * range); word++) {
      if (Math.floor(firstSpin(word) / cell) > 0) continue;
      for (const term of h.density.numerators.keys())
        for (let at = -chain.range(term) + 1; at < Math.ceil(spanOf(word) / cell); at++) {
          const room = 3 * cell;
          if (!commute(shift(word, room), shift(term, room + at * cell))) count++;
        }
    }
    expect(nonZeros(h, range)).toBe(count);
  });

  it('knows each model, in its notation', () => {
    for (const model of MODELS) expect(hamiltonianOfBench(model).density.size).toBeGreaterThan(0);
  });
});
