/**
 * Commutators with a Hamiltonian and with its boost operator `B = Σ_j j·(density of H) + Y`, on packed sums of strings.
 *
 * For a charge Q, `[B, Q]` is a translation-invariant sum again, although B is not: where `Σ_m [h_m, q]` is a total difference, each
 * term of `[B, Q]` weighs by the place of h_m counted from the first cell of the output. So one pass over the same products gives `[B, Q]`
 * and, without the weight, `[H, Q]`, which has to vanish: every step of a ladder re-checks the charge it starts from.
 */
import { Operator } from '../algebra/operator.ts';
import { HALF_SPINS, MAX_PACKED_SPINS, TermTable } from '../algebra/term-table.ts';
import { phaseExponent, spanOf, type Word } from '../algebra/word.ts';
import { LimitError } from '../errors.ts';
import type { Chain } from '../lattice/chain.ts';

/** A density in representatives with integer coefficients. */
export interface PackedDensity {
  readonly low: Int32Array;
  readonly high: Int32Array;
  readonly coefficients: readonly bigint[];
  readonly range: number;
}

export interface Boost {
  readonly chain: Chain;
  /** Integer coefficients, in representatives. */
  readonly h: Operator;
  /** Y, one cell, integer coefficients. B = Σ j·`factor`·h_j + Y. */
  readonly shift: Operator;
  readonly factor: bigint;
}

interface Term {
  readonly word: number;
  readonly range: number;
  readonly spins: number;
  /** Coefficient in H, in `factor`·H, and in Y. */
  readonly h: number;
  readonly weighted: number;
  readonly shift: number;
  /** i times the phase of term × window by window: 1, −1, or 0 where they commute. */
  readonly sign: Int8Array | undefined;
}

const BITS = 2 * HALF_SPINS;
const MASK = 2 ** BITS - 1;
/** Spins of a term up to which its signs are tabulated. */
const TABLE_SPINS = 7;

export function pack(chain: Chain, density: Operator): PackedDensity {
  const words = [...density.numerators.keys()].map((word) => chain.representative(word));
  return {
    low: Int32Array.from(words, (w) => Number(w & BigInt(MASK))),
    high: Int32Array.from(words, (w) => Number(w >> BigInt(BITS))),
    coefficients: [...density.numerators.values()],
    range: chain.rangeOf(density),
  };
}

export function unpack({ low, high, coefficients }: PackedDensity): Operator {
  return Operator.fromIntegers(coefficients.map((c, i) => [wordOf(low[i]!, high[i]!), c] as const));
}

export function wordOf(low: number, high: number): Word {
  return (BigInt(high) << BigInt(BITS)) | BigInt(low);
}

/** What one pass finds. */
export interface Pass {
  /** Is `[H, Q] = 0`, exactly? */
  readonly conserved: boolean;
  /** `i[B, Q]/2` where it was asked for and Q is conserved. */
  readonly boosted: PackedDensity | undefined;
  /** Outputs met, cancelled ones included: what the memory went to. */
  readonly outputs: number;
}

/**
 * Cost: terms of Q × terms of H × range; one table slot an output.
 *
 * Exact: a coefficient of Q is cut into limbs so short that no sum of any plane leaves the 53 bits in which doubles count exactly.
 *
 * @throws LimitError where strings or couplings are too long to pack
 */
export function pass(boost: Boost, q: PackedDensity, wanted: 'check' | 'boost'): Pass {
  const steps = passing(boost, q, wanted);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
  }
}

/** As `pass`; yields the fraction done every few milliseconds, so that a caller can give way or stop. */
export function* passing(boost: Boost, q: PackedDensity, wanted: 'check' | 'boost'): Generator<number, Pass> {
  const { chain } = boost;
  const terms = termsOf(boost);
  const reach = Math.max(...terms.map((t) => t.range)) - 1;
  if ((q.range + 2 * reach) * chain.cell > MAX_PACKED_SPINS)
    throw new LimitError(`ladder: strings of more than ${MAX_PACKED_SPINS} spins; ask for a smaller range`);
  const both = wanted === 'boost';
  const limbs = cut(q.coefficients, limbBits(terms, q.range, reach));
  const planes = limbs.length;
  const table = new TermTable(both ? 2 * planes : planes, 8 * q.coefficients.length);
  const cellBits = 2 * chain.cell;
  const count = q.coefficients.length;
  // Products are written out: a pair of halves returned from a function would be an object for each of some 10⁸ outputs.
  const mask = MASK;
  for (let i = 0; i < count; i++) {
    if ((i & 0x3ff) === 0x3ff) yield i / count;
    const [low, high] = shiftUp(q.low[i]!, q.high[i]!, reach * cellBits);
    for (const term of terms) {
      const { word, sign: signs, h: own, weighted, shift } = term;
      const windowMask = 2 ** (2 * term.spins) - 1;
      for (let at = reach - term.range + 1; at < reach + q.range; at++) {
        const offset = at * cellBits;
        const window =
          (offset >= BITS
            ? high >>> (offset - BITS)
            : offset === 0
              ? low
              : ((low >>> offset) | (high << (BITS - offset))) & mask) & windowMask;
        const sign = signs === undefined ? signOf(word, window) : signs[window]!;
        if (sign === 0) continue;
        let l = offset >= BITS ? low : low ^ ((word << offset) & mask);
        let h =
          offset >= BITS
            ? high ^ ((word << (offset - BITS)) & mask)
            : offset === 0
              ? high
              : high ^ (word >>> (BITS - offset));
        const bit = l !== 0 ? 31 - Math.clz32(l & -l) : BITS + 31 - Math.clz32(h & -h);
        const down = bit - (bit % cellBits);
        if (down >= BITS) {
          l = h >>> (down - BITS);
          h = 0;
        } else if (down > 0) {
          l = (l >>> down) | ((h << (BITS - down)) & mask);
          h >>>= down;
        }
        const slot = table.slot(l, h);
        const values = table.values;
        const plain = sign * own;
        for (let p = 0; p < planes; p++) values[slot + p]! += plain * limbs[p]![i]!;
        if (!both) continue;
        const weight = sign * (weighted * (at - down / cellBits) + shift);
        for (let p = 0; p < planes; p++) values[slot + planes + p]! += weight * limbs[p]![i]!;
      }
    }
  }
  return read(table, planes, both, limbs.base, q.range + reach, chain);
}

function read(
  table: TermTable,
  planes: number,
  both: boolean,
  base: bigint,
  longest: number,
  chain: Chain,
): Pass {
  const { values } = table;
  const join = (slot: number): bigint => {
    let sum = 0n;
    for (let p = planes - 1; p >= 0; p--) sum = sum * base + BigInt(values[slot + p]!);
    return sum;
  };
  const isZero = (slot: number): boolean => {
    let plain = true;
    for (let p = 0; p < planes; p++) if (values[slot + p] !== 0) plain = false;
    return plain || join(slot) === 0n;
  };
  let conserved = true;
  const low: number[] = [];
  const high: number[] = [];
  const coefficients: bigint[] = [];
  let range = 0;
  table.forEach((l, h, slot) => {
    if (!isZero(slot)) conserved = false;
    if (!both || !conserved || isZero(slot + planes)) return;
    low.push(l);
    high.push(h);
    coefficients.push(join(slot + planes));
    if (range < longest) range = Math.max(range, chain.range(wordOf(l, h)));
  });
  const boosted =
    both && conserved
      ? { low: Int32Array.from(low), high: Int32Array.from(high), coefficients, range }
      : undefined;
  return { conserved, boosted, outputs: table.size };
}

function termsOf({ chain, h, shift, factor }: Boost): Term[] {
  const words = new Set([...h.numerators.keys(), ...shift.numerators.keys()]);
  return [...words].map((word) => {
    const spins = spanOf(word);
    if (spins > HALF_SPINS)
      throw new LimitError(`ladder: a term of H on more than ${HALF_SPINS} spins; its strings do not pack`);
    const own = h.numerators.get(word) ?? 0n;
    const packed = Number(word);
    return {
      word: packed,
      range: chain.range(word),
      spins,
      h: Number(own),
      weighted: Number(own * factor),
      shift: Number(shift.numerators.get(word) ?? 0n),
      sign:
        spins > TABLE_SPINS
          ? undefined
          : Int8Array.from({ length: 4 ** spins }, (_, window) => signOf(packed, window)),
    };
  });
}

/** Of `i[term, window]/2`. */
function signOf(term: number, window: number): number {
  const phase = phaseExponent(term, window);
  return (phase & 1) === 0 ? 0 : phase === 1 ? -1 : 1;
}

/** Bits of a limb so that a sum over all terms and places stays below 2⁵³. */
function limbBits(terms: readonly Term[], range: number, reach: number): number {
  let most = 0n;
  for (const t of terms) {
    const size =
      BigInt(Math.abs(t.weighted)) * BigInt(range + 2 * reach + 1) +
      BigInt(Math.abs(t.shift)) +
      BigInt(Math.abs(t.h));
    most += size * BigInt(range + t.range);
  }
  const bits = 53 - most.toString(2).length;
  const exactly = terms.every((t) => [t.h, t.weighted, t.shift].every(Number.isSafeInteger));
  if (bits < 4 || !exactly)
    throw new LimitError('ladder: couplings of H with too many digits; its sums do not pack');
  return bits;
}

/** Signed limbs, lowest first: Σ limb_p · base^p. */
function cut(coefficients: readonly bigint[], bits: number): Float64Array[] & { base: bigint } {
  const base = 1n << BigInt(bits);
  let most = 0n;
  for (const c of coefficients)
    if (c > most) most = c;
    else if (-c > most) most = -c;
  const count = Math.max(1, Math.ceil(most.toString(2).length / bits));
  const limbs = Array.from({ length: count }, () => new Float64Array(coefficients.length));
  coefficients.forEach((c, i) => {
    let rest = c;
    for (let p = 0; p < count; p++) {
      limbs[p]![i] = Number(rest % base);
      rest /= base;
    }
  });
  return Object.assign(limbs, { base });
}

function shiftUp(low: number, high: number, bits: number): [low: number, high: number] {
  if (bits === 0) return [low, high];
  if (bits >= BITS) return [0, (low << (bits - BITS)) & MASK];
  return [(low << bits) & MASK, ((high << bits) | (low >>> (BITS - bits))) & MASK];
}
