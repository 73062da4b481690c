/**
 * The search on any lattice: all charges whose strings fit a window, for a group of translations and a character of it.
 *
 * The same proof as on the chain: a kernel modulo one prime bounds the dimension from above, as many explicit charges with an
 * exact commutator from below. For a wave number 2πm/n the prime is 1 modulo n, so that ω is a residue, and coefficients lie in
 * Q(ω): the reduced basis at each primitive root modulo p is the image of one and the same basis over Q(ω) under one of its φ(n)
 * embeddings, and φ(n) images determine an element.
 */
import { type Cyclotomic, CyclotomicField } from '../../algebra/cyclotomic.ts';
import { gcd, lcm } from '../../algebra/rational.ts';
import { InputError, LimitError, show, VerificationError } from '../../errors.ts';
import { type Field, PRIME_BOUND, primeField, primesBelow } from '../../linear/field.ts';
import { chineseRemainder, rationalReconstruction } from '../../linear/reconstruct.ts';
import type { SparseMatrix, SparseVector } from '../../linear/sparse.ts';
import type { LatticeModel } from '../../model/lattice-model.ts';
import { liftCharges, modularBasis } from '../charges.ts';
import { bucketCount, peel } from './peel.ts';
import type { LatticeCharge, LatticeResult } from './result.ts';
import { StringSpace } from './space.ts';
import { type LatticeSystem, latticeSystem, matrixAt, restricted } from './system.ts';

export interface LatticeOptions {
  /** Cells in each direction that a string may cover, from its first to its last. A number for one direction. */
  readonly window: number | readonly number[];
  /**
   * Charges invariant under translations by so many cells, in each direction; 1 by default in infinite directions and, for models
   * without local terms, on rings. 0 on a ring: no invariance asked for.
   */
  readonly period?: number | readonly number[];
  /** Wave number as a fraction of 2π, `m/n` a direction: translation by a period multiplies by e^{2πi m/n}. */
  readonly wave?: string | readonly string[];
  /** Called while it runs; throwing from it stops the search and nothing is returned. */
  readonly onProgress?: (progress: LatticeProgress) => void;
  /** Primes are taken from below this bound, falling; the answer does not depend on it. */
  readonly primesBelow?: number;
}

export interface LatticeProgress {
  readonly stage: 'list' | 'peel' | 'assemble' | 'solve';
  /** Share of the stage, 0 … 1. */
  readonly done: number;
  readonly candidates: number;
}

export interface LatticeEstimate {
  /** Candidates; on rings an upper bound. */
  readonly candidates: number;
  readonly bytes: number;
  readonly seconds: number;
}

/** More candidates than this are refused: their keys and marks would not fit. */
export const MAX_CANDIDATES = 40_000_000;

const MAX_ATTEMPTS = 12;
const MAX_PRIMES = 400;

/**
 * @throws InputError for a window, period or wave number that does not fit the lattice; LimitError for too many candidates
 */
export function searchLatticeNow(model: LatticeModel, options: LatticeOptions): LatticeResult {
  const started = performance.now();
  const { onProgress = () => {}, primesBelow: bound = PRIME_BOUND } = options;
  const space = spaceOf(model, options);
  const expected = space.upperBound;
  if (expected > MAX_CANDIDATES) throw tooMany(expected);
  const { order } = space.translations;
  const field = new CyclotomicField(order);
  const reduce = (exponent: number) => ((exponent % order) + order) % order;
  const keys = space.candidates((done) => onProgress({ stage: 'list', done, candidates: expected }));
  const candidates = keys.length / space.limbs;
  const tell = (stage: LatticeProgress['stage']) => (done: number) => onProgress({ stage, done, candidates });
  const left = peel(space, keys, tell('peel'));
  const system = latticeSystem(space, keys, left, reduce, tell('assemble'));
  const fields = fieldsFor(order, bound);
  for (let attempt = 0; attempt < MAX_ATTEMPTS; attempt++) {
    const next = fields.next();
    if (next.done) break;
    tell('solve')(0);
    const charges =
      order <= 2
        ? rationalCharges(space, system, next.value, fields, reduce, tell('solve'))
        : cyclotomicCharges(space, system, next.value, fields, { field, reduce, tell: tell('solve') });
    if (charges === undefined) continue;
    return Object.freeze({
      model,
      window: space.window,
      translations: space.translations,
      box: space.keyBox,
      charges: Object.freeze(charges.charges),
      candidates,
      left: left.length,
      primes: Object.freeze(charges.primes),
      milliseconds: performance.now() - started,
    });
  }
  throw new VerificationError(
    `search: no prime below ${bound} gave matching bounds in ${MAX_ATTEMPTS} attempts`,
  );
}

/** Candidates, memory and time of a search on a lattice. @throws InputError as the search */
export function estimateLattice(model: LatticeModel, options: LatticeOptions): LatticeEstimate {
  const space = spaceOf(model, options);
  const candidates = space.upperBound;
  const keys = 4 * space.limbs * candidates;
  return {
    candidates,
    // Runtime and code, keys and their marks, buckets.
    bytes: Math.round(90e6 + keys + 2 * candidates + 5 * bucketCount(candidates)),
    // Rough, from runs of small windows: nanoseconds a candidate and term that touches a window.
    seconds: (candidates * 900 * Math.max(1, model.repeated.length)) / 1e9,
  };
}

function tooMany(expected: number): LimitError {
  return new LimitError(
    `search: the window has about ${expected.toPrecision(3)} candidates; up to ${MAX_CANDIDATES.toLocaleString('en')} are taken`,
  );
}

function spaceOf(model: LatticeModel, { window, period, wave }: LatticeOptions): StringSpace {
  const { dimension, extents } = model.lattice;
  const sizes = typeof window === 'number' ? [window] : window;
  const fallback = extents.map((e) =>
    e.kind === 'infinite' || (e.kind === 'ring' && model.local.length === 0) ? 1 : 0,
  );
  const steps = period === undefined ? fallback : typeof period === 'number' ? [period] : period;
  const waves = wave === undefined ? [] : typeof wave === 'string' ? [wave] : wave;
  if (waves.length > 0 && waves.length !== dimension)
    throw new InputError('wave number', `${dimension} fractions m/n, one a direction`, `${waves.length}`);
  const fractions = waves.map(waveNumber);
  const order = fractions.reduce((n, f) => Number(lcm(BigInt(n), BigInt(f.denominator))), 1);
  const exponents = extents.map((_, d) => {
    const fraction = fractions[d];
    if (fraction === undefined || fraction.numerator === 0) return 0;
    if (steps[d] === 0)
      throw new InputError('wave number', '0 in a direction without translations', `${waves[d]}`);
    return (fraction.numerator * order) / fraction.denominator;
  });
  return new StringSpace(model, sizes, { steps, exponents, order });
}

/** `m/n` in lowest terms, 0 ≤ m < n. @throws InputError for anything that is not rational */
export function waveNumber(text: string): { numerator: number; denominator: number } {
  const match = /^\s*([+-]?\d{1,6})(?:\/([1-9]\d{0,5}))?\s*$/.exec(text);
  if (match === null)
    throw new InputError(
      'wave number',
      'a rational fraction m/n of 2π, such as 1/2 for π; other wave numbers are covered by all wave numbers at once',
      show(text),
    );
  const n = Number(match[2] ?? 1);
  const m = ((Number(match[1]) % n) + n) % n;
  const common = Number(gcd(BigInt(m), BigInt(n)));
  return { numerator: m / common, denominator: n / common };
}

function* fieldsFor(order: number, bound: number): Generator<Field> {
  for (const p of primesBelow(bound)) if ((p - 1) % order === 0) yield primeField(p);
}

interface Found {
  readonly charges: LatticeCharge[];
  readonly primes: readonly number[];
}

/** Columns that a basis uses: later primes need no others. */
function usedColumns(vectors: readonly SparseVector[]): Uint32Array {
  return Uint32Array.from(new Set(vectors.flatMap((v) => v.columns))).sort();
}

function rationalCharges(
  space: StringSpace,
  system: LatticeSystem,
  field: Field,
  fields: Iterator<Field>,
  reduce: (exponent: number) => number,
  tell: (done: number) => void,
): Found | undefined {
  const sign = (exponent: number) => (exponent % 2 === 0 ? 1n : -1n);
  const found = modularBasis(matrixAt(system, sign), null, field);
  const small = restricted(space, system, usedColumns(found.even), reduce);
  const matrix = matrixAt(small, sign);
  const basis = modularBasis(matrix, null, field);
  const lifted = liftCharges(matrix, null, { basis, field }, fields, () => tell(1));
  if (!lifted.ok) return undefined;
  return {
    primes: lifted.primes,
    charges: lifted.charges.map(({ columns, values }) =>
      chargeOf(
        space,
        small,
        columns,
        values.map((v) => ({ numerators: [v], denominator: 1n })),
      ),
    ),
  };
}

function chargeOf(
  space: StringSpace,
  { words }: LatticeSystem,
  columns: readonly number[],
  coefficients: readonly Cyclotomic[],
): LatticeCharge {
  return Object.freeze({
    extent: Object.freeze(space.extent(words[columns[0]!]!)),
    terms: Object.freeze(columns.map((c, i) => Object.freeze([words[c]!, coefficients[i]!] as const))),
  });
}

/** The residues ω^e modulo p of each of the φ(n) primitive n-th roots of unity. */
function embeddings(order: number, { p, multiply }: Field): number[][] {
  const powerOf = (base: number, exponent: number) => {
    let result = 1;
    for (let b = base, e = exponent; e > 0; e = Math.floor(e / 2)) {
      if (e % 2 === 1) result = multiply(result, b);
      b = multiply(b, b);
    }
    return result;
  };
  const isPrimitive = (w: number) => {
    for (let d = 1; d < order; d++) if (order % d === 0 && powerOf(w, d) === 1) return false;
    return true;
  };
  let root = 0;
  for (let g = 2; root === 0; g++) {
    const w = powerOf(g, (p - 1) / order);
    if (isPrimitive(w)) root = w;
  }
  const units = Array.from({ length: order }, (_, j) => j).filter(
    (j) => gcd(BigInt(j), BigInt(order)) === 1n,
  );
  return units.map((j) => Array.from({ length: order }, (_, e) => powerOf(root, (j * e) % order)));
}

interface CyclotomicContext {
  readonly field: CyclotomicField;
  readonly reduce: (exponent: number) => number;
  readonly tell: (done: number) => void;
}

/** Reduced bases at all embeddings, all of one shape; undefined where they differ: then the prime is unlucky. */
function basesAt(system: LatticeSystem, field: Field, powers: readonly (readonly number[])[]) {
  const bases = powers.map(
    (power) =>
      modularBasis(
        matrixAt(system, (e) => BigInt(power[e]!)),
        null,
        field,
      ).even,
  );
  const shape = (basis: readonly SparseVector[]) => basis.map((v) => v.columns[0]).join();
  return bases.every((basis) => shape(basis) === shape(bases[0]!)) ? bases : undefined;
}

function cyclotomicCharges(
  space: StringSpace,
  full: LatticeSystem,
  first: Field,
  fields: Iterator<Field>,
  { field: cyclotomic, reduce, tell }: CyclotomicContext,
): Found | undefined {
  const { order, degree } = cyclotomic;
  const found = basesAt(full, first, embeddings(order, first));
  if (found === undefined) return undefined;
  const system = restricted(space, full, usedColumns(found.flat()), reduce);
  const primes: number[] = [];
  let modulus = 1n;
  let supports: number[][] = [];
  let shape = '';
  /** Coefficients of 1, ω, …, modulo `modulus`: charge, column of its support, power. */
  let residues: bigint[][][] = [];
  for (let next: IteratorResult<Field> = { value: first, done: false }; !next.done; next = fields.next()) {
    const field = next.value;
    const powers = embeddings(order, field);
    const bases = basesAt(system, field, powers);
    if (bases === undefined) {
      if (primes.length === 0) return undefined;
      continue;
    }
    const own = bases[0]!.map((v) => v.columns[0]).join();
    if (primes.length === 0) {
      shape = own;
      supports = bases[0]!.map((_, i) =>
        [...new Set(bases.flatMap((basis) => basis[i]!.columns))].sort((a, b) => a - b),
      );
      residues = supports.map((s) => s.map(() => new Array<bigint>(degree).fill(0n)));
    } else if (bases[0]!.length < supports.length) return undefined;
    else if (own !== shape) continue;
    const solve = interpolation(powers, degree, field);
    const p = BigInt(field.p);
    const inverse = BigInt(field.inverse(field.residue(modulus)));
    residues = supports.map((support, i) => {
      const values = bases.map((basis) => {
        const v = basis[i]!;
        return new Map(v.columns.map((c, j) => [c, v.values[j]!]));
      });
      return support.map((column, s) =>
        solve(values.map((v) => v.get(column) ?? 0)).map((residue, k) =>
          chineseRemainder(residues[i]![s]![k]!, modulus, BigInt(residue), p, inverse),
        ),
      );
    });
    modulus *= p;
    primes.push(field.p);
    const charges = residues.map((r) => r.map((c) => elementOf(c, modulus, cyclotomic)));
    if (
      charges.every((c): c is Cyclotomic[] => c.every((e) => e !== undefined)) &&
      charges.every((c, i) => isAnnihilated(system, supports[i]!, c, cyclotomic))
    )
      return {
        primes,
        charges: charges.map((c, i) => {
          const kept = supports[i]!.flatMap((column, s) =>
            cyclotomic.isZero(c[s]!) ? [] : [[column, c[s]!] as const],
          );
          return chargeOf(
            space,
            system,
            kept.map(([column]) => column),
            primitive(
              kept.map(([, e]) => e),
              cyclotomic,
            ),
          );
        }),
      };
    if (primes.length === MAX_PRIMES) return undefined;
    tell(1);
  }
  return undefined;
}

/** Solves Σ_k a_k ω_j^k = v_j for all embeddings j: the inverse of a Vandermonde matrix modulo p. */
function interpolation(powers: readonly (readonly number[])[], degree: number, field: Field) {
  const { p, multiply, inverse } = field;
  const rows = powers.map((power, j) => [
    ...Array.from({ length: degree }, (_, k) => power[k % power.length]!),
    ...powers.map((_, i) => (i === j ? 1 : 0)),
  ]);
  for (let c = 0; c < degree; c++) {
    const pivot = rows.findIndex((row, i) => i >= c && row[c] !== 0);
    [rows[c], rows[pivot]] = [rows[pivot]!, rows[c]!];
    const scale = inverse(rows[c]![c]!);
    rows[c] = rows[c]!.map((v) => multiply(v, scale));
    for (let i = 0; i < degree; i++) {
      const factor = rows[i]![c]!;
      if (i !== c && factor !== 0)
        rows[i] = rows[i]!.map((v, j) => (v + multiply(p - factor, rows[c]![j]!)) % p);
    }
  }
  return (values: readonly number[]): number[] =>
    rows.map((row) => values.reduce((sum, v, i) => (sum + multiply(row[degree + i]!, v)) % p, 0));
}

function elementOf(
  residues: readonly bigint[],
  modulus: bigint,
  field: CyclotomicField,
): Cyclotomic | undefined {
  const parts = residues.map((r) => rationalReconstruction(r, modulus));
  if (parts.some((part) => part === undefined)) return undefined;
  const denominator = parts.reduce((d, part) => lcm(d, part!.denominator), 1n);
  return field.reduced(
    parts.map((part) => (part!.numerator * denominator) / part!.denominator),
    denominator,
  );
}

/** Without denominators and common integer factors; the leading coefficient, 1 in the reduced basis, stays a positive integer. */
function primitive(elements: readonly Cyclotomic[], field: CyclotomicField): Cyclotomic[] {
  const denominator = elements.reduce((d, e) => lcm(d, e.denominator), 1n);
  let common = 0n;
  for (const e of elements)
    for (const v of e.numerators) common = gcd(common, (v * denominator) / e.denominator);
  return elements.map((e) => field.scale(e, { numerator: denominator, denominator: common }));
}

/** Does every equation hold exactly in Q(ω)? */
function isAnnihilated(
  { matrix, entries }: { matrix: SparseMatrix; entries: LatticeSystem['entries'] },
  columns: readonly number[],
  values: readonly Cyclotomic[],
  field: CyclotomicField,
): boolean {
  const x = new Map(columns.map((c, i) => [c, values[i]!]));
  for (let row = 0; row < matrix.rows; row++) {
    let sum = field.rational({ numerator: 0n, denominator: 1n });
    for (let i = matrix.start[row]!; i < matrix.start[row + 1]!; i++) {
      const value = x.get(matrix.column[i]!);
      if (value === undefined) continue;
      const entry = entries[matrix.value[i]!]!;
      const term = field.multiply(value, field.power(entry.exponent));
      sum = field.add(sum, field.scale(term, { numerator: entry.value, denominator: 1n }));
    }
    if (!field.isZero(sum)) return false;
  }
  return true;
}
