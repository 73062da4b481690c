/**
 * Pauli strings as packed integers: two bits a spin, spin 0 lowest, I = 0, X = 1, Z = 2, Y = 3.
 *
 * The low bit of a letter is its X part, the high bit its Z part, and Y = iXZ, so a product is an XOR and its phase a
 * count of bits. A `bigint` holds strings of any length; the kernels of `search/` use the same code in 32-bit integers.
 */
import { InputError, show } from '../errors.ts';

/** A Pauli string, identity = 0n. */
export type Word = bigint;

/** Letters by code. */
export const LETTERS = 'IXZY';

/** i^e for the exponent `e` of a product's phase. */
export type Phase = 0 | 1 | 2 | 3;

/** Bits handled at a time where a string is taken apart: 15 letters fit a small integer. */
const CHUNK_BITS = 30n;
const CHUNK_MASK = (1n << CHUNK_BITS) - 1n;
const X_PARTS = 0x15555555;

/**
 * Reads a word such as `XZIY`, first letter on spin 0.
 *
 * @throws InputError when the text is empty or holds another letter
 */
export function wordFromText(text: string): Word {
  if (text === '') throw new InputError('word', 'letters I, X, Y, Z', show(text));
  const code = (spin: number): number => {
    const found = LETTERS.indexOf(text[spin]!);
    if (found < 0)
      throw new InputError('word', 'letters I, X, Y, Z', show(text[spin]), { text, offset: spin });
    return found;
  };
  // Two letters a hexadecimal digit: linear in the length, where shifts of a growing integer are quadratic.
  let digits = '0x';
  if (text.length % 2 === 1) digits += code(text.length - 1);
  for (let spin = text.length - 1 - (text.length % 2); spin > 0; spin -= 2)
    digits += (4 * code(spin) + code(spin - 1)).toString(16);
  return BigInt(digits);
}

/** Prints a string from spin 0 on, at least `length` letters; `wordFromText` reads it back. The identity prints as `I`. */
export function textFromWord(word: Word, length = 1): string {
  let text = '';
  if (word !== 0n) {
    const digits = word.toString(4);
    for (let spin = digits.length - 1; spin >= 0; spin--) text += LETTERS[Number(digits[spin])];
  }
  return text.padEnd(length, 'I');
}

/** The letter code on a spin. */
export function letterAt(word: Word, spin: number): number {
  return Number((word >> BigInt(2 * spin)) & 3n);
}

/** One past the last spin that is not the identity; 0 for the identity. */
export function spanOf(word: Word): number {
  if (word === 0n) return 0;
  // 2⁵³ keeps the usual string out of the slow conversion to text.
  if (word < 9007199254740992n) {
    const value = Number(word);
    const high = Math.floor(value / 2 ** 30);
    return high > 0 ? 15 + ((33 - Math.clz32(high)) >> 1) : (33 - Math.clz32(value)) >> 1;
  }
  return word.toString(4).length;
}

/** The first spin that is not the identity; the identity has none and gives −1. */
export function firstSpin(word: Word): number {
  if (word === 0n) return -1;
  let spin = 0;
  let rest = word;
  while ((rest & CHUNK_MASK) === 0n) {
    rest >>= CHUNK_BITS;
    spin += 15;
  }
  const chunk = Number(rest & CHUNK_MASK);
  return spin + ((31 - Math.clz32(chunk & -chunk)) >> 1);
}

/** Number of spins on which the string acts. */
export function weightOf(word: Word): number {
  let weight = 0;
  for (let rest = word; rest !== 0n; rest >>= CHUNK_BITS) {
    const chunk = Number(rest & CHUNK_MASK);
    weight += bitCount((chunk | (chunk >>> 1)) & X_PARTS);
  }
  return weight;
}

/** Numbers of letters X, Y and Z, in this order. */
export function letterCounts(word: Word): [x: number, y: number, z: number] {
  const counts: [number, number, number] = [0, 0, 0];
  for (let rest = word; rest !== 0n; rest >>= CHUNK_BITS) {
    const chunk = Number(rest & CHUNK_MASK);
    const x = chunk & X_PARTS;
    const z = (chunk >>> 1) & X_PARTS;
    counts[0] += bitCount(x & ~z);
    counts[1] += bitCount(x & z);
    counts[2] += bitCount(z & ~x);
  }
  return counts;
}

/** The string moved by a number of spins, to the right when positive. Letters that would leave at spin 0 are an error of the caller. */
export function shift(word: Word, spins: number): Word {
  return spins >= 0 ? word << BigInt(2 * spins) : word >> BigInt(-2 * spins);
}

/** The string read backwards on spins 0 … length − 1. */
export function reverse(word: Word, length: number): Word {
  let reversed = 0n;
  for (let rest = word, spin = 0; spin < length; spin++, rest >>= 2n)
    reversed = (reversed << 2n) | (rest & 3n);
  return reversed;
}

/**
 * The product of two strings, `a b = i^phase · (a XOR b)`.
 *
 * A string is `i^y X^x Z^z` with y its number of Ys; moving Z past X costs a sign for every spin where both occur.
 */
export function product(a: Word, b: Word): { word: Word; phase: Phase } {
  let exponent = 0;
  for (let p = a, q = b; p !== 0n && q !== 0n; p >>= CHUNK_BITS, q >>= CHUNK_BITS)
    exponent += phaseExponent(Number(p & CHUNK_MASK), Number(q & CHUNK_MASK));
  return { word: a ^ b, phase: (exponent & 3) as Phase };
}

/** The exponent of i, modulo 4, of the product of two strings of at most 15 spins, as plain integers. */
export function phaseExponent(a: number, b: number): number {
  const c = a ^ b;
  const y = (word: number) => bitCount(word & (word >>> 1) & X_PARTS);
  return (y(a) + y(b) - y(c) + 2 * bitCount((a >>> 1) & b & X_PARTS)) & 3;
}

/** Do the two strings commute? They do when the number of spins with different letters, both not I, is even. */
export function commute(a: Word, b: Word): boolean {
  return (product(a, b).phase & 1) === 0;
}

/** Number of ones in a 32-bit integer. */
export function bitCount(value: number): number {
  let v = value - ((value >>> 1) & 0x55555555);
  v = (v & 0x33333333) + ((v >>> 2) & 0x33333333);
  return (((v + (v >>> 4)) & 0x0f0f0f0f) * 0x01010101) >>> 24;
}

/** Alphabetical order of the printed words, I < X < Y < Z, shorter words first as if filled up with I. */
export function compareWords(a: Word, b: Word): number {
  const difference = a ^ b;
  if (difference === 0n) return 0;
  const spin = firstSpin(difference);
  return ALPHABETICAL[letterAt(a, spin)]! - ALPHABETICAL[letterAt(b, spin)]!;
}

const ALPHABETICAL = [0, 1, 3, 2];
