import { describe, expect, it } from 'vitest';
import { Operator } from '../../../src/algebra/operator.ts';
import { product, type Word } from '../../../src/algebra/word.ts';
import { Chain } from '../../../src/lattice/chain.ts';
import type { Extent } from '../../../src/lattice/lattice.ts';
import { parseModel } from '../../../src/model/formula.ts';
import { chainModel } from '../../../src/model/lattice-model.ts';
import { bondModel, LATTICES } from '../../../src/model/lattices.ts';
import { realForms } from '../../../src/search/lattice/real-form.ts';
import { type LatticeOptions, searchLatticeNow, waveNumber } from '../../../src/search/lattice/search.ts';
import { searchNow } from '../../../src/search/search.ts';
import { echelonForm } from '../../support/dense.ts';
import { matrixOfOperator, matrixOfWord, plus, times } from '../../support/matrices.ts';
import { property } from '../../support/random.ts';
import { rotate, sumOverRing } from '../../support/rings.ts';

const open = (cells: number): Extent => ({ kind: 'open', cells });
const ring = (cells: number): Extent => ({ kind: 'ring', cells });

function search(formula: string, options: LatticeOptions, extent?: Extent, local?: Operator) {
  return searchLatticeNow(chainModel(parseModel(formula), extent, local), options);
}

const count = (...args: Parameters<typeof search>) => search(...args).charges.length;

describe('the uniform chain', () => {
  property('has the charges that the chain search finds', 8, (random) => {
    const h = random.hamiltonian({ cell: random.integer(1, 2), range: 2, terms: random.integer(2, 5) });
    const range = h.chain.cell === 1 ? 4 : 2;
    const found = searchLatticeNow(chainModel(h), { window: range });
    const known = searchNow(h, { range });
    expect(found.candidates).toBe(known.candidates);
    const byRange = Array.from(
      { length: range },
      (_, j) => found.charges.filter((q) => q.extent[0]! <= j + 1).length,
    );
    expect(byRange).toEqual([...known.dimensionByRange]);
    for (const { terms } of found.charges) {
      const density = Operator.fromIntegers(terms.map(([word, c]) => [word, c.numerators[0]!] as const));
      expect(h.chain.bracket(h.density, density).isZero()).toBe(true);
    }
  });
});

describe('longer periods and wave numbers', () => {
  // Computed by two independent programs: the staggered exceptions among chains with a single translation-invariant charge.
  it.each([
    ['-XX + YY + 2 ZZ + 3 Z', 1, { Z: 1n }],
    ['XZ + ZX + 2 X', 2, { XX: 1n }],
  ] as const)('%s has a staggered charge', (formula, range, density) => {
    expect(search(formula, { window: 4 }).charges.map((q) => q.extent)).toEqual([[2]]);
    const staggered = search(formula, { window: 4, wave: '1/2' }).charges;
    expect(staggered.map((q) => q.extent)).toEqual([[range]]);
    const terms = Operator.fromIntegers(
      staggered[0]!.terms.map(([word, c]) => [word, c.numerators[0]!] as const),
    );
    expect(terms.equals(Operator.of(density))).toBe(true);
    expect(count(formula, { window: 4, period: 2 })).toBe(2);
    for (const wave of ['1/3', '1/4', '1/5']) expect(count(formula, { window: 4, wave })).toBe(0);
  });

  property('charges of period p are those of all wave numbers m/p together', 10, (random, run) => {
    const model = chainModel(random.hamiltonian({ range: 2, terms: random.integer(1, 3) }));
    const period = 2 + (run % 3);
    let sum = 0;
    for (let m = 0; m < period; m++)
      sum += searchLatticeNow(model, { window: 3, wave: `${m}/${period}` }).charges.length;
    expect(searchLatticeNow(model, { window: 3, period }).charges).toHaveLength(sum);
  });

  it('has every Z_j of a classical chain at any wave number', () => {
    for (const wave of ['0', '1/2', '1/3', '2/5', '5/12'])
      expect(count('ZZ', { window: 2, wave })).toBeGreaterThanOrEqual(2);
  });

  it('counts cells of n·p with period 1 as period p in cells of n', () => {
    const doubled = parseModel('XIX + YIY + 2 ZIZ + XXI', { cell: 1 });
    expect(searchLatticeNow(chainModel(doubled), { window: 3, period: 2 }).charges.length).toBeGreaterThan(0);
  });

  // The first two have coefficients such as 1 + ω; the third is XX rotated by a quarter turn a site, so that uniform charges of
  // the unrotated chain stand at wave number 1/4 or 3/4.
  it.each([
    ['ZXZ', 4, 3, 7],
    ['X + ZX + XZ + ZXZ', 4, 3, 3],
    ['XX + YY + XY - YX', 3, 4, 2],
    ['ZXZ', 3, 6, 3],
  ] as const)('%s: exact charges at wave number 1/n, real over n cells', (formula, window, n, number) => {
    const result = search(formula, { window, wave: `1/${n}` });
    expect(result.charges).toHaveLength(number);
    const { density } = parseModel(formula);
    const wide = new Chain(n);
    let spread = Operator.zero;
    for (let j = 0; j < n; j++) spread = spread.plus(density.mapWords((word) => word << BigInt(2 * j)));
    for (const charge of result.charges) {
      const forms = realForms(result, charge);
      expect(forms).toHaveLength(2);
      for (const { rational, period } of forms) {
        expect(period).toEqual([n]);
        const real = Operator.fromTerms(rational!);
        expect(real.isZero()).toBe(false);
        // Independent of the search: the bracket on the chain with n spins a cell.
        expect(wide.bracket(spread, real).isZero()).toBe(true);
      }
    }
  });

  it('gives cyclotomic coefficients where no rational ones exist', () => {
    const result = search('ZXZ', { window: 4, wave: '1/5' });
    const forms = result.charges.flatMap((charge) => realForms(result, charge));
    expect(forms.some((form) => form.rational === null)).toBe(true);
  });
});

/** Dimension of the commutant of H among strings on a small system, by explicit matrices and dense elimination. */
function denseCount(h: Operator, candidates: readonly Operator[], spins: number): number {
  const matrix = matrixOfOperator(h, spins);
  const rows = candidates.map((q) => {
    const own = matrixOfOperator(q, spins);
    const { re, im } = plus(times(matrix, own), times(own, matrix), -1n);
    return [...re, ...im];
  });
  return candidates.length - echelonForm(rows, 1_000_000_007n).length;
}

function stringsOn(spins: number, fits: (word: Word) => boolean): Word[] {
  const words: Word[] = [];
  for (let w = 1n; w < 4n ** BigInt(spins); w++) if (fits(w)) words.push(w);
  return words;
}

const spanOf = (word: Word): number => {
  const used = [...word.toString(4)].reverse().flatMap((digit, i) => (digit === '0' ? [] : [i]));
  return used.at(-1)! - used[0]! + 1;
};

const cyclicSpan = (word: Word, cells: number): number =>
  Math.min(...Array.from({ length: cells }, (_, j) => spanOf(rotate(word, j, cells))));

const sumOverOpen = (density: Operator, cells: number): Operator =>
  Operator.fromIntegers(
    [...density.numerators].flatMap(([word, v]) => {
      const length = word.toString(4).length;
      return Array.from(
        { length: cells - length + 1 },
        (_, j) => [word << BigInt(2 * j), v] as [Word, bigint],
      );
    }),
    density.denominator,
  );

describe('finite systems', () => {
  it('open mixed-field Ising chains have only H', () => {
    // "Proof of absence of local conserved quantities in the mixed-field Ising chain", arXiv:2307.16703 (2023).
    for (const cells of [5, 7, 9]) {
      const charges = search('ZZ + X + 1/2 Z', { window: 4 }, open(cells)).charges;
      expect(charges.map((q) => q.extent)).toEqual([[2]]);
    }
  });

  it('the open XX chain keeps about half of the charges of the infinite one', () => {
    // In fermions H is a hopping matrix A on a path. Bilinear charges of range ≤ k are the powers of A below k, and, since the
    // path is bipartite (S A S = −A), two pairing terms a skew matrix S A^m, m odd below k: k + 2⌊k/2⌋ in all. Derived here.
    for (const window of [2, 3, 4, 5])
      expect(count('XX + YY', { window }, open(12))).toBe(window + 2 * Math.floor(window / 2));
    // Without ends, translations by two cells included, it is about twice as many.
    for (const window of [4, 5]) expect(count('XX + YY', { window, period: 2 })).toBe(4 * window - 3);
  });

  property('open chains agree with explicit matrices', 6, (random) => {
    const cells = 4;
    const h = random.hamiltonian({ range: 2, terms: random.integer(1, 4) });
    const window = random.integer(h.range, 3);
    const local = random.chance(0.5) ? random.operator(cells, 2).filter((w) => w !== 0n) : Operator.zero;
    const total = sumOverOpen(h.density, cells).plus(local);
    if (total.isZero() || [...local.numerators.keys()].some((w) => spanOf(w) > window)) return;
    const words = stringsOn(cells, (w) => spanOf(w) <= window);
    const found = searchLatticeNow(chainModel(h, open(cells), local), { window });
    expect(found.candidates).toBe(words.length);
    const candidates = words.map((w) => Operator.fromIntegers([[w, 1n]]));
    expect(found.charges).toHaveLength(denseCount(total, candidates, cells));
  });

  property('rings below the safe length agree with explicit matrices', 6, (random) => {
    const cells = 4;
    const h = random.hamiltonian({ range: 2, terms: random.integer(1, 4) });
    const window = random.integer(h.range, 4);
    const total = sumOverRing(h.density, 1, cells);
    if (total.isZero()) return;
    const model = chainModel(h, ring(cells));
    const words = stringsOn(cells, (w) => cyclicSpan(w, cells) <= window);
    const free = searchLatticeNow(model, { window, period: 0 });
    expect(free.candidates).toBe(words.length);
    expect(free.charges).toHaveLength(
      denseCount(
        total,
        words.map((w) => Operator.fromIntegers([[w, 1n]])),
        cells,
      ),
    );
    const orbits = new Set(
      words.map(
        (w) =>
          Array.from({ length: cells }, (_, j) => rotate(w, j, cells))
            .sort((a, b) => Number(a - b))
            .at(0)!,
      ),
    );
    const uniform = searchLatticeNow(model, { window });
    expect(uniform.candidates).toBe(orbits.size);
    const sums = [...orbits].map((w) => sumOverRing(Operator.fromIntegers([[w, 1n]]), 1, cells));
    expect(uniform.charges).toHaveLength(denseCount(total, sums, cells));
    let all = 0;
    for (let m = 0; m < cells; m++)
      all += searchLatticeNow(model, { window, wave: `${m}/${cells}` }).charges.length;
    expect(all).toBe(free.charges.length);
  });

  it('a string commutes with itself: a single site', () => {
    const model = chainModel(parseModel('Z'), open(1));
    expect(searchLatticeNow(model, { window: 1 }).charges).toHaveLength(1);
    expect(matrixOfWord(2n, 1).re).toEqual([1n, 0n, 0n, -1n]);
    expect(product(2n, 2n).phase).toBe(0);
  });

  it('a defect removes the charges of the XXZ chain but magnetisation and H', () => {
    const charges = search('XX + YY + 2 ZZ', { window: 3 }, open(8), Operator.of({ IIIZ: '1/2' })).charges;
    expect(charges.map((q) => q.extent)).toEqual([[2], [1]]);
  });
});

describe('planes and space', () => {
  const xyz = Operator.of({ XX: 1, YY: 2, ZZ: 3 });
  const xy = Operator.of({ XX: 1, YY: 2 });
  const isotropic = Operator.of({ XX: 1, YY: 1, ZZ: 1 });

  // arXiv:2412.18504 (2024): no charge besides H for XY and XYZ interactions on hypercubic lattices.
  it.each([
    ['XYZ', xyz],
    ['XY', xy],
  ] as const)('%s on the square lattice has only H', (_, bonds) => {
    for (const window of [
      [2, 2],
      [3, 2],
    ]) {
      const { charges } = searchLatticeNow(bondModel(LATTICES.square, { bonds }), { window });
      expect(charges.map((q) => q.extent)).toEqual([[2, 1]]);
    }
  });

  it('decoupled chains keep the charges of the chain, coupled ones lose them', () => {
    const of = (coupling: number, window: number[]) =>
      searchLatticeNow(bondModel(LATTICES.square, { bonds: { x: xyz, y: xyz.times(coupling) } }), {
        window,
      }).charges.filter((q) => q.extent[1] === 1);
    // Without the bonds the window of one chain: [0, 1, 1, 1].
    expect(of(0, [4, 1])).toHaveLength(3);
    expect(of(1, [4, 2]).map((q) => q.extent)).toEqual([[2, 1]]);
  }, 30_000);

  it('weakly coupled chains in space: only H and magnetisation', () => {
    const model = (coupling: string) =>
      bondModel(LATTICES.cubic, {
        bonds: { x: isotropic, y: isotropic.times(coupling), z: isotropic.times(coupling) },
        field: Operator.of({ Z: 1 }),
      });
    // The field leaves H and Z; a chain by itself also has a charge of range 3.
    const alone = searchLatticeNow(model('0'), { window: [3, 1, 1] }).charges;
    expect(alone.map((q) => q.extent[0])).toEqual([3, 2, 1]);
    const coupled = searchLatticeNow(model('1/5'), { window: [2, 2, 2] }).charges;
    expect(coupled).toHaveLength(2);
  }, 30_000);

  it('finds the hexagon of the compass model on the honeycomb', () => {
    // "Anyons in an exactly solved model and beyond", Ann. Phys. 321, 2 (2006), from memory: a product of six letters a hexagon.
    const bonds = { x: Operator.of({ XX: 1 }), y: Operator.of({ YY: 1 }), z: Operator.of({ ZZ: 1 }) };
    const { charges } = searchLatticeNow(bondModel(LATTICES.honeycomb, { bonds }), { window: [2, 2] });
    const hexagon = charges.filter((q) => q.terms.length === 1);
    expect(hexagon).toHaveLength(1);
    expect(hexagon[0]!.terms[0]![0].toString(4).replaceAll('0', '')).toHaveLength(6);
  }, 30_000);
});

describe('bad input', () => {
  it.each([
    [
      'a window smaller than the interaction',
      () => search('XX + XIX', { window: 2 }),
      /at least the 3 cells/,
    ],
    ['a ring shorter than the interaction', () => search('XIX', { window: 2 }, ring(2)), /at least 3 cells/],
    ['an open chain shorter than the interaction', () => search('XIX', { window: 2 }, open(2)), /at least 3/],
    ['an irrational wave number', () => search('XX', { window: 2, wave: 'sqrt2' }), /rational/],
    ['a decimal wave number', () => search('XX', { window: 2, wave: '0.5' }), /rational/],
    [
      'a wave number that does not fit a ring',
      () => search('XX', { window: 2, wave: '1/3' }, ring(4)),
      /fits the ring/,
    ],
    [
      'a wave number on an open chain',
      () => search('XX', { window: 2, wave: '1/2' }, open(4)),
      /without translations/,
    ],
    ['a period of zero', () => search('XX', { window: 2, period: 0 }), /period/],
    [
      'a local term beyond the end',
      () => search('XX', { window: 2 }, open(4), Operator.of({ IIIIZ: 1 })),
      /cells 0 to 3/,
    ],
    [
      'a local term on an infinite chain',
      () => search('XX', { window: 2 }, undefined, Operator.of({ Z: 1 })),
      /finite/,
    ],
    ['too large a window', () => search('XX', { window: 14 }), /candidates/],
    ['a window of the wrong dimension', () => search('XX', { window: [2, 2] }), /window/],
    [
      'a bond class that is not there',
      () => bondModel(LATTICES.square, { bonds: { w: Operator.of({ XX: 1 }) } }),
      /class of bonds/,
    ],
  ])('refuses %s', (_, act, message) => {
    expect(act).toThrow(message);
  });

  it('reads wave numbers in lowest terms', () => {
    expect(waveNumber('2/4')).toEqual({ numerator: 1, denominator: 2 });
    expect(waveNumber('-1/3')).toEqual({ numerator: 2, denominator: 3 });
    expect(waveNumber('3/3')).toEqual({ numerator: 0, denominator: 1 });
  });
});
