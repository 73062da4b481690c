import { describe, expect, test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { firstSpin, product, spanOf, textFromWord, type Word, wordFromText } from '../../src/algebra/word.ts';
import { InputError } from '../../src/errors.ts';
import { Chain, MAX_CELL, type Reflection } from '../../src/lattice/chain.ts';
import { property, type Random } from '../support/random.ts';
import { sumOverRing } from '../support/rings.ts';

const CELLS = [1, 2, 3, 12];
const anyWord = (random: Random, chain: Chain): Word => random.word(random.integer(1, 6) * chain.cell);
const reflections: readonly Reflection[] = ['cells', 'spins'];

describe.each(CELLS)('cells of %d', (cell) => {
  const chain = new Chain(cell);

  property(`translations (${cell})`, 100, (random) => {
    const word = anyWord(random, chain);
    const by = random.integer(0, 5);
    const moved = chain.translate(word, by);
    expect(chain.range(moved)).toBe(chain.range(word));
    expect(chain.representative(moved)).toBe(chain.representative(word));
    expect(chain.translate(chain.translate(word, by), 2)).toBe(chain.translate(word, by + 2));
    const other = anyWord(random, chain);
    expect(product(moved, chain.translate(other, by)).phase).toBe(product(word, other).phase);
  });

  property(`representatives begin in cell 0 and keep their place in the cell (${cell})`, 100, (random) => {
    const word = anyWord(random, chain);
    const representative = chain.representative(word);
    if (word === 0n) return expect(representative).toBe(0n);
    expect(firstSpin(representative)).toBe(firstSpin(word) % cell);
    expect(chain.range(word)).toBe(Math.ceil(spanOf(representative) / cell));
    expect(chain.representative(representative)).toBe(representative);
  });

  property(
    `reflections are involutions that keep range and commute with brackets (${cell})`,
    40,
    (random) => {
      for (const reflection of reflections) {
        const word = anyWord(random, chain);
        const image = chain.reflect(word, reflection);
        expect(chain.range(image)).toBe(chain.range(word));
        expect(chain.reflect(image, reflection)).toBe(chain.representative(word));
        expect(chain.reflect(chain.translate(word, 3), reflection)).toBe(image);
        const [h, q] = [random.operator(2 * cell, 3), random.operator(3 * cell, 3)];
        const mirror = (o: Operator) => o.mapWords((w) => chain.reflect(w, reflection));
        expect(mirror(chain.bracket(h, q)).equals(chain.bracket(mirror(h), mirror(q)))).toBe(true);
      }
    },
  );
});

describe('the bracket of sums over translates', () => {
  // On L ≥ 2m − 1 cells representatives of range ≤ m stay different, so the ring decides every coefficient.
  property('is the bracket on an explicit ring', 60, (random) => {
    const chain = new Chain(random.pick([1, 1, 2, 3]));
    const [r, k] = [random.integer(1, 3), random.integer(1, 3)];
    const cells = 2 * (r + k - 1) + random.integer(0, 2);
    const [h, q] = [random.operator(r * chain.cell, 4), random.operator(k * chain.cell, 4)];
    const ring = (o: Operator) => sumOverRing(o, chain.cell, cells);
    const bracket = chain.bracket(h, q);
    expect(ring(bracket).equals(ring(chain.normalise(h)).bracket(ring(chain.normalise(q))))).toBe(true);
    expect(chain.normalise(bracket).equals(bracket)).toBe(true);
    expect(chain.rangeOf(bracket) <= Math.max(0, r + k - 1)).toBe(true);
  });

  property('Jacobi identity, antisymmetry, translation of the arguments', 60, (random) => {
    const chain = new Chain(random.pick([1, 2, 3]));
    const [a, b, c] = Array.from({ length: 3 }, () => random.operator(2 * chain.cell, 3)) as [
      Operator,
      Operator,
      Operator,
    ];
    const { bracket } = { bracket: chain.bracket.bind(chain) };
    expect(bracket(a, b).plus(bracket(b, a)).isZero()).toBe(true);
    expect(bracket(a, a).isZero()).toBe(true);
    const cyclic = bracket(a, bracket(b, c))
      .plus(bracket(b, bracket(c, a)))
      .plus(bracket(c, bracket(a, b)));
    expect(cyclic.isZero()).toBe(true);
    const moved = a.mapWords((word) => chain.translate(word, random.integer(0, 4)));
    expect(bracket(moved, b).equals(bracket(a, b))).toBe(true);
  });

  property('terms wider than a machine word agree with an explicit ring', 12, (random) => {
    const chain = new Chain(random.pick([1, 4]));
    const wide = random.integer(16, 20);
    const h = Operator.fromIntegers([
      [random.word(wide), 2n],
      [random.word(2), -3n],
    ]);
    const q = random.operator(6, 3);
    const cells = Math.ceil((2 * (wide + 8)) / chain.cell) + 2;
    const ring = (o: Operator) => sumOverRing(chain.normalise(o), chain.cell, cells);
    expect(ring(chain.bracket(h, q)).equals(ring(h).bracket(ring(q)))).toBe(true);
  });

  test('identities and zero', () => {
    const chain = new Chain(1);
    const h = Operator.of({ I: 3, XX: 1 });
    expect(chain.bracket(h, Operator.of({ I: 1 })).isZero()).toBe(true);
    expect(chain.bracket(Operator.zero, h).isZero()).toBe(true);
    expect(chain.bracket(h, Operator.zero).isZero()).toBe(true);
    expect(chain.rangeOf(Operator.zero)).toBe(0);
  });

  // i[X_j X_{j+1}, Z_j]/2 = Y_j X_{j+1}: by hand, from [X, Z] = −2iY.
  test('signs, by hand', () => {
    const chain = new Chain(1);
    expect(chain.bracket(Operator.of({ XX: 1 }), Operator.of({ Z: 1 })).toString()).toBe('XY + YX');
    expect(chain.bracket(Operator.of({ X: 1 }), Operator.of({ Y: 1 })).toString()).toBe('-Z');
  });
});

describe('mirror images', () => {
  test.each([
    [1, 'XX + YY', 'spins'],
    [1, 'XY', null],
    [2, 'XIX', 'cells'],
    [2, 'XX + 2 IXX', 'spins'],
    [2, 'XIIX', 'spins'],
    [2, 'XIIY', null],
  ] as const)('cell %d, %s: %s', (cell, text, expected) => {
    const terms = Object.fromEntries(
      text.split(' + ').map((t) => [t.replace('2 ', ''), t.startsWith('2') ? 2 : 1]),
    );
    expect(new Chain(cell).reflectionOf(Operator.of(terms))).toBe(expected);
  });

  test('the two kinds on one string', () => {
    const chain = new Chain(2);
    const word = wordFromText('XYIZ');
    expect(textFromWord(chain.reflect(word, 'cells'), 4)).toBe('IZXY');
    expect(textFromWord(chain.reflect(word, 'spins'), 4)).toBe('ZIYX');
  });
});

test.each([0, -1, 1.5, MAX_CELL + 1, Number.NaN, Number.POSITIVE_INFINITY])(
  'a cell of %d is refused',
  (cell) => {
    expect(() => new Chain(cell)).toThrow(InputError);
  },
);
