/**
 * The elimination on one case: pivots are coefficients known to be non-zero on all of it.
 *
 * Rows of one or two classes go into a weighted forest whose weights are localised coefficients; a longer row expresses a class by
 * others. Where every row that is left has only coefficients that may vanish somewhere, one of them splits the case: the parts where
 * a factor of it is zero are handed back, the run goes on where none is. What is found is exact: an upper bound on the dimension from
 * pivots that vanish nowhere on the case, and candidates for charges whose re-multiplication the caller checks.
 *
 * Rows whose value at the shadow point is zero are left out. That can only make the upper bound too large, never too small, and then
 * the re-multiplication fails.
 */
import type { Polynomial } from '../../algebra/polynomial.ts';
import { totalDegree } from '../../algebra/polynomial-division.ts';
import { VerificationError } from '../../errors.ts';
import type { Field } from '../../linear/field.ts';
import { type Case, exclude, impose, reduceOn } from './case.ts';
import type { FamilyEquations } from './equations.ts';
import { type Coefficient, Localisation } from './localised.ts';

/** A row in classes that may be non-zero. */
type Row = Map<number, Coefficient>;

/** Rows of so many classes are looked at, in turn: the short ones first. */
const LENGTHS = [1, 2, 3, 4, 6, 10, Number.POSITIVE_INFINITY];

/** Rows looked at closely when a split is chosen. */
const SPLIT_CANDIDATES = 16;

export interface NullSpace {
  /** The part of the case on which this holds. */
  readonly where: Case;
  /** One vector a charge, by range of the charge, falling: columns and polynomial entries. */
  readonly vectors: readonly {
    readonly range: number;
    readonly entries: readonly (readonly [number, Polynomial])[];
  }[];
}

/** The shadow point turned out not to lie on the part of the case at hand: run again from `where` with another. */
export class UnluckyPoint extends Error {
  constructor(readonly where: Case) {
    super('unlucky point');
  }
}

export class CaseElimination {
  where: Case;
  readonly #ring: Localisation;
  #coefficients: readonly Coefficient[];
  /** −1 a root, −2 zero, else the class it is a multiple of. */
  readonly #parent: Int32Array;
  readonly #weight: (Coefficient | undefined)[];
  /** Largest range of the strings in a class. */
  readonly #top: Uint8Array;
  readonly #expression = new Map<number, [number, Coefficient][]>();

  /**
   * @param terms the coefficient of each term on the case, in the free parameters, all times one common non-zero factor
   * @param spawn takes the parts of the case that a split leaves to others
   */
  constructor(
    readonly equations: FamilyEquations,
    terms: readonly Polynomial[],
    where: Case,
    field: Field,
    point: readonly number[],
    readonly spawn: (cases: readonly Case[]) => void,
  ) {
    this.where = where;
    this.#ring = new Localisation(where, field, point);
    this.#coefficients = terms.map((p) => this.#ring.of(p));
    const columns = equations.strings.length;
    this.#parent = new Int32Array(columns).fill(-1);
    this.#weight = new Array<Coefficient | undefined>(columns);
    this.#top = equations.rangeOf.slice();
  }

  /** Runs to the end of the case. Yields now and then, so that the caller can look at the clock. */
  *run(): Generator<void, NullSpace> {
    let open = Array.from({ length: this.equations.rows }, (_, row) => row);
    /** The value of a stuck row when it was last looked at, and the row. */
    const stuck = new Map<number, { print: string; row: Row }>();
    let steps = 0;
    for (;;) {
      for (let length = 0; length < LENGTHS.length; ) {
        const left: number[] = [];
        let progress = false;
        for (const index of open) {
          if ((++steps & 0x3f) === 0) yield;
          const value = this.#valueOf(index);
          if (value.size === 0) continue;
          if (value.size > LENGTHS[length]!) {
            left.push(index);
            continue;
          }
          const print = printOf(value);
          if (stuck.get(index)?.print === print) {
            left.push(index);
            continue;
          }
          const row = this.#rowOf(index);
          const pivot = this.#pivotOf(row);
          if (pivot === undefined) {
            if (row.size > 0) {
              stuck.set(index, { print, row });
              left.push(index);
            }
            continue;
          }
          this.#use(row, pivot);
          progress = true;
        }
        open = left;
        length = progress ? 0 : length + 1;
      }
      if (open.length === 0) break;
      this.#split(open.map((index) => stuck.get(index)!.row));
      // New units: every stuck row deserves another look.
      stuck.clear();
    }
    return this.#nullSpace();
  }

  /** The class of a column and its weight; undefined for zero. Classes may be expressed by others. */
  #find(column: number): { root: number; weight: Coefficient } | undefined {
    const parent = this.#parent;
    let root = column;
    while (parent[root]! >= 0) root = parent[root]!;
    if (parent[root] === -2) {
      for (let c = column; parent[c]! >= 0; ) {
        const next = parent[c]!;
        parent[c] = -2;
        c = next;
      }
      return undefined;
    }
    if (root === column) return { root, weight: this.#ring.one };
    if (parent[column] !== root) {
      const above = this.#find(parent[column]!)!;
      this.#weight[column] = this.#ring.times(this.#weight[column]!, above.weight);
      parent[column] = root;
    }
    return { root, weight: this.#weight[column]! };
  }

  /** An expressed class in classes that are not: brought up to date when anything in it has been settled since. */
  #expressionOf(root: number): readonly [number, Coefficient][] | undefined {
    const terms = this.#expression.get(root);
    if (terms === undefined) return undefined;
    if (terms.every(([c]) => this.#parent[c] === -1 && !this.#expression.has(c))) return terms;
    const parts = new Map<number, Coefficient[]>();
    for (const [c, w] of terms) this.#collect(parts, c, w);
    const fresh = [...this.#sums(parts)];
    this.#expression.set(root, fresh);
    return fresh;
  }

  /** Adds coefficient × column to a row that is being gathered. */
  #collect(parts: Map<number, Coefficient[]>, column: number, coefficient: Coefficient): void {
    const found = this.#find(column);
    if (found === undefined) return;
    const c = found.weight === this.#ring.one ? coefficient : this.#ring.times(coefficient, found.weight);
    const expression = this.#expressionOf(found.root);
    const put = (root: number, value: Coefficient) => {
      const list = parts.get(root);
      if (list === undefined) parts.set(root, [value]);
      else list.push(value);
    };
    if (expression === undefined) put(found.root, c);
    else for (const [root, w] of expression) put(root, this.#ring.times(c, w));
  }

  #sums(parts: Map<number, Coefficient[]>): Row {
    const row: Row = new Map();
    for (const [root, list] of parts) {
      const sum = this.#ring.sum(list);
      if (!sum.numerator.isZero()) row.set(root, sum);
    }
    return row;
  }

  #rowOf(index: number): Row {
    const { start, column, term } = this.equations;
    const parts = new Map<number, Coefficient[]>();
    for (let i = start[index]!; i < start[index + 1]!; i++) {
      const c = this.#coefficients[Math.abs(term[i]!) - 1]!;
      if (c.numerator.isZero()) continue;
      this.#collect(parts, column[i]!, term[i]! > 0 ? c : this.#ring.negative(c));
    }
    return this.#sums(parts);
  }

  /** The row at the shadow point. */
  #valueOf(index: number): Map<number, number> {
    const { start, column, term } = this.equations;
    const { p, multiply } = this.#ring.field;
    const sum = new Map<number, number>();
    const put = (root: number, value: number) => {
      const total = ((sum.get(root) ?? 0) + value) % p;
      if (total === 0) sum.delete(root);
      else sum.set(root, total);
    };
    for (let i = start[index]!; i < start[index + 1]!; i++) {
      const own = this.#coefficients[Math.abs(term[i]!) - 1]!.value;
      if (own === 0) continue;
      const found = this.#find(column[i]!);
      if (found === undefined) continue;
      const c = multiply(term[i]! > 0 ? own : p - own, found.weight.value);
      const expression = this.#expressionOf(found.root);
      if (expression === undefined) put(found.root, c);
      else for (const [root, w] of expression) put(root, multiply(c, w.value));
    }
    return sum;
  }

  /** The class to solve a row for: a unit coefficient, of the shortest strings, then the simplest. */
  #pivotOf(row: Row): number | undefined {
    let best: number | undefined;
    let bestCost = Infinity;
    for (const [root, c] of row) {
      if (!this.#ring.isUnit(c)) continue;
      const cost = this.#top[root]! * 1000 + c.powers.reduce((sum, e) => sum + Math.abs(e), 0);
      if (cost < bestCost) {
        best = root;
        bestCost = cost;
      }
    }
    return best;
  }

  #use(row: Row, pivot: number): void {
    const own = row.get(pivot)!;
    const others = [...row].filter(([root]) => root !== pivot);
    const ratios = others.map(([root, c]) => [root, this.#ring.minusRatio(c, own)] as [number, Coefficient]);
    if (ratios.length === 0) this.#parent[pivot] = -2;
    else if (ratios.length === 1) {
      const [other, weight] = ratios[0]!;
      this.#parent[pivot] = other;
      this.#weight[pivot] = weight;
      this.#top[other] = Math.max(this.#top[other]!, this.#top[pivot]!);
    } else this.#expression.set(pivot, ratios);
  }

  /** Splits the case by the simplest coefficient of the rows: few classes, few and small factors. */
  #split(rows: readonly Row[]): void {
    const options = rows.flatMap((row) =>
      [...row.values()].map((c) => ({
        c,
        size: row.size,
        rough: row.size * 1e6 + totalDegree(c.numerator) * 1e3 + c.numerator.size,
      })),
    );
    options.sort((a, b) => a.rough - b.rough);
    let best: Coefficient | undefined;
    let bestCost = Infinity;
    for (const { c, size } of options.slice(0, SPLIT_CANDIDATES)) {
      const factors = this.#ring.openFactors(c);
      const cost =
        size * 1e6 + factors.reduce((sum, f) => sum + 10 * totalDegree(f) ** 2 + f.size, 0) + factors.length;
      if (cost < bestCost) {
        best = c;
        bestCost = cost;
      }
    }
    this.#assume(best!.numerator);
  }

  /** Goes on where p ≠ 0; the parts where it vanishes go to others. */
  #assume(p: Polynomial): void {
    const reduced = reduceOn(this.where, p);
    const factors = this.#ring.openFactors(this.#ring.of(reduced));
    if (factors.length === 0)
      throw new VerificationError('family: a coefficient was taken for one that may vanish, and cannot');
    const known = this.where.nonZero.length;
    for (const factor of factors) {
      this.spawn(impose(this.where, factor));
      const rest = exclude(this.where, factor);
      if (rest === undefined)
        throw new VerificationError('family: a factor without points where it is non-zero');
      this.where = rest;
    }
    for (const unit of this.where.nonZero.slice(known))
      if (!this.#ring.addUnit(unit)) throw new UnluckyPoint(this.where);
    this.#coefficients = this.#coefficients.map((c) => this.#ring.renewed(c));
    for (const [c, terms] of this.#expression)
      this.#expression.set(
        c,
        terms.map(([root, w]) => [root, this.#ring.renewed(w)]),
      );
    this.#weight.forEach((w, c) => {
      if (w !== undefined) this.#weight[c] = this.#ring.renewed(w);
    });
  }

  /**
   * A basis of what is left, reduced by falling range with pivots that vanish nowhere: so the number of charges of every range is the
   * same on all of the case.
   */
  #nullSpace(): NullSpace {
    const ring = this.#ring;
    const { strings, rangeOf } = this.equations;
    /** One charge a free class. Every class as a combination of charges, sparse, and who holds each charge. */
    const rows = new Map<number, Map<number, Coefficient>>();
    const holders: Set<number>[] = [];
    const chargeOf = new Map<number, number>();
    strings.forEach((_, c) => {
      if (this.#parent[c] !== -1 || this.#expression.has(c)) return;
      chargeOf.set(c, holders.length);
      holders.push(new Set());
    });
    const columns: { column: number; root: number; weight: Coefficient }[] = [];
    const ranges = new Map<number, Set<number>>();
    strings.forEach((_, column) => {
      const found = this.#find(column);
      if (found === undefined) return;
      columns.push({ column, ...found });
      const { root } = found;
      if (!rows.has(root)) {
        const row = (this.#expressionOf(root) ?? [[root, ring.one] as const]).map(
          ([c, w]) => [chargeOf.get(c)!, w] as const,
        );
        for (const [i] of row) holders[i]!.add(root);
        rows.set(root, new Map(row));
        ranges.set(root, new Set());
      }
      ranges.get(root)!.add(rangeOf[column]!);
    });

    const rangeOfCharge = holders.map(() => 0);
    for (let range = this.equations.range; range >= 1; range--) {
      let open = [...rows.keys()].filter((root) => ranges.get(root)!.has(range));
      while (open.length > 0) {
        const left: number[] = [];
        for (const root of open) {
          const rest = [...rows.get(root)!].filter(([i]) => rangeOfCharge[i] === 0);
          if (rest.length === 0) continue;
          const units = rest.filter(([, c]) => ring.isUnit(c));
          if (units.length === 0) {
            left.push(root);
            continue;
          }
          const [i, pivot] = units.reduce((a, b) => (weightOf(b[1]) < weightOf(a[1]) ? b : a));
          rangeOfCharge[i] = range;
          for (const [j, c] of rows.get(root)!) {
            if (j === i) continue;
            // Charge j gains ratio × charge i, so that it is zero where the pivot is.
            const ratio = ring.minusRatio(c, pivot);
            for (const holder of holders[i]!) {
              const row = rows.get(holder)!;
              const sum = ring.sum([row.get(j) ?? ring.zero, ring.times(ratio, row.get(i)!)]);
              if (sum.numerator.isZero()) {
                row.delete(j);
                holders[j]!.delete(holder);
              } else {
                row.set(j, sum);
                holders[j]!.add(holder);
              }
            }
          }
        }
        if (left.length > 0 && left.length === open.length) {
          const options = left.flatMap((root) =>
            [...rows.get(root)!].flatMap(([i, c]) => (rangeOfCharge[i] === 0 ? [c.numerator] : [])),
          );
          this.#assume(options.reduce((a, b) => (b.size < a.size ? b : a)));
          for (const row of rows.values()) for (const [i, c] of row) row.set(i, ring.renewed(c));
        }
        open = left;
      }
    }
    if (rangeOfCharge.includes(0)) throw new VerificationError('family: dependent charges');
    const entriesOf: { column: number; c: Coefficient }[][] = holders.map(() => []);
    for (const { column, root, weight } of columns)
      for (const [i, c] of rows.get(root)!)
        entriesOf[i]!.push({ column, c: ring.renewed(ring.times(weight, c)) });
    const vectors = entriesOf.map((entries, i) => {
      const polynomials = ring.withoutDenominators(entries.map(({ c }) => c));
      return {
        range: rangeOfCharge[i]!,
        entries: entries.map(({ column }, j) => [column, polynomials[j]!] as const),
      };
    });
    vectors.sort((a, b) => b.range - a.range);
    return { where: this.where, vectors };
  }
}

function weightOf(c: Coefficient): number {
  return c.powers.reduce((sum, e) => sum + Math.abs(e), 0);
}

function printOf(value: ReadonlyMap<number, number>): string {
  let print = '';
  for (const [root, v] of value) print += `${root}:${v},`;
  return print;
}
