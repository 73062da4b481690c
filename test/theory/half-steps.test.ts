/** Half steps: bounds for Ising-type chains along any axis against exhaustive counts. */
import { describe, expect, it } from 'vitest';
import { parseModel } from '../../src/model/formula.ts';
import { searchNow } from '../../src/search/search.ts';
import { everyRangeBound } from '../../src/theory/decide.ts';
import { decompose } from '../../src/theory/decompose.ts';
import { HalfStepGrowth, halfSteps } from '../../src/theory/half-steps.ts';

describe('half steps', () => {
  it.each([
    ['ZZ + 2 X', 2],
    ['ZZ + 2 X - 3 Y', 2],
    ['ZZ + 2 X + 3 Z', 0],
    ['-3 YY + X + Y + Z', 0],
    // a = X + 2 Y, field along Z and with a part along a.
    ['XX + 2 XY + 2 YX + 4 YY + Z', 2],
    ['XX + 2 XY + 2 YX + 4 YY + Z + X', 0],
  ])('%s: at most %i of range 5 and above, as the search finds', (formula, atMost) => {
    const h = parseModel(formula);
    expect(everyRangeBound(decompose(h)!)).toMatchObject({
      method: 'half steps',
      from: 5,
      generic: atMost,
      exceptional: [],
    });
    const { dimensionByRange } = searchNow(h, { range: 5 });
    expect(dimensionByRange[4]! - dimensionByRange[3]!).toBe(atMost);
  });

  it('has strings of half-length ℓ in the numbers that letters of K and C give', () => {
    const steps = halfSteps(decompose(parseModel('ZZ + X'))!);
    if (!steps.ok) throw new Error(steps.reason);
    const growth = new HalfStepGrowth(steps.letters);
    // K has one letter, C two. ℓ = 6: K on four sites ends, C on three; ℓ = 7: one of each, two orders.
    expect(growth.strings(6).length).toBe(1 * 16 * 1 + 2 * 4 * 2);
    expect(growth.strings(7).length).toBe(2 * (1 * 16 * 2));
    for (const length of [2, 3, 4, 5])
      for (const string of growth.strings(length)) expect(growth.halfLength(string)).toBe(length);
  });

  it('refuses a chain whose field does not leave the axis', () => {
    expect(halfSteps(decompose(parseModel('ZZ + 2 Z'))!)).toMatchObject({ ok: false });
    expect(halfSteps(decompose(parseModel('XX + YY'))!)).toMatchObject({ ok: false });
  });
});
