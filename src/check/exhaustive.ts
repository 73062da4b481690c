/**
 * Certificates of the kind `exhaustive`: all charges of range ≤ k on a chain of cells. Numbers such as E2 are those of
 * docs/certificate.md, whose section 5 says why acceptance implies the claim.
 */
import { Hamiltonian, lcm, readTerms, readWord, type Term } from './chain.ts';
import { fields, list, Malformed, natural, Rejected, string, type Value } from './document.ts';
import {
  independent,
  inverse,
  isPrime,
  MAX_ROWS,
  multiply,
  PRIME_BOUND,
  type Row,
  residue,
} from './modular.ts';

/** Limits, so that hostile evidence ends in bounded time and memory: 8 bytes a packed string, a pass over all outputs a sweep. */
const MAX_CELL = 8;
const MAX_RANGE = 16;
const MAX_SPINS = 13;
const MAX_SWEEPS = 128;
const MAX_VISITS = 2 ** 31;
const MAX_CHARGES = 2 ** 16;
const MAX_ENTRIES = 2 ** 10;

export const KIND = 'exhaustive';

export const ASSUMES = [
  'The Hamiltonian is the sum of all translates, by whole cells, of the listed terms; every cell holds the same number of spins 1/2.',
  'Counted are sums of all translates, by whole cells, of one combination of Pauli strings; the identity is left out.',
  'Nothing is said about quasilocal, non-local or staggered conserved quantities.',
];

export interface Claim {
  readonly cell: number;
  readonly range: number;
  readonly dimensions: readonly number[];
  readonly rings: number;
}

/** The claim in words, C3. */
export function statement({ cell, range, dimensions, rings }: Claim): string {
  return (
    `On the infinite chain of cells of ${cell} spin${cell === 1 ? '' : 's'} 1/2, and on every ring of at least ${rings} cells, ` +
    `the translation-invariant conserved quantities of range at most ${range} ${range === 1 ? 'cell' : 'cells'} ` +
    `form a space of dimension exactly ${dimensions[range - 1]}, and it is spanned by the listed charges.`
  );
}

export interface Charge {
  readonly range: number;
  readonly terms: readonly Term[];
}

/** The parts of a certificate that depend on its kind. */
export type Parts = Readonly<Record<'model' | 'claim' | 'charges' | 'evidence', Value>>;

/** Yields the share of the work done, 0 … 1; returns the statement that is proved. */
export function* checkExhaustive(parts: Parts): Generator<number, string> {
  const { h, range, charges, p, sweeps, pivots, statement: words } = read(parts);

  // Lower bound: L1 to L3.
  for (const [i, charge] of charges.entries()) {
    if (!charge.terms.some((t) => t.range === charge.range))
      throw new Rejected(`charge ${i + 1} has no term of its range`);
    if (!commutes(h, charge, range))
      throw new Rejected(`charge ${i + 1} does not commute with the Hamiltonian`);
    yield 0;
  }
  yield* leadingPartsIndependent(charges, p);

  // Upper bound: U1 to U5.
  const candidates = 4 ** (h.cell * range) - 4 ** (h.cell * (range - 1));
  const replay = new Replay(h, range, p);
  let rank = 0;
  for (const [i, { output, used }] of sweeps.entries()) {
    let uses = 0;
    const begin = 4 ** (h.cell * (output - 1));
    const end = 4 ** (h.cell * output);
    for (let from = begin; from < end; from += CHUNK) {
      uses += replay.sweep(output, from, Math.min(end, from + CHUNK));
      yield (0.9 * (i + (from - begin) / (end - begin))) / sweeps.length;
    }
    if (uses !== used) throw new Rejected(`sweep ${i + 1} uses ${uses} equations, not ${used}`);
    rank += uses;
  }
  if (candidates - rank - pivots.length !== charges.length)
    throw new Rejected(
      `the bounds do not meet: ${candidates} candidates, ${rank} equations used, ${pivots.length} pivots, ${charges.length} charges`,
    );
  const classes = new Map<number, number>();
  const rows = pivots.map(({ word, cells }) => replay.row(word, cells, classes));
  const core = independent(rows, classes.size, p);
  for (let done = 0, step = core.next(); ; step = core.next(), done++) {
    if (step.done) {
      if (!step.value) throw new Rejected(`pivot ${done + 1} depends on the equations before it`);
      return words;
    }
    yield 0.9 + (0.1 * done) / rows.length;
  }
}

/** Model, claim and charges of section 2, in form; what they say is for `checkClaim`, once the evidence has been read too. */
export function readClaim(parts: Parts, widest: number, longest: number) {
  const model = fields(parts.model, ['cell', 'range', 'terms'], 'model');
  const cell = natural(model.cell, 'cell', 1, widest);
  const reach = natural(model.range, 'range of the model', 1, MAX_RANGE);
  const terms = readTerms(model.terms, cell, reach, 'model');
  if (terms.length === 0) throw new Malformed('the model has no term');

  const claim = fields(parts.claim, ['range', 'dimensions', 'rings', 'statement', 'assumes'], 'claim');
  const range = natural(claim.range, 'range of the claim', 1, longest);
  const dimensions = list(claim.dimensions, 'dimensions', MAX_ENTRIES).map((d) =>
    natural(d, 'a dimension', 0, MAX_CHARGES),
  );
  const rings = natural(claim.rings, 'rings', 1, 2 ** 16);
  const words = string(claim.statement, 'statement');
  const assumes = list(claim.assumes, 'assumes', MAX_ENTRIES).map((a) => string(a, 'an assumption'));

  const charges = list(parts.charges, 'charges', MAX_CHARGES).map((value, i): Charge => {
    const name = `charge ${i + 1}`;
    const charge = fields(value, ['range', 'terms'], name);
    const own = natural(charge.range, `range of ${name}`, 1, range);
    return { range: own, terms: readTerms(charge.terms, cell, own, name) };
  });

  return { cell, reach, terms, range, dimensions, rings, words, assumes, charges };
}

/** C1 to C4. */
export function checkClaim(form: ReturnType<typeof readClaim>): void {
  const { cell, reach, terms, range, dimensions, rings, words, assumes, charges } = form;
  if (terms.reduce((most, t) => Math.max(most, t.range), 0) !== reach)
    throw new Rejected('the range of the model is not that of its terms');
  if (rings !== 2 * range + 2 * reach - 3)
    throw new Rejected('the smallest ring is not 2·range + 2·(range of the model) − 3 cells');
  if (dimensions.length !== range) throw new Rejected('not one dimension for every range of the claim');
  if (charges.some((charge, i) => i > 0 && charge.range < charges[i - 1]!.range))
    throw new Rejected('the charges are not sorted by range');
  for (let j = 1; j <= range; j++)
    if (dimensions[j - 1] !== charges.filter((q) => q.range <= j).length)
      throw new Rejected(`the dimension up to range ${j} is not the number of listed charges`);
  if (words !== statement({ cell, range, dimensions, rings }))
    throw new Rejected('the statement does not say what the numbers say');
  if (assumes.join('\n') !== ASSUMES.join('\n'))
    throw new Rejected('the assumptions are not those of this kind');
}

/** All of section 2; also that the modulus is prime, and the limits. */
function read(parts: Parts) {
  const form = readClaim(parts, MAX_CELL, MAX_RANGE);
  const { cell, reach, terms, range, charges, words } = form;
  const evidence = fields(parts.evidence, ['prime', 'sweeps', 'pivots'], 'evidence');
  const p = natural(evidence.prime, 'prime', 3, PRIME_BOUND - 1);
  const sweeps = list(evidence.sweeps, 'sweeps', MAX_SWEEPS).map((value) => {
    const pair = list(value, 'a sweep', 2);
    if (pair.length !== 2) throw new Malformed('a sweep is not a pair');
    return {
      output: natural(pair[0]!, 'range of a sweep', 1, range + reach - 1),
      used: natural(pair[1]!, 'uses of a sweep', 1, 2 ** 32),
    };
  });
  const pivots = list(evidence.pivots, 'pivots', MAX_ROWS).map((value) => {
    const text = string(value, 'a pivot');
    return { word: readWord(text, cell, range + reach - 1, 'pivots'), cells: text.length / cell };
  });

  checkClaim(form);
  if (!isPrime(p)) throw new Rejected('the modulus of the evidence is not a prime');
  if (cell * range > MAX_SPINS)
    throw new Rejected('the range of the claim exceeds the limits of this checker');
  if (sweeps.reduce((visits, { output }) => visits + 4 ** (cell * output), 0) > MAX_VISITS)
    throw new Rejected('the sweeps exceed the limits of this checker');
  return {
    h: new Hamiltonian(cell, reach, terms, range),
    range,
    charges,
    p,
    sweeps,
    pivots,
    statement: words,
  };
}

/** Outputs between two reports of progress. */
const CHUNK = 2 ** 16;

/** L1: is [H, Q] = 0, exactly? Every coefficient of i[H, Q]/2 is summed in integers. */
function commutes(h: Hamiltonian, { terms }: Charge, longest: number): boolean {
  const denominator = terms.reduce((d, t) => lcm(d, t.coefficient.denominator), 1n);
  const sums = new Map<number, bigint>();
  for (const { word, range: cells, coefficient: c } of terms) {
    const factor = (c.numerator * denominator) / c.denominator;
    const count = h.visit(word, cells, longest + h.range);
    for (let i = 0; i < count; i++) {
      const output = h.neighbours[i]!;
      sums.set(output, (sums.get(output) ?? 0n) + factor * h.values[h.coefficients[i]!]!);
    }
  }
  for (const sum of sums.values()) if (sum !== 0n) return false;
  return true;
}

/** L3: for every j, the range-j parts of the charges of range j are independent; modulo p implies over the rationals. */
export function* leadingPartsIndependent(charges: readonly Charge[], p: number): Generator<number, void> {
  const columns = new Map<number, number>();
  const rows = charges.map(({ range, terms }): Row => {
    const denominator = terms.reduce((d, t) => lcm(d, t.coefficient.denominator), 1n);
    const leading = terms
      .filter((t) => t.range === range)
      .map(
        (t) =>
          [t.word, residue((t.coefficient.numerator * denominator) / t.coefficient.denominator, p)] as const,
      )
      .filter(([, value]) => value !== 0);
    return {
      columns: leading.map(([word]) => indexOf(columns, word)),
      values: leading.map(([, value]) => value),
    };
  });
  // Strings of different ranges are different columns, so one elimination serves all j.
  const steps = independent(rows, columns.size, p);
  for (let done = 0, step = steps.next(); ; step = steps.next(), done++) {
    if (step.done) {
      if (!step.value)
        throw new Rejected(
          `charge ${done + 1}: its part of full range depends, modulo the prime, on those before it`,
        );
      return;
    }
    yield 0;
  }
}

function indexOf(indices: Map<number, number>, key: number): number {
  const known = indices.get(key);
  if (known !== undefined) return known;
  indices.set(key, indices.size);
  return indices.size - 1;
}

/** The state of section 4, "Upper bound", what the used equations say: every candidate is zero, or a factor times another one of its class. */
class Replay {
  /** By packed string: 0 for the representative of a class, `#zero` for what is zero, else another member of the class … */
  readonly #link: Uint32Array;
  /** … and x = weight · x_link. */
  readonly #weight: Uint32Array;
  /** "Identity in the first cell" is no candidate: the mark of zero is never a link. */
  readonly #zero: number;
  readonly #size: number;
  readonly #coefficients: Float64Array;
  /** The row reduced last: so many representatives of classes, and their factors, none zero. */
  #count = 0;
  readonly #classes: Uint32Array;
  readonly #factors: Uint32Array;
  #factor = 1;

  constructor(
    readonly h: Hamiltonian,
    readonly range: number,
    readonly p: number,
  ) {
    this.#size = 4 ** (h.cell * range);
    this.#zero = 2 ** h.cellBits;
    this.#link = new Uint32Array(this.#size);
    this.#weight = new Uint32Array(this.#size);
    this.#coefficients = Float64Array.from(h.values, (value) => residue(value, p));
    this.#classes = new Uint32Array(h.neighbours.length);
    this.#factors = new Uint32Array(h.neighbours.length);
  }

  /** U2, for the outputs of `cells` cells from … to − 1, rising. @returns how many equations were used */
  sweep(cells: number, from: number, to: number): number {
    const { p } = this;
    const link = this.#link;
    const cellMask = this.#zero - 1;
    let uses = 0;
    for (let output = from; output < to; output++) {
      if ((output & cellMask) === 0) continue;
      this.#reduce(output, cells);
      if (this.#count === 0 || this.#count > 2) continue;
      const a = this.#classes[0]!;
      if (this.#count === 1) link[a] = this.#zero;
      else {
        // f·x_a + g·x_b = 0, so x_a = −g/f · x_b.
        link[a] = this.#classes[1]!;
        this.#weight[a] = multiply(p - this.#factors[1]!, inverse(this.#factors[0]!, p), p);
      }
      uses++;
    }
    return uses;
  }

  /** U4: the row of an output in terms of the classes that are left, numbered by `classes`. */
  row(output: number, cells: number, classes: Map<number, number>): Row {
    this.#reduce(output, cells);
    const own = Array.from(this.#classes.subarray(0, this.#count));
    return {
      columns: own.map((c) => indexOf(classes, c)),
      values: Array.from(this.#factors.subarray(0, this.#count)),
    };
  }

  /** U1: the row of an output, what is known being used. */
  #reduce(output: number, cells: number): void {
    const { h, p } = this;
    const classes = this.#classes;
    const factors = this.#factors;
    const link = this.#link;
    const zero = this.#zero;
    const size = this.#size;
    const { neighbours, coefficients } = h;
    let count = 0;
    const all = h.visit(output, cells, this.range);
    for (let i = 0; i < all; i++) {
      const parent = neighbours[i]!;
      if (parent >= size || link[parent] === zero) continue;
      const root = this.#find(parent);
      if (root === zero) continue;
      const term = multiply(this.#coefficients[coefficients[i]!]!, this.#factor, p);
      let at = 0;
      while (at < count && classes[at] !== root) at++;
      if (at === count) {
        classes[count] = root;
        factors[count++] = term;
      } else factors[at] = (factors[at]! + term) % p;
    }
    let kept = 0;
    for (let i = 0; i < count; i++)
      if (factors[i] !== 0) {
        classes[kept] = classes[i]!;
        factors[kept++] = factors[i]!;
      }
    this.#count = kept;
  }

  /** The representative of a string's class, `#zero` for zero; x_string = `#factor` · x_representative. Halves the path on its way. */
  #find(string: number): number {
    const link = this.#link;
    const weight = this.#weight;
    const zero = this.#zero;
    const { p } = this;
    let factor = 1;
    for (let at = string; ; ) {
      const next = link[at]!;
      if (next === 0) {
        this.#factor = factor;
        return at;
      }
      if (next === zero) {
        link[string] = zero;
        return zero;
      }
      const beyond = link[next]!;
      if (beyond === zero) link[at] = zero;
      else if (beyond !== 0) {
        weight[at] = multiply(weight[at]!, weight[next]!, p);
        link[at] = beyond;
      }
      if (link[at] === zero) continue;
      factor = multiply(factor, weight[at]!, p);
      at = link[at]!;
    }
  }
}
