/**
 * The search: all charges of range ≤ k, by two bounds that meet.
 *
 * Upper bound: the rank of the equations modulo one prime, from the sweeps and the restricted system. Lower bound: as many
 * explicit charges, each re-multiplied exactly. Where they differ the prime was unlucky and the next one is taken.
 */
import { Operator } from '../algebra/operator.ts';
import { type Rational, rational } from '../algebra/rational.ts';
import { compareWords, type Word } from '../algebra/word.ts';
import { LimitError, VerificationError } from '../errors.ts';
import { PRIME_BOUND, primeFieldsBelow } from '../linear/field.ts';
import { restrictColumns, type SparseVector } from '../linear/sparse.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { MAX_SPINS } from './addresses.ts';
import { assemble, type RestrictedSystem } from './assemble.ts';
import { type IntegerVector, liftCharges, type Mirror, type ModularBasis, modularBasis } from './charges.ts';
import { candidateCount } from './estimate.ts';
import { livingByGrowth } from './growth.ts';
import { methodFor, planOf } from './plan.ts';
import { type Charge, type Method, resultFrom, type SearchResult } from './result.ts';
import { type Sector, sectorCandidates } from './sectors.ts';
import { aliveStrings, type OnProgress, type Progress, type SnapshotStore } from './sweep.ts';

export interface SearchOptions {
  /** Largest range of the charges, in cells. */
  readonly range: number;
  /** Called while it runs; throwing from it stops the search and nothing is returned. */
  readonly onProgress?: OnProgress;
  /** Primes are taken from below this bound, falling; the answer does not depend on it. */
  readonly primesBelow?: number;
  /**
   * How the candidates that may be non-zero are found. `exhaustive` visits all of them; `growth` follows the strings that stay
   * alive, for injective nearest-neighbour interactions. Default: exhaustive as far as its arrays go, growth beyond.
   */
  readonly method?: Method;
  /**
   * Cuts the exhaustive search into at most so many conserved sectors, 1 to 8, one after the other: memory falls as they rise.
   * The answer does not depend on it. Default: 1, or as many as it takes to fit the arrays.
   */
  readonly sectors?: number;
  /** Keeps finished layers, so that a search that was killed goes on from the last one. */
  readonly store?: (sector: Sector) => SnapshotStore;
}

/** Primes tried for the upper bound before giving up. Two in a row have never been seen to fail. */
const MAX_ATTEMPTS = 12;

/**
 * All charges of range ≤ `range` of H: a canonical basis with exact coefficients, complete by proof.
 *
 * Synchronous; see `search` for one that leaves the event loop free. Memory: 8 bytes a packed candidate, 4^(n·range) over the
 * number of sectors, and what is left alive. Cost grows like the number of candidates.
 *
 * @throws InputError when the range is no positive integer; LimitError when the candidates do not fit
 */
export function searchNow(h: Hamiltonian, options: SearchOptions): SearchResult {
  const started = performance.now();
  const plan = planOf(h, options);
  const { onProgress } = options;
  const parts = plan.sectors.map((sector, i, { length }) =>
    searchSector(h, sector, {
      ...options,
      ...(onProgress === undefined
        ? {}
        : { onProgress: (at: Progress) => onProgress({ ...at, done: (i + at.done) / length }) }),
    }),
  );
  for (let late = latecomers(parts); late !== undefined; late = latecomers(parts))
    for (const i of late.parts)
      parts[i] = searchSector(h, plan.sectors[i]!, { ...options, primesBelow: late.primesBelow });
  return combined(h, options.range, parts, plan.method, performance.now() - started);
}

/** The charges within a sector, in canonical order, and the primes that it took. */
export interface SectorCharges {
  readonly charges: readonly Charge[];
  /** The first one carries the upper bound; all of them together the coefficients. */
  readonly primes: readonly number[];
}

/**
 * One sector of a search by itself.
 *
 * @param sector one of `planOf`, which has seen to it that the candidates fit
 * @throws LimitError when growth is asked for and does not apply
 */
export function searchSector(h: Hamiltonian, sector: Sector, options: SearchOptions): SectorCharges {
  const { range, onProgress = () => {}, primesBelow: bound = PRIME_BOUND, store } = options;
  const method = methodFor(h, range, options.method);
  const candidates = sectorCandidates(sector, range);
  const solving = (done: number) => onProgress({ stage: 'solve', layer: 0, done, candidates });
  const fields = primeFieldsBelow(bound);
  let refused = false;
  for (let attempt = 0; attempt < MAX_ATTEMPTS; attempt++) {
    const next = fields.next();
    if (next.done) break;
    const field = next.value;
    const strings =
      method === 'growth'
        ? livingByGrowth(h, range, field, onProgress)
        : aliveStrings(h, range, field, { onProgress, store: store?.(sector), sector });
    if (strings === undefined) {
      refused = true;
      continue;
    }
    const alive = assemble(h, strings, range, solving);
    const reflected = mirrorOf(h, alive.strings);
    const found = modularBasis(alive.matrix, reflected, field);
    solving(0.5);
    const { system, mirror, basis } = restricted(alive, reflected, found);
    const lifted = liftCharges(system.matrix, mirror, { basis, field }, fields, () => solving(1));
    if (!lifted.ok) continue;
    return {
      charges: lifted.charges.map((charge) => chargeOf(h, system.strings, charge)),
      primes: lifted.primes,
    };
  }
  if (refused)
    throw new LimitError(
      `search: above ${MAX_SPINS} spins, range × cell, the search follows growth and needs an injective nearest-neighbour interaction; this one is not`,
    );
  throw new VerificationError(
    `search: no prime below ${bound} gave matching bounds in ${MAX_ATTEMPTS} attempts`,
  );
}

/**
 * One prime carries the upper bound of all sectors: parts that finished with a larger one than another part are to be done
 * again below this bound. Undefined when all agree. Happens when a prime is unlucky, about once in 10⁷.
 */
export function latecomers(
  parts: readonly SectorCharges[],
): { readonly parts: readonly number[]; readonly primesBelow: number } | undefined {
  const smallest = Math.min(...parts.map((part) => part.primes[0]!));
  const late = parts.flatMap((part, i) => (part.primes[0]! > smallest ? [i] : []));
  return late.length === 0 ? undefined : { parts: late, primesBelow: smallest + 1 };
}

/**
 * The result of a search from those of all its sectors. Their strings are disjoint, so reduced echelon forms put together are
 * the reduced echelon form of the whole.
 */
export function combined(
  h: Hamiltonian,
  range: number,
  parts: readonly SectorCharges[],
  method: Method,
  milliseconds: number,
): SearchResult {
  const charges = parts
    .flatMap((part) => part.charges)
    .map((charge) => ({ charge, leading: leadingWord(h, charge) }))
    .sort(
      (a, b) =>
        a.charge.range - b.charge.range ||
        Number(a.charge.parity === 'odd') - Number(b.charge.parity === 'odd') ||
        compareWords(a.leading, b.leading),
    )
    .map(({ charge }) => charge);
  return resultFrom({
    hamiltonian: h,
    range,
    dimensionByRange: Object.freeze(
      Array.from({ length: range }, (_, j) => charges.filter((q) => q.range <= j + 1).length),
    ),
    charges,
    expansionOfH: h.range > range ? null : expansion(h, charges),
    minimumCells: 2 * range + 2 * h.range - 3,
    method,
    primes: Object.freeze([...new Set(parts.flatMap((part) => part.primes))].sort((a, b) => b - a)),
    candidates: candidateCount(h.chain.cell, range),
    milliseconds,
  });
}

/** The columns that charges use. Later primes need no others, and the exact check sees every equation that meets them. */
function restricted(
  { matrix, strings }: RestrictedSystem,
  mirror: Mirror,
  basis: ModularBasis,
): { system: RestrictedSystem; mirror: Mirror; basis: ModularBasis } {
  const keep = new Uint8Array(matrix.columns);
  for (const v of [...basis.even, ...basis.odd]) for (const c of v.columns) keep[c] = 1;
  const { matrix: smaller, columnOf, rowOf } = restrictColumns(matrix, keep);
  const moved = (v: SparseVector) => ({ columns: v.columns.map((c) => columnOf[c]!), values: v.values });
  const steps = basis.steps.flatMap((step) => {
    const moved = step >= 0 ? rowOf[step]! : columnOf[-1 - step]!;
    return moved < 0 ? [] : [step >= 0 ? moved : -1 - moved];
  });
  return {
    system: { matrix: smaller, strings: strings.filter((_, c) => keep[c] === 1) },
    mirror:
      mirror === null ? null : mirror.filter((_, c) => keep[c] === 1).map((c) => (c < 0 ? -1 : columnOf[c]!)),
    basis: { even: basis.even.map(moved), odd: basis.odd.map(moved), steps },
  };
}

function mirrorOf(h: Hamiltonian, strings: Float64Array): Mirror {
  const { reflection } = h;
  if (reflection === null) return null;
  const column = new Map<number, number>();
  strings.forEach((s, c) => void column.set(s, c));
  return Int32Array.from(strings, (s) => column.get(Number(h.chain.reflect(BigInt(s), reflection))) ?? -1);
}

function chargeOf(h: Hamiltonian, strings: Float64Array, { columns, values, parity }: IntegerVector): Charge {
  const density = Operator.fromIntegers(columns.map((c, i) => [BigInt(strings[c]!), values[i]!] as const));
  // The leading string comes first in canonical order, and its coefficient is positive: reduced rows lead with 1.
  return {
    range: h.chain.range(BigInt(strings[columns[0]!]!)),
    parity: h.reflection === null ? null : parity,
    density,
  };
}

/** H in the basis: its coefficient at a charge's leading string over the charge's own, part by part. */
function expansion(h: Hamiltonian, charges: readonly Charge[]): readonly Rational[] {
  // H is even where it has a parity at all, so odd charges do not take part.
  let rest = h.density;
  const coefficients = charges.map((charge) => {
    if (charge.parity === 'odd') return rational(0n);
    const leading = leadingWord(h, charge);
    const own = charge.density.coefficient(leading);
    const wanted = h.density.coefficient(leading);
    const factor = rational(wanted.numerator * own.denominator, wanted.denominator * own.numerator);
    rest = rest.minus(charge.density.times(factor));
    return factor;
  });
  if (!rest.isZero())
    throw new VerificationError('search: H is not in the span of the charges it must conserve');
  return Object.freeze(coefficients);
}

/** The string of a charge that no other charge of its part has: of full range, first in alphabetical order. */
export function leadingWord(h: Hamiltonian, charge: Charge): Word {
  let leading: Word | undefined;
  for (const word of charge.density.numerators.keys())
    if (h.chain.range(word) === charge.range && (leading === undefined || compareWords(word, leading) < 0))
      leading = word;
  if (leading === undefined) throw new VerificationError('search: a charge without terms');
  return leading;
}
