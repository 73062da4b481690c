import { describe, expect, it } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { parseDensity, parseModel } from '../../src/model/formula.ts';
import { boostDerivative, chargeAlgebra, paritiesOf } from '../../src/physics/charge-algebra.ts';
import { innerProduct } from '../../src/physics/inner-product.ts';
import { searchNow } from '../../src/search/search.ts';

const chain = new Chain(1);

describe('chargeAlgebra', () => {
  it('XXX: the spins do not commute with each other, everything else does', () => {
    const result = searchNow(parseModel('XX + YY + ZZ'), { range: 4 });
    const { commutators, gram, orthogonal, norms } = chargeAlgebra(result);
    expect(commutators).toHaveLength(3);
    for (const { a, b, density, expansion } of commutators) {
      expect([result.charges[a]!.range, result.charges[b]!.range]).toEqual([1, 1]);
      let sum = Operator.zero;
      expansion!.forEach((c, i) => {
        sum = sum.plus(result.charges[i]!.density.times(c));
      });
      expect(sum.equals(density)).toBe(true);
    }
    for (const [a, row] of gram.entries())
      for (const [b, value] of row.entries()) expect(value).toEqual(gram[b]![a]);
    for (const [a, p] of orthogonal.entries())
      for (const [b, q] of orthogonal.entries())
        expect(innerProduct(chain, p, q)).toEqual(a === b ? norms[a] : { numerator: 0n, denominator: 1n });
  });

  it('where charges do not commute, the commutators are charges again', () => {
    // All charges of the XX chain commute.
    const xx = searchNow(parseModel('XX + YY'), { range: 4 });
    expect(chargeAlgebra(xx).commutators).toHaveLength(0);
    // The classical chain flips a spin between opposite neighbours: such flips need not commute.
    const classical = searchNow(parseModel('ZZ'), { range: 3 });
    const { commutators } = chargeAlgebra(classical);
    expect(commutators.length).toBeGreaterThan(0);
    for (const { density } of commutators)
      expect(chain.bracket(parseDensity('ZZ'), density).isZero()).toBe(true);
  });

  it('ladder: the derivative of each XYZ charge has the next range and is conserved', () => {
    const h = parseModel('XX + 2 YY + 3 ZZ');
    const { derivatives } = chargeAlgebra(searchNow(h, { range: 5 }));
    expect(derivatives.map((d) => h.chain.rangeOf(d.density))).toEqual([3, 4, 5, 6]);
    expect(derivatives.every((d) => d.conserved)).toBe(true);
    expect(derivatives.map((d) => d.expansion !== null)).toEqual([true, true, true, false]);
  });

  it('no ladder where there is none', () => {
    const h = parseModel('ZZ + X + 1/2 Z');
    const derivative = boostDerivative(h, h.density);
    expect(derivative.isZero() || h.chain.bracket(h.density, derivative).isZero()).toBe(false);
  });

  it('parities', () => {
    expect(paritiesOf(chain, parseDensity('XYZ - ZYX'))).toEqual({
      reflection: -1,
      flipX: 1,
      flipY: 1,
      flipZ: 1,
      transposition: -1,
    });
    expect(paritiesOf(chain, parseDensity('Z + XX'))).toMatchObject({ flipX: null, flipZ: 1, reflection: 1 });
  });
});
