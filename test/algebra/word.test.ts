import { describe, expect, test } from 'vitest';
import {
  bitCount,
  commute,
  compareWords,
  firstSpin,
  LETTERS,
  letterAt,
  letterCounts,
  phaseExponent,
  product,
  reverse,
  shift,
  spanOf,
  textFromWord,
  type Word,
  weightOf,
  wordFromText,
} from '../../src/algebra/word.ts';
import { InputError } from '../../src/errors.ts';
import { matrixOfWord, scaled, times } from '../support/matrices.ts';
import { property, type Random } from '../support/random.ts';

/** Lengths on both sides of every chunk of 15 letters and of 2⁵³, where the code changes its way. */
const LENGTHS = [0, 1, 2, 14, 15, 16, 25, 26, 27, 28, 29, 30, 31, 45, 46, 100];
const anyWord = (random: Random): Word => random.word(random.pick(LENGTHS));
const I_POWERS: readonly (readonly [bigint, bigint])[] = [
  [1n, 0n],
  [0n, 1n],
  [-1n, 0n],
  [0n, -1n],
];

describe('Pauli strings against explicit matrices', () => {
  test('all pairs of strings on two spins', () => {
    for (let a = 0n; a < 16n; a++)
      for (let b = 0n; b < 16n; b++) {
        const { word, phase } = product(a, b);
        expect(times(matrixOfWord(a, 2), matrixOfWord(b, 2))).toEqual(
          scaled(matrixOfWord(word, 2), ...I_POWERS[phase]!),
        );
      }
  });

  property('products on up to four spins', 150, (random) => {
    const spins = random.integer(1, 4);
    const [a, b] = [random.word(spins), random.word(spins)];
    const { word, phase } = product(a, b);
    expect(times(matrixOfWord(a, spins), matrixOfWord(b, spins))).toEqual(
      scaled(matrixOfWord(word, spins), ...I_POWERS[phase]!),
    );
  });
});

describe('the group of Pauli strings with phases', () => {
  property('associativity with phases', 400, (random) => {
    const [a, b, c] = [anyWord(random), anyWord(random), anyWord(random)];
    const ab = product(a, b);
    const left = product(ab.word, c);
    const bc = product(b, c);
    const right = product(a, bc.word);
    expect(left.word).toBe(right.word);
    expect((ab.phase + left.phase) % 4).toBe((bc.phase + right.phase) % 4);
  });

  property('identity, squares and inverses', 200, (random) => {
    const a = anyWord(random);
    expect(product(0n, a)).toEqual({ word: a, phase: 0 });
    expect(product(a, 0n)).toEqual({ word: a, phase: 0 });
    expect(product(a, a)).toEqual({ word: 0n, phase: 0 });
  });

  property('a b = ± b a, and commute says which', 400, (random) => {
    const [a, b] = [anyWord(random), anyWord(random)];
    const ab = product(a, b);
    const ba = product(b, a);
    expect(ab.word).toBe(ba.word);
    expect((ab.phase + (commute(a, b) ? 0 : 2)) % 4).toBe(ba.phase);
    let different = 0;
    for (let spin = 0; spin < 100; spin++) {
      const [x, y] = [letterAt(a, spin), letterAt(b, spin)];
      if (x !== 0 && y !== 0 && x !== y) different++;
    }
    expect(commute(a, b)).toBe(different % 2 === 0);
  });

  property('the small kernel agrees with the general one', 300, (random) => {
    const [a, b] = [random.word(15), random.word(random.integer(0, 15))];
    expect(phaseExponent(Number(a), Number(b))).toBe(product(a, b).phase);
  });

  property('a product of strings is the product spin by spin', 200, (random) => {
    const length = random.pick(LENGTHS);
    const [a, b] = [random.word(length), random.word(length)];
    let phase = 0;
    for (let spin = 0; spin < length; spin++)
      phase += product(BigInt(letterAt(a, spin)), BigInt(letterAt(b, spin))).phase;
    expect(product(a, b).phase).toBe(phase % 4);
  });

  test('XY = iZ and its cyclic images', () => {
    const [x, y, z] = ['X', 'Y', 'Z'].map(wordFromText) as [Word, Word, Word];
    for (const [a, b, c] of [
      [x, y, z],
      [y, z, x],
      [z, x, y],
    ] as const) {
      expect(product(a, b)).toEqual({ word: c, phase: 1 });
      expect(product(b, a)).toEqual({ word: c, phase: 3 });
    }
  });
});

describe('text and geometry', () => {
  property('parse and print are inverse', 300, (random) => {
    const text = random.wordText(random.integer(1, 100));
    const word = wordFromText(text);
    expect(textFromWord(word, text.length)).toBe(text);
    expect(wordFromText(textFromWord(word))).toBe(word);
    expect(textFromWord(word)).toBe(text.replace(/I+$/, '') || 'I');
  });

  property('span, first spin, weight and letter counts are those of the text', 400, (random) => {
    const text = 'I'.repeat(random.integer(0, 40)) + random.wordText(random.integer(0, 60)) || 'I';
    const word = wordFromText(text);
    const trimmed = text.replace(/I+$/, '');
    const count = (letter: string) => text.split(letter).length - 1;
    expect(spanOf(word)).toBe(trimmed.length);
    expect(firstSpin(word)).toBe(text.search(/[XYZ]/));
    expect(letterCounts(word)).toEqual(['X', 'Y', 'Z'].map(count));
    expect(weightOf(word)).toBe(count('X') + count('Y') + count('Z'));
    for (let spin = 0; spin < text.length; spin++) expect(LETTERS[letterAt(word, spin)]).toBe(text[spin]);
  });

  test('every span around the change from doubles to text', () => {
    for (let spin = 0; spin < 80; spin++)
      for (const letter of [1n, 2n, 3n])
        for (const below of [0n, 1n, (1n << BigInt(2 * spin)) - 1n]) {
          const word = (letter << BigInt(2 * spin)) | (spin === 0 ? 0n : below);
          expect(spanOf(word)).toBe(spin + 1);
        }
  });

  property('reversal is an involution and reverses products', 200, (random) => {
    const length = random.integer(1, 50);
    const [a, b] = [random.word(length), random.word(length)];
    expect(textFromWord(reverse(a, length), length)).toBe([...textFromWord(a, length)].reverse().join(''));
    expect(reverse(reverse(a, length), length)).toBe(a);
    expect(product(reverse(a, length), reverse(b, length)).phase).toBe(product(a, b).phase);
  });

  property('shifts compose and keep phases', 200, (random) => {
    const [a, b] = [anyWord(random), anyWord(random)];
    const by = random.integer(0, 40);
    expect(shift(shift(a, by), -by)).toBe(a);
    expect(product(shift(a, by), shift(b, by))).toEqual({
      word: shift(a ^ b, by),
      phase: product(a, b).phase,
    });
  });

  property('the order of words is the order of their letters', 300, (random) => {
    const [a, b] = random.chance(0.5) ? [random.word(40), random.word(40)] : [random.word(3), random.word(3)];
    const [s, t] = [textFromWord(a, 60), textFromWord(b, 60)];
    expect(Math.sign(compareWords(a, b))).toBe(s < t ? -1 : s > t ? 1 : 0);
  });

  property('bit counts', 200, (random) => {
    const value = random.bits();
    expect(bitCount(value)).toBe(value.toString(2).replaceAll('0', '').length);
    expect(bitCount(value | 0)).toBe(bitCount(value));
  });

  test.each([
    ['', 'an empty text'],
    ['XxZ', '"x"'],
    ['X Y', '" "'],
    ['XΧ', '"Χ"'],
    ['X0', '"0"'],
  ])('refuses %j', (text, got) => {
    expect(() => wordFromText(text)).toThrow(InputError);
    expect(() => wordFromText(text)).toThrow(got);
  });
});
