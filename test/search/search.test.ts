import { describe, expect, test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { textFromRational } from '../../src/algebra/rational.ts';
import { textFromWord, wordFromText } from '../../src/algebra/word.ts';
import { CancelledError, InputError, LimitError, VerificationError } from '../../src/errors.ts';
import { Chain } from '../../src/lattice/chain.ts';
import { parseModel } from '../../src/model/formula.ts';
import { hamiltonianOf } from '../../src/model/hamiltonian.ts';
import { search } from '../../src/search/background.ts';
import { candidateCount, estimate } from '../../src/search/estimate.ts';
import type { SearchResult } from '../../src/search/result.ts';
import { leadingWord, searchNow } from '../../src/search/search.ts';
import { property } from '../support/random.ts';
import { textbookDimensions } from '../support/textbook.ts';

/** Everything that must not depend on the prime, the thread or the machine. */
function bytes(result: SearchResult): string {
  return JSON.stringify({
    dimensions: result.dimensionByRange,
    charges: result.charges.map((q) => [q.range, q.parity, q.density.toJSON()]),
    h: result.expansionOfH?.map(textFromRational),
  });
}

describe('against plain elimination over the rationals', () => {
  property('one spin a cell, interactions of range 1 to 3', 40, (random) => {
    const range = random.integer(1, 3);
    const h = random.hamiltonian({ cell: 1, range, terms: random.integer(1, 5) });
    const k = random.integer(1, 3);
    expect(searchNow(h, { range: k }).dimensionByRange).toEqual(textbookDimensions(h, k));
  });

  property('two and three spins a cell', 16, (random) => {
    const cell = random.integer(2, 3);
    const h = random.hamiltonian({ cell, range: 2, terms: random.integer(2, 5) });
    const k = cell === 2 ? random.integer(1, 2) : 1;
    expect(searchNow(h, { range: k }).dimensionByRange).toEqual(textbookDimensions(h, k));
  });
});

describe('laws of every result', () => {
  property('charges commute with H, are in echelon form, and contain H', 40, (random) => {
    const h = random.hamiltonian({ cell: random.integer(1, 2), range: 2, terms: 5 });
    const range = h.chain.cell === 1 ? 5 : 2;
    const result = searchNow(h, { range });
    expect(result.charges.length).toBe(result.dimensionByRange[range - 1]);
    // Models with many free spins have hundreds of charges: the first and last tell enough.
    const some = [...result.charges.slice(0, 20), ...result.charges.slice(-20)];
    for (const charge of some) {
      expect(h.chain.bracket(h.density, charge.density).isZero()).toBe(true);
      expect(h.chain.rangeOf(charge.density)).toBe(charge.range);
      const leading = leadingWord(h, charge);
      expect(charge.density.denominator).toBe(1n);
      expect(charge.density.numerators.get(leading)! > 0n).toBe(true);
      for (const other of some)
        if (other !== charge && other.parity === charge.parity)
          expect(other.density.coefficient(leading).numerator).toBe(0n);
      if (h.reflection !== null) {
        const { reflection } = h;
        const mirrored = charge.density.mapWords((word) => h.chain.reflect(word, reflection));
        expect(mirrored.equals(charge.parity === 'even' ? charge.density : charge.density.times(-1))).toBe(
          true,
        );
      }
    }
    const sum = result.expansionOfH!.reduce(
      (total, c, i) => total.plus(result.charges[i]!.density.times(c)),
      Operator.zero,
    );
    expect(sum.equals(h.density)).toBe(true);
  });

  property('the same bytes from other primes, small ones included', 30, (random) => {
    const h = random.hamiltonian({ cell: 1, range: random.integer(1, 3), terms: random.integer(2, 5) });
    const reference = bytes(searchNow(h, { range: 4 }));
    for (const primesBelow of [30_000, 1_000_000, 40_000_000])
      expect(bytes(searchNow(h, { range: 4, primesBelow }))).toBe(reference);
  });

  test('coefficients longer than one prime come out exact', () => {
    const h = parseModel('123457 XX + 7654321/1000 YY + 99991 ZZ');
    const result = searchNow(h, { range: 6 });
    expect(result.dimensionByRange).toEqual([0, 1, 2, 3, 4, 5]);
    expect(result.primes.length).toBeGreaterThan(1);
    for (const q of result.charges) expect(h.chain.bracket(h.density, q.density).isZero()).toBe(true);
  });

  test('a prime that divides a coupling is found out, not believed', () => {
    // Modulo 29989, the largest prime below the bound, the field is gone and two charges a range appear.
    const result = searchNow(parseModel('XX + YY + 29989 X'), { range: 4, primesBelow: 29_990 });
    expect(result.dimensionByRange).toEqual([0, 1, 1, 1]);
    expect(result.primes).not.toContain(29_989);
  });

  test('when no prime is left there is no answer', () => {
    expect(() => searchNow(parseModel('XX + YY + 15 X'), { range: 4, primesBelow: 6 })).toThrow(
      VerificationError,
    );
  });

  test('a mirror image of a ladder keeps its legs, that of a dimerised chain turns them', () => {
    expect(parseModel('XIXI + YIYI + 2 IXIX + 2 IYIY + ZZ', { cell: 2 }).reflection).toBe('cells');
    expect(parseModel('XX + YY + 2 IXXI + 2 IYYI', { cell: 2 }).reflection).toBe('spins');
    expect(parseModel('XY').reflection).toBe(null);
  });
});

describe('following growth instead of visiting every candidate', () => {
  const letters = ['X', 'Y', 'Z'];

  property('agrees with the exhaustive search on injective chains of any couplings', 40, (random) => {
    const bonds = letters.flatMap((a) =>
      letters.map((b) => [`${a}${b}`, a === b || random.chance(0.3) ? random.integer(-3, 3) : 0] as const),
    );
    const fields = letters.map((a) => [a, random.chance(0.4) ? random.integer(-3, 3) : 0] as const);
    const density = Operator.of(Object.fromEntries([...bonds, ...fields].filter(([, c]) => c !== 0)));
    if (density.isZero()) return;
    const h = hamiltonianOf(new Chain(1), density);
    const exhaustive = searchNow(h, { range: 6, method: 'exhaustive' });
    let followed: SearchResult;
    try {
      followed = searchNow(h, { range: 6, method: 'growth' });
    } catch (error) {
      // A coupling matrix of rank 2 or 3 is injective, one of rank 0 or 1 is not.
      expect(error).toBeInstanceOf(LimitError);
      const matrix = letters.map((a) =>
        letters.map((b) => density.coefficient(wordFromText(a + b)).numerator),
      );
      for (const [i, j] of [
        [0, 1],
        [0, 2],
        [1, 2],
      ] as const)
        for (const [k, l] of [
          [0, 1],
          [0, 2],
          [1, 2],
        ] as const)
          expect(matrix[i]![k]! * matrix[j]![l]! - matrix[i]![l]! * matrix[j]![k]!).toBe(0n);
      return;
    }
    expect(bytes(followed)).toBe(bytes(exhaustive));
    expect(followed.method).toBe('growth');
  });

  property('agrees on two spins a cell, at several ranges and primes', 14, (random) => {
    const u = random.integer(-3, 3);
    const hopping = [
      'XIXI + YIYI + IXIX + IYIY',
      'XIXI + YIYI + 2 IXIX + 2 IYIY',
      'XIXI + YIYI + ZIZI + IXIX + IYIY + IZIZ',
      'XIXI + YIYI + IXIX + IYIY + XIYI - YIXI',
    ];
    const rung = random.pick(['ZZ', 'XX + YY + ZZ', 'XX']);
    const h = parseModel(`${random.pick(hopping)} + ${u} (${rung}) + ${random.integer(-1, 1)} ZI`, {
      cell: 2,
    });
    const range = random.integer(1, 4);
    const exhaustive = searchNow(h, { range, method: 'exhaustive' });
    const followed = searchNow(h, { range, method: 'growth', primesBelow: random.pick([2 ** 26, 40_000]) });
    expect(bytes(followed)).toBe(bytes(exhaustive));
  });

  property('agrees on chains with many charges, where parts of several ranges meet', 16, (random) => {
    // Rank 2 and equal couplings: up to four parts of full range, and charges at every range.
    const a = random.nonZero(3);
    const formula = random.pick([
      `${a} (XX + YY) + ${random.integer(-2, 2)} Z + ${random.integer(0, 1)} (XY - YX)`,
      `${a} (XX + YY + ZZ) + ${random.integer(-1, 1)} Z`,
      `${a} XX + ${random.nonZero(3)} YY + ${random.integer(-2, 2)} ZZ`,
      `${a} (XX + YY) + ${random.integer(-2, 2)} (XY + YX) + ${random.integer(-1, 1)} X`,
    ]);
    const h = parseModel(formula.replaceAll('+ -', '- '));
    const range = random.integer(3, 7);
    const exhaustive = searchNow(h, { range, method: 'exhaustive' });
    let followed: SearchResult;
    try {
      followed = searchNow(h, { range, method: 'growth' });
    } catch (error) {
      expect(error).toBeInstanceOf(LimitError);
      return;
    }
    expect(bytes(followed)).toBe(bytes(exhaustive));
  });

  test.each([
    ['Ising, rank one', 'ZZ + 2 X + 3 Z', 1],
    ['range three', 'XX + YY + ZZ + 1/2 XIX', 1],
    ['one cell', 'X + 2 Z', 1],
    ['a ladder with one leg coupled', 'XIXI + YIYI + 2 ZZ', 2],
  ])('does not apply and says so: %s', (_, formula, cell) => {
    const h = parseModel(formula, { cell });
    expect(() => searchNow(h, { range: 3, method: 'growth' })).toThrow(
      /needs an injective nearest-neighbour/,
    );
    expect(searchNow(h, { range: 3 }).method).toBe('exhaustive');
  });

  test('reaches ranges that no list of candidates does', () => {
    const hubbard = parseModel('XIXI + YIYI + IXIX + IYIY + 3 ZZ', { cell: 2 });
    const result = searchNow(hubbard, { range: 8 });
    // One charge a range beside the spins:
    // Phys. Rev. Lett. 56, 2453 (1986); complete: arXiv:2309.09354 (2023).
    expect(result.dimensionByRange).toEqual([2, 3, 4, 5, 6, 7, 8, 9]);
    for (const q of result.charges)
      expect(hubbard.chain.bracket(hubbard.density, q.density).isZero()).toBe(true);
    expect(searchNow(parseModel('XX + YY + 2 X + 3 Y'), { range: 18 }).charges.length).toBe(1);
  });
});

describe('limits, progress, cancel', () => {
  test('the number of candidates', () => {
    expect(candidateCount(1, 14)).toBe(3 * 4 ** 13);
    expect(candidateCount(2, 6)).toBe(4 ** 12 - 4 ** 10);
  });

  test.each([0, -1, 1.5, Number.NaN, Number.POSITIVE_INFINITY])('no range %s', (range) => {
    expect(() => searchNow(parseModel('XX'), { range })).toThrow(InputError);
    expect(() => estimate(parseModel('XX'), range)).toThrow(InputError);
  });

  test('a range beyond the packed form is refused before anything is allocated', () => {
    expect(() => searchNow(parseModel('XX'), { range: 17, method: 'exhaustive' })).toThrow(LimitError);
    expect(() => searchNow(parseModel('XX', { cell: 3 }), { range: 6 })).toThrow(/injective/);
  });

  test('more memory than allowed is refused with the numbers and the way out', async () => {
    await expect(search(parseModel('XX + YY'), { range: 12, memory: 50e6 })).rejects.toThrow(
      /12,582,912 candidates.*larger memory limit/s,
    );
  });

  test('progress comes in order and can stop the search', () => {
    const layers: number[] = [];
    searchNow(parseModel('XX + YY + X'), {
      range: 7,
      onProgress: ({ stage, layer, done }) => {
        expect(done).toBeGreaterThanOrEqual(0);
        expect(done).toBeLessThanOrEqual(1);
        if (stage === 'sweep') layers.push(layer);
      },
    });
    expect(layers[0]).toBe(8);
    expect([...layers].sort((a, b) => b - a)).toEqual(layers);
    expect(() =>
      searchNow(parseModel('XX'), {
        range: 8,
        onProgress() {
          throw new CancelledError('test');
        },
      }),
    ).toThrow(CancelledError);
  });

  test('a worker gives the same answer, leaves the event loop free, and stops when told', async () => {
    const h = parseModel('2 XX + 3 YY + 5 ZZ');
    expect(bytes(await search(h, { range: 6 }))).toBe(bytes(searchNow(h, { range: 6 })));

    let ticks = 0;
    const timer = setInterval(() => ticks++, 5);
    const cancel = new AbortController();
    const running = search(parseModel('ZZ + 2 X + 3 Z'), {
      range: 12,
      signal: cancel.signal,
      onProgress: () => cancel.abort(),
    });
    await expect(running).rejects.toThrow(CancelledError);
    clearInterval(timer);
    expect(ticks).toBeGreaterThan(5);
    await expect(search(h, { range: 3, signal: AbortSignal.abort() })).rejects.toThrow(CancelledError);
  });

  test('an interaction longer than the range is searched all the same', () => {
    const result = searchNow(parseModel('ZIIZ + X'), { range: 2 });
    expect(result.expansionOfH).toBe(null);
    expect(result.dimensionByRange).toEqual(textbookDimensions(parseModel('ZIIZ + X'), 2));
  });
});

test('a charge reads as its words', () => {
  const [energy, current] = searchNow(parseModel('XX + YY + ZZ'), { range: 3 }).charges.slice(3);
  expect(energy!.density.toString()).toBe('XX + YY + ZZ');
  expect([...current!.density.numerators.keys()].map((w) => textFromWord(w)).sort()).toEqual([
    'XYZ',
    'XZY',
    'YXZ',
    'YZX',
    'ZXY',
    'ZYX',
  ]);
});
