/**
 * Certificates of the kind `every-range`: an upper bound on the charges of range exactly k, for every k ≥ 3 at once. Numbers such as
 * V2 are those of docs/certificate.md, "Kind `every-range`"; docs/theory.md, sections 0 to 3, proves the theorem behind them.
 *
 * A density is a map from packed strings to integers; all commutators are i[·,·]/2.
 */
import { lcm, phase, readTerms, readWord, type Term } from './chain.ts';
import { fields, list, Malformed, natural, Rejected, string, type Value } from './document.ts';
import type { Parts } from './exhaustive.ts';
import { independent, isPrime, PRIME_BOUND, type Row, residue } from './modular.ts';

export const EVERY_RANGE = 'every-range';

/** Limits: strings on four cells of one or two spins; top parts, functionals and minors; steps of t that are looked at one by one. */
const MAX_CELL = 2;
export const MAX_PARTS = 6;
const MAX_FUNCTIONALS = 64;
const MAX_MINORS = 256;
const MAX_STEPS = 100_000n;

const ASSUMES = (from: number) => [
  'The Hamiltonian is the sum of all translates, by whole cells, of the listed terms; every cell holds the same number of spins 1/2.',
  'Counted are sums of all translates, by whole cells, of one combination of Pauli strings; the identity is left out.',
  `Ranges 1 ${from === 3 ? 'and' : 'to'} ${from - 1} are no part of the claim.`,
  'Nothing is said about quasilocal, non-local or staggered conserved quantities.',
];

function statement(cell: number, atMost: number, from: number): string {
  const chain = `On the infinite chain of cells of ${cell} spin${cell === 1 ? '' : 's'} 1/2, for every k of ${from} or more`;
  return atMost === 0
    ? `${chain}, there is no translation-invariant conserved quantity of range exactly k cells.`
    : `${chain}, the translation-invariant conserved quantities of range at most k cells exceed those of range at most k - 1 by at most ${atMost} dimension${atMost === 1 ? '' : 's'}.`;
}

export type Density = Map<number, bigint>;

/** What both kinds share. */
export interface EveryRangeClaim {
  readonly cell: number;
  readonly chain: Growth;
  readonly atMost: number;
  /** The statement, which is the one that goes with the model and the bound. */
  readonly words: string;
}

/** @param from first range of the claim, which the kind decides */
export function readEveryRange(parts: Parts, from = 3): EveryRangeClaim {
  const model = fields(parts.model, ['cell', 'range', 'terms'], 'model');
  const cell = natural(model.cell, 'cell', 1, MAX_CELL);
  if (natural(model.range, 'range of the model', 1, 16) !== 2)
    throw new Rejected('the interaction does not have range 2');
  const terms = readTerms(model.terms, cell, 2, 'model');
  const claim = fields(parts.claim, ['from', 'atMost', 'statement', 'assumes'], 'claim');
  if (natural(claim.from, 'from', 1, 99) !== from)
    throw new Rejected(`the bound starts at another range than ${from}`);
  const atMost = natural(claim.atMost, 'atMost', 0, 2 * MAX_PARTS);
  const words = string(claim.statement, 'statement');
  if (words !== statement(cell, atMost, from))
    throw new Rejected('the statement is not the one that is proved');
  const wanted = ASSUMES(from);
  const assumes = list(claim.assumes, 'assumes', wanted.length);
  if (assumes.length !== wanted.length || assumes.some((text, i) => text !== wanted[i]))
    throw new Rejected('the assumptions are not those of the claim');
  if (list(parts.charges, 'charges', 1).length > 0)
    throw new Malformed('a charge, where none is part of the claim');
  return { cell, chain: new Growth(cell, terms), atMost, words };
}

export function readPrime(value: Value): number {
  const p = natural(value, 'prime', 3, PRIME_BOUND - 1);
  if (!isPrime(p)) throw new Rejected('the modulus is not a prime');
  return p;
}

/** The prime and the top parts of the evidence, with injectivity and completeness: V1 and V2. */
export function* provenTopParts(
  { cell, chain }: EveryRangeClaim,
  evidence: { readonly prime: Value; readonly free: Value; readonly topParts: Value },
): Generator<number, { readonly p: number; readonly topParts: readonly Density[] }> {
  const p = readPrime(evidence.prime);
  const topParts = list(evidence.topParts, 'topParts', MAX_PARTS).map((v) =>
    density(v, cell, 2, 'a top part'),
  );
  const free = list(evidence.free, 'free', MAX_PARTS).map((v) =>
    readWord(string(v, 'free'), cell, 2, 'free'),
  );
  yield* injective(chain, p);
  yield* completeTopParts(chain, topParts, free, p);
  return { p, topParts };
}

export function* checkEveryRange(parts: Parts): Generator<number, string> {
  const claim = readEveryRange(parts);
  const { cell, chain, atMost, words } = claim;
  const evidence = fields(parts.evidence, ['prime', 'free', 'topParts', 'functionals', 'minors'], 'evidence');
  const { topParts: parts2 } = yield* provenTopParts(claim, evidence);
  const functionals = list(evidence.functionals, 'functionals', MAX_FUNCTIONALS).map((v) =>
    density(v, cell, 4, 'a functional'),
  );
  // P1: every functional vanishes on (R − A) O_3.
  for (const string of chain.strings(3)) {
    const image = chain.growth(new Map([[string, 1n]]), 3);
    if (functionals.some((f) => pairing(f, image) !== 0n))
      throw new Rejected('a functional does not vanish on the image of growth');
  }
  yield 0.9;
  // P2: the pencil, rows functionals, columns top parts; entries α + t β.
  const inner = parts2.map((f) => chain.inner(f));
  const pencil = functionals.map((f) =>
    inner.map(({ alpha, beta }) => [pairing(f, alpha), pairing(f, beta)] as const),
  );
  minorsDecide(evidence.minors, pencil, parts2.length - atMost);
  return words;
}

export function density(value: Value, cell: number, cells: number, what: string): Density {
  const terms = readTerms(value, cell, cells, what);
  if (terms.length === 0) throw new Malformed(`${what} is empty`);
  if (terms.some((t) => t.range !== cells))
    throw new Rejected(`${what} has a string of another range than ${cells}`);
  return integers(terms);
}

/** Times the common denominator. */
export function integers(terms: readonly Term[]): Density {
  const common = terms.reduce((d, t) => lcm(d, t.coefficient.denominator), 1n);
  return new Map(terms.map((t) => [t.word, (t.coefficient.numerator * common) / t.coefficient.denominator]));
}

/** Growth by whole cells, or by half steps: what the pencil is made of. */
export interface Steps {
  /** Strings of exactly this length. */
  strings(length: number): number[];
  /** (R − A) q. */
  growth(q: Density, length: number): Density;
  /** α and β of a top part. */
  inner(f: Density): { alpha: Density; beta: Density };
}

/** h on two cells, w on one, and growth by them. */
export class Growth implements Steps {
  readonly bits: number;
  readonly letters: number;
  readonly h: Density = new Map();
  readonly w: Density = new Map();

  constructor(cell: number, terms: readonly Term[]) {
    this.bits = 2 * cell;
    this.letters = 4 ** cell;
    const all = integers(terms);
    for (const t of terms) (t.range === 2 ? this.h : this.w).set(t.word, all.get(t.word)!);
  }

  /** Strings of range exactly so many cells. */
  strings(cells: number): number[] {
    const found: number[] = [];
    const end = this.letters ** cells;
    for (let s = 1; s < end; s++) if (s % this.letters !== 0 && s >= end / this.letters) found.push(s);
    return found;
  }

  at(q: Density, cell: number): Density {
    return new Map([...q].map(([s, c]) => [s * this.letters ** cell, c]));
  }

  /** R q = [q, h] on the last of so many cells and a new one. */
  right(q: Density, cells: number): Density {
    return bracket(q, this.at(this.h, cells - 1));
  }

  /** A q = [h, q] on a new first cell and the first of q. */
  left(q: Density): Density {
    return bracket(this.h, this.at(q, 1));
  }

  growth(q: Density, cells: number): Density {
    return sum(this.right(q, cells), this.left(q), -1n);
  }

  /** α = R(g + e_L + e_R) and β = m + R g of a top part. */
  inner(f: Density): { alpha: Density; beta: Density } {
    const f3 = this.right(f, 2);
    const m = bracket(this.left(f3), this.at(this.h, 1));
    const g = bracket(f3, this.at(this.w, 1));
    const keep = (q: Density, kept: (s: number) => boolean) => new Map([...q].filter(([s]) => kept(s)));
    const eLeft = keep(bracket(f3, sum(this.h, this.w)), (s) => s % this.letters !== 0);
    const eRight = keep(
      bracket(f3, sum(this.at(this.h, 1), this.at(this.w, 2))),
      (s) => s >= this.letters ** 2,
    );
    return { alpha: this.right(sum(g, sum(eLeft, eRight)), 3), beta: sum(m, this.right(g, 3)) };
  }
}

/** i[x, y]/2. */
function bracket(x: Density, y: Density): Density {
  const result: Density = new Map();
  for (const [a, c] of x)
    for (const [b, d] of y) {
      const e = phase(a, b);
      if (e % 2 === 0) continue;
      const product = (a ^ b) >>> 0;
      result.set(product, (result.get(product) ?? 0n) + (e === 1 ? -c * d : c * d));
    }
  return result;
}

export function sum(x: Density, y: Density, factor = 1n): Density {
  const result = new Map(x);
  for (const [s, c] of y) result.set(s, (result.get(s) ?? 0n) + factor * c);
  return result;
}

function pairing(x: Density, y: Density): bigint {
  let total = 0n;
  for (const [s, c] of x) total += c * (y.get(s) ?? 0n);
  return total;
}

/** V1: a ↦ [a⊗1, h] and a ↦ [h, 1⊗a] have full rank modulo p. */
export function* injective(chain: Growth, p: number): Generator<number> {
  for (const cell of [0, 1]) {
    const images = Array.from({ length: chain.letters - 1 }, (_, a) =>
      bracket(chain.at(new Map([[a + 1, 1n]]), cell), chain.h),
    );
    if (!(yield* fullRank(images, p))) throw new Rejected('the interaction is not injective');
  }
}

/** V2: the top parts are a basis of ker (R − A) on O_2, or on the densities of another length. */
export function* completeTopParts(
  chain: Steps,
  topParts: readonly Density[],
  free: readonly number[],
  p: number,
  length = 2,
): Generator<number> {
  if (topParts.length !== free.length) throw new Rejected('not as many free strings as top parts');
  topParts.forEach((f, i) => {
    if ([...chain.growth(f, length).values()].some((c) => c !== 0n))
      throw new Rejected('a top part is not in the kernel of growth');
    if (free.some((s, j) => f.has(s) !== (i === j)))
      throw new Rejected('a free string is not in its top part alone');
  });
  const rest = chain.strings(length).filter((s) => !free.includes(s));
  const images = rest.map((s) => chain.growth(new Map([[s, 1n]]), length));
  if (!(yield* fullRank(images, p))) throw new Rejected('there are more top parts than the listed ones');
}

function* fullRank(images: readonly Density[], p: number): Generator<number, boolean> {
  const place = new Map<number, number>();
  const rows: Row[] = images.map((image) => {
    const entries = [...image].map(([s, c]) => [s, residue(c, p)] as const).filter(([, c]) => c !== 0);
    for (const [s] of entries) if (!place.has(s)) place.set(s, place.size);
    return { columns: entries.map(([s]) => place.get(s)!), values: entries.map(([, c]) => c) };
  });
  if (rows.some((row) => row.columns.length === 0)) return false;
  const steps = independent(rows, place.size, p);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
    yield 0.5;
  }
}

type Entry = readonly [constant: bigint, linear: bigint];

/**
 * P3: for every t ≥ 0 one of the listed minors of the size does not vanish. The first one is not the zero polynomial, so it has no
 * root beyond Cauchy's bound; up to there every t is looked at.
 */
function minorsDecide(value: Value, pencil: readonly (readonly Entry[])[], size: number): void {
  const columns = pencil[0]?.length ?? 0;
  const minors = list(value, 'minors', MAX_MINORS).map((entry) => {
    const [rows, chosen] = list(entry, 'a minor', 2).map((v, side) =>
      list(v, 'a minor', MAX_PARTS).map((i) =>
        natural(i, 'an index', 0, (side === 0 ? pencil.length : columns) - 1),
      ),
    );
    if (rows?.length !== size || chosen?.length !== size) throw new Rejected('a minor of another size');
    return determinant(rows.map((r) => chosen.map((c) => pencil[r]![c]!)));
  });
  if (size <= 0) return;
  const [first] = minors;
  const lead = first?.findLastIndex((c) => c !== 0n) ?? -1;
  if (first === undefined || lead < 0) throw new Rejected('the first minor vanishes for all ranges');
  let largest = 0n;
  for (const c of first) if ((c < 0n ? -c : c) > largest) largest = c < 0n ? -c : c;
  const divisor = first[lead]! < 0n ? -first[lead]! : first[lead]!;
  const bound = largest / divisor + 2n;
  if (bound > MAX_STEPS)
    throw new Rejected('the roots of the first minor are out of the limits of this checker');
  for (let t = 0n; t <= bound; t++)
    if (minors.every((m) => m.reduceRight((s, c) => s * t + c, 0n) === 0n))
      throw new Rejected(`all minors vanish at range ${t + 3n}`);
}

/** Of a matrix of linear polynomials, by expansion along the first row; coefficients by rising power of t. */
function determinant(matrix: readonly (readonly Entry[])[]): bigint[] {
  if (matrix.length === 0) return [1n];
  const result: bigint[] = new Array(matrix.length + 1).fill(0n);
  matrix[0]!.forEach(([a, b], c) => {
    const minor = determinant(matrix.slice(1).map((row) => row.filter((_, j) => j !== c)));
    const sign = c % 2 === 0 ? 1n : -1n;
    minor.forEach((m, power) => {
      result[power]! += sign * a * m;
      result[power + 1]! += sign * b * m;
    });
  });
  return result;
}
