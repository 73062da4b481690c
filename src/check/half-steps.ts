/**
 * Certificates of the kind `half-steps`: an upper bound on the charges of range exactly k, for every k ≥ 5, of chains of one spin a cell
 * whose bond is one string J·aa, in a field that is not along a. Growth at an end alternates between bond and field. Numbers such as H2
 * are those of docs/certificate.md, "Kind `half-steps`"; docs/theory.md, section 5, proves the theorem behind them.
 */
import { phase, readTerms, readWord } from './chain.ts';
import { fields, list, Rejected, string, type Value } from './document.ts';
import {
  completeTopParts,
  type Density,
  integers,
  MAX_PARTS,
  readEveryRange,
  readPrime,
  type Steps,
  sum,
} from './every-range.ts';
import { boundByPencil } from './every-range-modular.ts';
import type { Parts } from './exhaustive.ts';
import { residue } from './modular.ts';

export const HALF_STEPS = 'half-steps';

/** First range whose two half-lengths, 2k − 2 and 2k − 1, are both at least 7. */
const FROM = 5;
/** Half-lengths of top parts, and of the densities whose growth is divided out; strings of these have at most 2 and 4 spins. */
const TOP = { length: 3, spins: 2 };
const CORE = { length: 6, spins: 4 };

export function* checkHalfSteps(parts: Parts): Generator<number, string> {
  const { cell, chain, atMost, words } = readEveryRange(parts, FROM);
  const evidence = fields(parts.evidence, ['prime', 'free', 'topParts', 'root', 'witnesses'], 'evidence');
  const p = readPrime(evidence.prime);
  if (cell !== 1) throw new Rejected('half steps are for one spin a cell');
  if (atMost % 2 === 1) throw new Rejected('the bound is twice that of a half-length, and not odd');
  const steps = new HalfSteps(chain.h, chain.w, p);
  const read = (value: Value, { length, spins }: typeof TOP, what: string): Density => {
    const terms = readTerms(value, 1, spins, what);
    if (terms.length === 0 || terms.some((t) => steps.halfLength(t.word) !== length))
      throw new Rejected(`${what} has a string of another half-length than ${length}, or none`);
    return integers(terms);
  };
  const topParts = list(evidence.topParts, 'topParts', MAX_PARTS).map((v) => read(v, TOP, 'a top part'));
  const free = list(evidence.free, 'free', MAX_PARTS).map((v) =>
    readWord(string(v, 'free'), 1, TOP.spins, 'free'),
  );
  if (free.some((s) => steps.halfLength(s) !== TOP.length))
    throw new Rejected('a free string of another half-length');
  yield* completeTopParts(steps, topParts, free, p, TOP.length);
  yield* boundByPencil(steps, CORE.length, topParts, atMost / 2, p, evidence, (x) =>
    read(x, CORE, 'a witness'),
  );
  return words;
}

/** A letter along a is in K, the others are in C; a last letter in K on site b is at 2b, in C at 2b + 1, a first one at 2b or 2b − 1. */
export class HalfSteps implements Steps {
  readonly #axis: number;

  constructor(
    readonly h: Density,
    readonly w: Density,
    p: number,
  ) {
    const [bond] = h;
    if (h.size !== 1 || bond === undefined || bond[0] % 4 !== bond[0] >> 2)
      throw new Rejected('the bond is not one string of two equal letters');
    this.#axis = bond[0] % 4;
    // H2: each half step is injective modulo p.
    if (residue(bond[1], p) === 0) throw new Rejected('the bond vanishes modulo the prime');
    if (![...w].some(([letter, value]) => letter !== this.#axis && residue(value, p) !== 0))
      throw new Rejected('the field is along the bond');
  }

  /** Positions of the two ends. */
  #ends(word: number): readonly [left: number, right: number] {
    let first = 0;
    while ((word >> (2 * first)) % 4 === 0) first++;
    let last = first;
    while (word >> (2 * last + 2) !== 0) last++;
    const inC = (site: number) => ((word >> (2 * site)) % 4 === this.#axis ? 0 : 1);
    return [2 * first - inC(first), 2 * last + inC(last)];
  }

  halfLength(word: number): number {
    const [left, right] = this.#ends(word);
    return right - left;
  }

  strings(length: number): number[] {
    const found: number[] = [];
    const end = 4 ** (Math.floor(length / 2) + 1);
    for (let word = 1; word < end; word++)
      if (word % 4 !== 0 && this.halfLength(word) === length) found.push(word);
    return found;
  }

  /** The part of i[q, H]/2 whose left end has moved by the first number of half steps outward, and its right end by the second. */
  #part(q: Density, keep: (left: number, right: number) => boolean): Density {
    const result: Density = new Map();
    for (const [word, c] of q) {
      // One site of room on the left.
      const placed = word << 2;
      const [left, right] = this.#ends(placed);
      // One on the right, too.
      let end = 4;
      while (end <= 4 * placed) end *= 4;
      for (const terms of [this.h, this.w])
        for (const [term, value] of terms)
          for (let moved = term; moved < end; moved <<= 2) {
            const e = phase(placed, moved);
            let product = placed ^ moved;
            if (e % 2 === 0 || product === 0) continue;
            const [l, r] = this.#ends(product);
            if (!keep(left - l, r - right)) continue;
            while (product % 4 === 0) product >>= 2;
            result.set(product, (result.get(product) ?? 0n) + (e === 1 ? -c * value : c * value));
          }
    }
    return result;
  }

  growth(q: Density): Density {
    return this.#part(q, (left, right) => left >= 0 && right >= 0 && left + right === 1);
  }

  #right(q: Density): Density {
    return this.#part(q, (left, right) => left === 0 && right === 1);
  }

  #level(q: Density): Density {
    return this.#part(q, (left, right) => left === 0 && right === 0);
  }

  /** α = R D_6 and β = D_7 − R D_6: the pencil at half-length ℓ is α + (ℓ − 6) β. */
  inner(f: Density): { alpha: Density; beta: Density } {
    const f6 = this.#right(this.#right(this.#right(f)));
    const alpha = this.#right(this.#level(f6));
    return { alpha, beta: sum(this.#level(this.#right(f6)), alpha, -1n) };
  }
}
