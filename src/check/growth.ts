/**
 * Certificates of the kind `growth`: all charges of range ≤ k on an injective chain, k far beyond what lists of candidates reach.
 * Numbers such as G4 are those of docs/certificate.md, "Kind `growth`". The evidence is one prime: what bounds the number of charges
 * is recomputed from the model alone, in strings of at most four cells, whatever k is.
 */
import { lcm, phase, type Term } from './chain.ts';
import { fields, natural, Rejected } from './document.ts';
import { type Density, Growth, injective, type Steps } from './every-range.ts';
import { type Charge, checkClaim, leadingPartsIndependent, type Parts, readClaim } from './exhaustive.ts';
import { inverse, isPrime, multiply, PRIME_BOUND, residue } from './modular.ts';

export const GROWTH = 'growth';

/** Limits: widest cell; longest string, with a cell at either end, that a double holds exactly. */
const MAX_CELL = 2;
const MAX_SPINS = 26;

export function* checkGrowth(parts: Parts): Generator<number, string> {
  const form = readClaim(parts, MAX_CELL, MAX_SPINS);
  const { cell, reach, terms, range, charges, words } = form;
  const evidence = fields(parts.evidence, ['prime'], 'evidence');
  const p = natural(evidence.prime, 'prime', 3, PRIME_BOUND - 1);
  checkClaim(form);
  if (!isPrime(p)) throw new Rejected('the modulus of the evidence is not a prime');
  if (reach !== 2) throw new Rejected('the interaction does not have range 2');
  if (cell * (range + 2) > MAX_SPINS)
    throw new Rejected('the range of the claim exceeds the limits of this checker');

  // Lower bound, G2.
  const neighbours = new Neighbours(cell, terms);
  for (const [i, charge] of charges.entries()) {
    if (!charge.terms.some((t) => t.range === charge.range))
      throw new Rejected(`charge ${i + 1} has no term of its range`);
    if (!(yield* commutes(neighbours, charge)))
      throw new Rejected(`charge ${i + 1} does not commute with the Hamiltonian`);
  }
  yield* leadingPartsIndependent(charges, p);

  // Upper bound, G3 to G6.
  const chain = new Growth(cell, terms);
  yield* injective(chain, p);
  let most = yield* shortSolutions(chain, neighbours, Math.min(range, 2), p);
  if (range >= 3) {
    const parts2 = yield* topParts(chain, p);
    const image = yield* imageOfGrowth(chain, p);
    const pencil = parts2.map((f) => {
      const { alpha, beta } = chain.inner(f);
      return { alpha: image.reduce(modulo(alpha, p)), beta: image.reduce(modulo(beta, p)) };
    });
    for (let k = 3; k <= range; k++) {
      const rank = new Echelon(p);
      for (const { alpha, beta } of pencil) if (!rank.insert(combined(alpha, (k - 3) % p, beta, p))) most++;
      yield 0.9;
    }
  }
  if (most !== charges.length)
    throw new Rejected(`the bounds do not meet: at most ${most} charges, and ${charges.length} are listed`);
  return words;
}

/** What the terms of H make of a string, by the content of each window of two cells: E1, in doubles. */
class Neighbours {
  readonly #letters: number;
  /** By window: images and ±J. */
  readonly #table: (readonly [image: number, value: bigint])[][] = [];

  constructor(cell: number, terms: readonly Term[]) {
    this.#letters = 4 ** cell;
    const common = terms.reduce((d, t) => lcm(d, t.coefficient.denominator), 1n);
    for (let window = 0; window < this.#letters ** 2; window++)
      this.#table.push(
        terms.flatMap(({ word, coefficient: { numerator, denominator } }) => {
          const e = phase(word, window);
          const value = (numerator * common) / denominator;
          return e % 2 === 0 ? [] : [[word ^ window, e === 1 ? -value : value] as const];
        }),
      );
  }

  /** Every output of a string, as a representative, with its coefficient; an output may come up again. */
  *of(word: number): Generator<readonly [output: number, value: bigint]> {
    const placed = word * this.#letters;
    for (let unit = 1; unit <= placed; unit *= this.#letters) {
      const window = Math.floor(placed / unit) % this.#letters ** 2;
      for (const [image, value] of this.#table[window]!) {
        let output = placed + (image - window) * unit;
        while (output % this.#letters === 0) output /= this.#letters;
        yield [output, value];
      }
    }
  }
}

/** L1, in integers. */
function* commutes(neighbours: Neighbours, { terms }: Charge): Generator<number, boolean> {
  const common = terms.reduce((d, t) => lcm(d, t.coefficient.denominator), 1n);
  const sums = new Map<number, bigint>();
  for (const [i, { word, coefficient: c }] of terms.entries()) {
    const factor = (c.numerator * common) / c.denominator;
    for (const [output, value] of neighbours.of(word))
      sums.set(output, (sums.get(output) ?? 0n) + factor * value);
    if (i % 1024 === 0) yield 0.1;
  }
  for (const sum of sums.values()) if (sum !== 0n) return false;
  return true;
}

/** G4: the dimension modulo p of the solutions of range ≤ k, k being 1 or 2: candidates less the rank of all their equations. */
function* shortSolutions(
  chain: Growth,
  neighbours: Neighbours,
  k: number,
  p: number,
): Generator<number, number> {
  const echelon = new Echelon(p);
  let most = 0;
  for (let cells = 1; cells <= k; cells++)
    for (const string of chain.strings(cells)) {
      const image: Density = new Map();
      for (const [output, value] of neighbours.of(string))
        image.set(output, (image.get(output) ?? 0n) + value);
      if (!echelon.insert(modulo(image, p))) most++;
      yield 0.2;
    }
  return most;
}

/** A basis modulo p of V_2, the densities of range 2 that R − A kills: the relations between the (R − A) s. */
function* topParts(chain: Growth, p: number): Generator<number, Density[]> {
  const echelon = new Echelon(p);
  const found: Density[] = [];
  for (const string of chain.strings(2)) {
    const row = modulo(chain.growth(new Map([[string, 1n]]), 2), p);
    // The column −s names the string, and no pivot is ever taken there.
    row.set(-string, 1);
    const rest = echelon.reduce(row);
    if (![...rest.keys()].some((column) => column > 0))
      found.push(new Map([...rest].map(([column, value]) => [-column, BigInt(value)])));
    else echelon.insert(rest);
    yield 0.3;
  }
  return found;
}

/** (R − A) O_3, or the image of another length, modulo p. */
export function* imageOfGrowth(chain: Steps, p: number, length = 3): Generator<number, Echelon> {
  const rows = chain.strings(length).map((s) => modulo(chain.growth(new Map([[s, 1n]]), length), p));
  const usage = new Map<number, number>();
  for (const row of rows) for (const column of row.keys()) usage.set(column, (usage.get(column) ?? 0) + 1);
  const echelon = new Echelon(p, usage);
  for (const [i, row] of rows.entries()) {
    echelon.insert(row);
    yield 0.3 + (0.6 * i) / rows.length;
  }
  return echelon;
}

/** Residues by column, none zero. */
export type Row = Map<number, number>;

export function modulo(q: Density, p: number): Row {
  const row: Row = new Map();
  for (const [column, value] of q) {
    const r = residue(value, p);
    if (r !== 0) row.set(column, r);
  }
  return row;
}

/** a + factor·b. */
function combined(a: Row, factor: number, b: Row, p: number): Row {
  const total = new Map(a);
  for (const [column, value] of b) {
    const next = ((total.get(column) ?? 0) + multiply(factor, value, p)) % p;
    if (next === 0) total.delete(column);
    else total.set(column, next);
  }
  return total;
}

/** Rows in echelon form modulo p: a pivot row has no entry in the pivot columns of earlier ones, and 1 in its own. */
export class Echelon {
  readonly #pivots: { readonly column: number; readonly row: Row }[] = [];

  /** @param usage how many rows use a column: pivots are taken where few do. Any choice gives the same ranks. */
  constructor(
    readonly p: number,
    readonly usage: ReadonlyMap<number, number> = new Map(),
  ) {}

  /** The row modulo the span of the rows inserted, without entries in pivot columns. */
  reduce(row: Row): Row {
    let rest = row;
    for (const { column, row: pivot } of this.#pivots) {
      const value = rest.get(column);
      if (value !== undefined) rest = combined(rest, this.p - value, pivot, this.p);
    }
    return rest;
  }

  /** Is the row independent of those inserted? It then becomes one of them. */
  insert(row: Row): boolean {
    const rest = this.reduce(row);
    let column = 0;
    let least = Number.POSITIVE_INFINITY;
    for (const c of rest.keys())
      if (c > 0 && (this.usage.get(c) ?? 0) < least) {
        column = c;
        least = this.usage.get(c) ?? 0;
      }
    if (column === 0) return false;
    const scale = inverse(rest.get(column)!, this.p);
    this.#pivots.push({ column, row: new Map([...rest].map(([c, v]) => [c, multiply(scale, v, this.p)])) });
    return true;
  }
}
