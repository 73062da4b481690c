import { describe, expect, it } from 'vitest';
import { type Rational, rational, textFromRational } from '../../src/algebra/rational.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { parseDensity, parseModel } from '../../src/model/formula.ts';
import { innerProduct } from '../../src/physics/inner-product.ts';
import { mazurBounds } from '../../src/physics/overlaps.ts';
import { boundPicture } from '../../src/report/bound-picture.ts';
import { decimalText } from '../../src/report/decimal.ts';
import { searchNow } from '../../src/search/search.ts';
import { timeAveraged } from '../support/diagonalise.ts';
import { property } from '../support/random.ts';

const number = ({ numerator, denominator }: Rational) => Number(numerator) / Number(denominator);

describe('innerProduct', () => {
  property(
    'at a magnetisation is the connected correlation of the sums, on a ring of product states',
    10,
    (random) => {
      // ⟨·⟩ by explicit diagonal weights: only the diagonal of the product counts, traced over basis states of a ring of 7.
      const chain = new Chain(1);
      const [a, b] = [random.operator(3, 4), random.operator(3, 4)];
      const mu = rational(BigInt(random.integer(-2, 2)), 3n);
      const normal = [chain.normalise(a), chain.normalise(b)] as const;
      const cells = 7;
      let sum = 0;
      const mean = (words: Iterable<readonly [bigint, bigint]>, denominator: bigint) => {
        let total = 0;
        for (const [word, value] of words) {
          let factor = Number(value) / Number(denominator);
          for (let rest = word; rest !== 0n; rest >>= 2n)
            if ((rest & 3n) === 2n) factor *= number(mu);
            else if ((rest & 3n) !== 0n) factor = 0;
          total += factor;
        }
        return total;
      };
      const means = normal.map((o) => mean(o.numerators, o.denominator));
      const placed = normal[0].mapWords((w) => chain.translate(w, 2));
      for (let d = 0; d < cells; d++) {
        const other = normal[1].mapWords((w) => {
          const moved = w << BigInt(2 * d);
          return (moved & (4n ** 7n - 1n)) | (moved >> 14n);
        });
        const both = placed.anticommutator(other);
        sum += mean(both.numerators, both.denominator) - means[0]! * means[1]!;
      }
      expect(number(innerProduct(chain, a, b, mu))).toBeCloseTo(sum, 9);
    },
  );
});

describe('mazurBounds', () => {
  it('an observable that is a charge is kept in full, one orthogonal to all charges not at all', () => {
    const xx = searchNow(parseModel('XX + YY'), { range: 3 });
    // The spin current of the XX chain is conserved: "Transport and conservation laws", Phys. Rev. B 55, 11029 (1997).
    expect(mazurBounds(xx, parseDensity('XY - YX')).map((b) => textFromRational(b.share))).toEqual([
      '0',
      '1',
      '1',
    ]);
    // XXX at zero magnetisation: local charges are even under the flip of all spins by X, the spin current is odd.
    const xxx = searchNow(parseModel('XX + YY + ZZ'), { range: 4 });
    expect(mazurBounds(xxx, parseDensity('XY - YX')).every((b) => b.bound.numerator === 0n)).toBe(true);
  });

  it.each([
    ['1/2', '1/2'],
    ['1', '1/3'],
    ['3', '-2/5'],
  ])('XXZ at Δ = %s and ⟨Z⟩ = %s: the published bound on the Drude weight of spin', (delta, mu) => {
    // "Transport and conservation laws", Phys. Rev. B 55, 11029 (1997), in H = Σ SxSx + SySy + Δ SzSz at β → 0, with m = ⟨Sz⟩ (from memory):
    //   D ≥ (β/2) · 8Δ²m²(1/4 − m²) / (1 + 8Δ²(1/4 + m²)).
    // D = (β/2) times the long-time average of (j(t)|j), and j = Sx Sy − Sy Sx = (XY − YX)/4.
    // By hand, μ = 2m, connected: j meets only the two neighbours' terms of Q3, (j|Q3) = ± (1/4) · 4Δ μ (1 − μ²) and
    // (Q3|Q3) = 2 (1 − μ²)(1 + 2Δ² (1 + μ²)): the quotient is the printed right side.
    const h = parseModel('XX + YY + D ZZ', { parameters: { D: delta } });
    const found = searchNow(h, { range: 3 });
    const [n, d] = mu.split('/');
    const magnetisation = rational(BigInt(n!), BigInt(d!));
    const bound = number(
      mazurBounds(found, parseDensity('1/4 XY - 1/4 YX'), { magnetisation }).at(-1)!.bound,
    );
    const D = Number(delta.split('/')[0]) / Number(delta.split('/')[1] ?? 1);
    const m = number(magnetisation) / 2;
    const published = (8 * D ** 2 * m ** 2 * (1 / 4 - m ** 2)) / (1 + 8 * D ** 2 * (1 / 4 + m ** 2));
    expect([bound / published, bound]).toEqual([expect.closeTo(1, 10), bound]);
  });

  it('never falls with the range, and is at most (A|A)', () => {
    const found = searchNow(parseModel('XX + 2 YY + 3 ZZ'), { range: 5 });
    const bounds = mazurBounds(found, parseDensity('XX + XIX + 2 XYZ'));
    bounds.forEach((b, i) => {
      expect(number(b.share)).toBeLessThanOrEqual(1);
      if (i > 0) expect(number(b.bound)).toBeGreaterThanOrEqual(number(bounds[i - 1]!.bound));
    });
    expect(boundPicture(bounds, 'test')).toContain('<title>range 5');
  });

  /*
   * Long-time averages by exact diagonalisation, A = Σ a: Σ_{E_m = E_n} |A_mn|² / (L 2^L). A ring conserves more than the charges used
   * (wave numbers, projections on energies), so the average lies above the bound by an amount that falls with L; both are shown.
   */
  it('time averages on rings of 6, 7 and 8 spins stay above the bound and come down to it', () => {
    const model = parseModel('ZZ + X + 1/2 Z');
    // (X|H)² / (H|H) = 1 / (1 + 1 + 1/4) = 4/9.
    const { bound } = mazurBounds(searchNow(model, { range: 3 }), parseDensity('X')).at(-1)!;
    expect(textFromRational(bound)).toBe('4/9');
    const above = [6, 7, 8].map(
      (cells) => timeAveraged(model.density, parseDensity('X'), cells) - number(bound),
    );
    // Finite-size excess, measured: 0.065, 0.044, 0.036.
    for (const [i, excess] of above.entries()) {
      expect(excess).toBeGreaterThan(0);
      expect(excess).toBeLessThan(0.4 / (6 + i));
      if (i > 0) expect(excess).toBeLessThan(above[i - 1]!);
    }
  });

  it('an integrable ring keeps more than the charges of short range say', () => {
    const model = parseModel('XX + 2 YY + 3 ZZ');
    const { bound } = mazurBounds(searchNow(model, { range: 3 }), parseDensity('XX')).at(-1)!;
    // (XX|H)² / (H|H) = 1 / 14; the range-3 charge is odd under reflection and does not help. The ring of 7: 0.39, large finite-size effects.
    expect(textFromRational(bound)).toBe('1/14');
    expect(timeAveraged(model.density, parseDensity('XX'), 7)).toBeGreaterThan(number(bound));
  });

  it('refuses a magnetisation that H does not conserve, and constants', () => {
    const ising = searchNow(parseModel('ZZ + X'), { range: 2 });
    expect(() => mazurBounds(ising, parseDensity('X'), { magnetisation: rational(1n, 2n) })).toThrow(
      /magnetisation/,
    );
    const xx = searchNow(parseModel('XX + YY'), { range: 2 });
    expect(() => mazurBounds(xx, parseDensity('XX'), { magnetisation: rational(1n) })).toThrow(
      /between -1 and 1/,
    );
  });
});

it('decimals', () => {
  expect(decimalText(rational(-2n, 3n), 30)).toBe(`-0.${'6'.repeat(29)}7`);
  expect(decimalText(rational(1n, 8n), 2)).toBe('0.13');
});
