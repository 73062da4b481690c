/**
 * The terms of a density in the order in which papers print them: strings of one pattern and one size of coefficient stand
 * together behind a common factor, and within such a group the images of one string under the symmetries of H follow each other.
 */
import type { Operator } from '../algebra/operator.ts';
import { gcd, type Rational } from '../algebra/rational.ts';
import {
  compareWords,
  LETTERS,
  letterAt,
  spanOf,
  textFromWord,
  type Word,
  wordFromText,
} from '../algebra/word.ts';
import type { Chain, Reflection } from '../lattice/chain.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';

/** A permutation of the letters X, Y, Z on all spins, with or without the reflection. Signs are left aside: they do not move strings. */
export interface Symmetry {
  /** Image of each letter, for `XYZ` in this order; `XYZ` is the identity. */
  readonly letters: string;
  readonly reflected: boolean;
}

export interface TermGroup {
  /** The letters blotted out: `*` a letter, `.` the identity. Of a pattern and its mirror image the one that sorts first. */
  readonly pattern: string;
  /** Of the words, in cells. */
  readonly range: number;
  /** The coefficient of the first word; all others have it or its negative. */
  readonly factor: bigint;
  /** Signs are relative to `factor`, so the first is 1. */
  readonly terms: readonly { readonly sign: 1 | -1; readonly word: Word }[];
  /** Number of orbits under the symmetries of H from which the words come. */
  readonly orbits: number;
}

export interface GroupedDensity {
  /** Multiplies all groups: the greatest common divisor of the numerators over the common denominator, positive. */
  readonly common: Rational;
  readonly groups: readonly TermGroup[];
}

/** Longest first, fewest holes first, then the alphabet. Cost: terms × symmetries (12 at most). */
export function groupTerms(h: Hamiltonian, density: Operator): GroupedDensity {
  const { chain, reflection } = h;
  let divisor = 0n;
  for (const value of density.numerators.values()) divisor = gcd(divisor, value);
  if (divisor === 0n) return { common: { numerator: 0n, denominator: 1n }, groups: [] };
  const symmetries = symmetriesOf(h);
  const groups = new Map<string, { word: Word; value: bigint; orbit: Word }[]>();
  for (const [word, numerator] of density.numerators) {
    const value = numerator / divisor;
    const key = `${patternOf(chain, reflection, word)} ${value < 0n ? -value : value}`;
    const orbit = symmetries
      .map((s) => imageOf(chain, reflection, word, s))
      .reduce((a, b) => (compareWords(a, b) <= 0 ? a : b));
    const group = groups.get(key);
    if (group === undefined) groups.set(key, [{ word, value, orbit }]);
    else group.push({ word, value, orbit });
  }
  const sorted = [...groups].map(([key, members]): TermGroup => {
    members.sort((a, b) => compareWords(a.orbit, b.orbit) || compareWords(a.word, b.word));
    const pairs =
      reflection === null ? members : besideTheirImages(members, (w) => chain.reflect(w, reflection));
    const factor = pairs[0]!.value;
    return {
      pattern: key.slice(0, key.indexOf(' ')),
      range: chain.range(pairs[0]!.word),
      factor,
      terms: pairs.map(({ word, value }) => ({ sign: value === factor ? 1 : -1, word })),
      orbits: new Set(pairs.map((t) => t.orbit)).size,
    };
  });
  sorted.sort(
    (a, b) =>
      b.range - a.range ||
      holes(a.pattern) - holes(b.pattern) ||
      (a.pattern === b.pattern ? 0 : a.pattern < b.pattern ? -1 : 1) ||
      compareWords(a.terms[0]!.word, b.terms[0]!.word),
  );
  return { common: { numerator: divisor, denominator: density.denominator }, groups: sorted };
}

/** The printed word, filled up with `I` to whole cells. */
export function wordText(chain: Chain, word: Word): string {
  return textFromWord(word, chain.range(word) * chain.cell);
}

/** The permutations of letters, reflected or not, under which H is unchanged for some choice of signs of a rotation. */
export function symmetriesOf({ chain, density, reflection }: Hamiltonian): Symmetry[] {
  const found: Symmetry[] = [];
  for (const letters of ['XYZ', 'YZX', 'ZXY', 'XZY', 'ZYX', 'YXZ'])
    for (const reflected of reflection === null ? [false] : [false, true]) {
      const symmetry = { letters, reflected };
      // A rotation by quarter turns: an odd permutation comes with an odd number of minus signs.
      const odd = letters !== 'XYZ' && [...letters].some((letter, i) => letter === 'XYZ'[i]);
      const kept = [0, 1, 2, 3].some((choice) => {
        const minus = odd ? [7, 1, 2, 4][choice]! : [0, 3, 5, 6][choice]!;
        const image = density.mapIntegers((word, value) => [
          imageOf(chain, reflection, word, symmetry),
          negated(word, minus) ? -value : value,
        ]);
        return image.equals(density);
      });
      if (kept) found.push(symmetry);
    }
  return found;
}

/** Is the sign of a word turned by the letters in the set `minus` (bit 0 X, bit 1 Y, bit 2 Z)? */
function negated(word: Word, minus: number): boolean {
  let odd = 0;
  for (let spin = 0, span = spanOf(word); spin < span; spin++) {
    const letter = 'XYZ'.indexOf(LETTERS[letterAt(word, spin)]!);
    if (letter >= 0) odd ^= (minus >> letter) & 1;
  }
  return odd === 1;
}

function imageOf(
  chain: Chain,
  reflection: Reflection | null,
  word: Word,
  { letters, reflected }: Symmetry,
): Word {
  let image = word;
  if (letters !== 'XYZ')
    image = wordFromText(textFromWord(word).replace(/[XYZ]/g, (letter) => letters['XYZ'.indexOf(letter)]!));
  return reflected && reflection !== null ? chain.reflect(image, reflection) : image;
}

function patternOf(chain: Chain, reflection: Reflection | null, word: Word): string {
  const blot = (w: Word) => wordText(chain, w).replace(/[XYZ]/g, '*').replaceAll('I', '.');
  const own = blot(word);
  if (reflection === null) return own;
  const mirrored = blot(chain.reflect(word, reflection));
  return [own, mirrored].sort()[0]!;
}

function holes(pattern: string): number {
  return pattern.split('.').length;
}

function besideTheirImages<T extends { readonly word: Word }>(
  members: readonly T[],
  mirror: (word: Word) => Word,
): T[] {
  const waiting = new Map(members.map((m) => [m.word, m]));
  return members.flatMap((member) => {
    if (!waiting.delete(member.word)) return [];
    const image = waiting.get(mirror(member.word));
    if (image === undefined) return [member];
    waiting.delete(image.word);
    return [member, image];
  });
}
