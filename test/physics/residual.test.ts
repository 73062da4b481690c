import { describe, expect, it } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { textFromRational } from '../../src/algebra/rational.ts';
import { parseDensity, parseModel } from '../../src/model/formula.ts';
import { nearestCharge, residual, smallestCorrection } from '../../src/physics/residual.ts';
import { searchNow } from '../../src/search/search.ts';
import { property } from '../support/random.ts';

const heisenberg = parseModel('XX + YY + ZZ');
// Range-4 charge: "Quantum integrals of motion for the Heisenberg spin chain", hep-th/9403149, Mod. Phys. Lett. A 9, 2197 (1994).
const xyz = parseModel('XX + 2 YY + 3 ZZ');

describe('residual', () => {
  it('expands a conserved sum in the basis found', () => {
    const found = searchNow(heisenberg, { range: 3 });
    const candidate = heisenberg.density.times('2/3').plus(Operator.of({ X: 5 }));
    const { conserved, expansion } = residual(heisenberg, candidate, found);
    expect(conserved).toBe(true);
    let sum = Operator.zero;
    expansion!.forEach((c, i) => {
      sum = sum.plus(found.charges[i]!.density.times(c));
    });
    expect(sum.equals(candidate)).toBe(true);
  });

  it('gives i[H, Q] itself, not half of it', () => {
    // i[Z, X] = i·2iY = −2Y.
    const { conserved, commutator } = residual(parseModel('Z'), Operator.of({ X: 1 }));
    expect(conserved).toBe(false);
    expect(commutator.equals(Operator.of({ Y: -2 }))).toBe(true);
  });

  it('refuses the basis of another model', () => {
    const found = searchNow(xyz, { range: 2 });
    expect(() => residual(heisenberg, heisenberg.density, found)).toThrow(
      /residual: expected the search result/,
    );
  });
});

describe('smallestCorrection', () => {
  property('recovers what was taken from a charge, up to charges of lower range', 6, (random) => {
    const charge = searchNow(xyz, { range: 4 }).charges.find((q) => q.range === 4)!.density;
    const broken = charge
      .filter((word) => xyz.chain.range(word) === 4)
      .plus(Operator.of({ XX: random.nonZeroRational() }));
    const correction = smallestCorrection(xyz, broken, { range: 4 })!;
    expect(correction.range).toBe(3);
    const whole = broken.plus(correction.density);
    expect(xyz.chain.bracket(xyz.density, whole).isZero()).toBe(true);
    expect(
      whole
        .filter((word) => xyz.chain.range(word) === 4)
        .equals(broken.filter((w) => xyz.chain.range(w) === 4)),
    ).toBe(true);
  });

  it('finds the missing half of a range-2 charge, of range 1', () => {
    const model = parseModel('ZZ + 2 X');
    const correction = smallestCorrection(model, parseDensity('ZZ'), { range: 2 })!;
    expect(correction.density.toString()).toBe('2 X');
  });

  it('says none where there is none, and nothing to do where all is well', () => {
    const mixed = parseModel('ZZ + X + 1/2 Z');
    expect(smallestCorrection(mixed, parseDensity('XYZ'), { range: 4 })).toBeNull();
    expect(smallestCorrection(mixed, mixed.density, { range: 2 })).toMatchObject({ range: 0 });
  });
});

describe('nearestCharge', () => {
  it('projects at right angles', () => {
    const found = searchNow(xyz, { range: 2 });
    // (XX + YY + ZZ | H) = 1 + 2 + 3 and (H|H) = 1 + 4 + 9: factor 6/14, distance 3 − 36/14 = 3/7.
    const { density, distance } = nearestCharge(found, parseDensity('XX + YY + ZZ'));
    expect(density.equals(xyz.density.times('3/7'))).toBe(true);
    expect(textFromRational(distance)).toBe('3/7');
  });
});
