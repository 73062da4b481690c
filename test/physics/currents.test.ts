import { describe, expect, it } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { parseDensity, parseModel } from '../../src/model/formula.ts';
import { currentOf, isContinuous } from '../../src/physics/currents.ts';
import { searchNow } from '../../src/search/search.ts';
import { property } from '../support/random.ts';
import { sumOverRing } from '../support/rings.ts';

const chain = new Chain(1);

describe('currentOf', () => {
  // "Transport and conservation laws", Phys. Rev. B 55, 11029 (1997): the energy current of the XXZ chain is the range-3 charge.
  it.each(['1/2', '1', '3'])(
    'XXZ at Δ = %s: the energy current is the range-3 charge, up to a factor',
    (delta) => {
      const h = parseModel('XX + YY + D ZZ', { parameters: { D: delta } });
      const current = currentOf(chain, h.density, h.density).density;
      const charge = searchNow(h, { range: 3 }).charges.find((q) => q.range === 3)!.density;
      const [word] = charge.numerators.keys();
      const [c, q] = [current.coefficient(word!), charge.coefficient(word!)];
      const factor = { numerator: c.numerator * q.denominator, denominator: c.denominator * q.numerator };
      expect(factor.numerator).not.toBe(0n);
      expect(current.equals(charge.times(factor))).toBe(true);
    },
  );

  it('XX: the current of Z/2 is the one of the textbook', () => {
    // i[H, Z_0] with H = XX + YY: i[X_0X_1 + Y_0Y_1, Z_0] = 2 Y_0X_1 − 2 X_0Y_1, which is −J_1; so J_0 = 2 (X_{−1}Y_0 − Y_{−1}X_0).
    const { placed } = currentOf(chain, parseDensity('XX + YY'), parseDensity('Z'));
    expect(placed.cell).toBe(-1);
    expect(placed.operator.equals(Operator.of({ XY: 2, YX: -2 }))).toBe(true);
  });

  it('of every charge under the flow of every charge it commutes with: continuity, term by term', () => {
    for (const [formula, cell] of [
      ['XX + YY + ZZ', 1],
      ['XX + 2 YY + 3 ZZ', 1],
      ['XIXI + YIYI + IXIX + IYIY + 4 ZZ', 2],
    ] as const) {
      const h = parseModel(formula, { cell });
      const { charges } = searchNow(h, { range: cell === 1 ? 4 : 3 });
      for (const a of charges)
        for (const b of charges) {
          if (!h.chain.bracket(b.density, a.density).isZero()) continue;
          const current = currentOf(h.chain, b.density, a.density);
          expect(isContinuous(h.chain, b.density, a.density, current)).toBe(true);
        }
    }
  });

  property('continuity on a ring, site by site', 8, (random) => {
    // Density h split at random is still conserved: move terms along the chain.
    const h = random.hamiltonian({ range: 2, terms: 4 });
    const q = h.density.mapWords((word) => word << BigInt(2 * random.integer(0, 2)));
    const { placed } = currentOf(chain, h.density, q);
    const size = 12;
    const at = (operator: Operator, spin: number) =>
      operator.mapWords((word) => {
        let image = 0n;
        for (let s = 0; s < size; s++) {
          const letter = (word >> BigInt(2 * s)) & 3n;
          image |= letter << BigInt(2 * ((s + spin + 2 * size) % size));
        }
        return image;
      });
    const left = sumOverRing(h.density, 1, size).bracket(at(q, 3)).times(2);
    const right = at(placed.operator, 3 + placed.cell).minus(at(placed.operator, 4 + placed.cell));
    expect(left.equals(right)).toBe(true);
  });

  it('refuses a density whose sum is not conserved', () => {
    expect(() => currentOf(chain, parseDensity('ZZ + X'), parseDensity('Z'))).toThrow(
      /current: expected a density/,
    );
  });
});
