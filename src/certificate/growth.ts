/**
 * The bound on the number of charges that a certificate of the kind `growth` rests on: docs/theory.md, sections 1 to 3, modulo a
 * prime. Known before the certificate is written, so that none is written whose bounds do not meet.
 *
 * Cost: an elimination over the strings of three cells, milliseconds for one spin a cell, seconds for two; the range hardly matters.
 */
import { Operator } from '../algebra/operator.ts';
import { eliminate } from '../linear/elimination.ts';
import type { Field } from '../linear/field.ts';
import type { SparseVector } from '../linear/sparse.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';

/** Limits of the checker: cell and string, with a cell at either end, in spins. */
const MAX_CELL = 2;
const MAX_SPINS = 26;

export function isWithinGrowth({ chain, range: reach }: Hamiltonian, range: number): boolean {
  return reach === 2 && chain.cell <= MAX_CELL && chain.cell * (range + 2) <= MAX_SPINS;
}

/** At most so many charges of range ≤ k, where the interaction is injective modulo p. Yields the share of the work done. */
export function* growthBound(h: Hamiltonian, k: number, field: Field): Generator<number, number> {
  const { chain, density } = h;
  const bits = BigInt(2 * chain.cell);
  const letters = 4 ** chain.cell;
  const whole = Operator.fromIntegers(density.numerators);
  const bond = whole.filter((word) => chain.range(word) === 2);
  const field1 = whole.filter((word) => chain.range(word) === 1);
  const at = (q: Operator, cell: number) => q.mapWords((word) => word << (bits * BigInt(cell)));
  const right = (q: Operator, cells: number) => q.bracket(at(bond, cells - 1));
  const left = (q: Operator) => bond.bracket(at(q, 1));
  const strings = (cells: number) => {
    const found: Operator[] = [];
    for (let s = letters ** (cells - 1); s < letters ** cells; s++)
      if (s % letters !== 0) found.push(Operator.fromIntegers([[BigInt(s), 1n]]));
    return found;
  };

  // Ranges 1 and 2: all their equations.
  const short = [...strings(1), ...(k > 1 ? strings(2) : [])];
  const images = short.map((q) => chain.bracket(whole, q));
  let most = short.length - eliminate(rowsOf(images, field), images.length, field).rank;
  if (k < 3) return most;
  yield 0.1;

  const basis = strings(2);
  const grown = basis.map((q) => right(q, 2).minus(left(q)));
  const tops = eliminate(rowsOf(grown, field), basis.length, field)
    .nullSpace()
    .map(({ columns, values }) =>
      columns.reduce((sum, c, i) => sum.plus(basis[c]!.times(BigInt(values[i]!))), Operator.fromIntegers([])),
    );
  const inner = tops.map((f) => {
    const f3 = right(f, 2);
    const m = left(f3).bracket(at(bond, 1));
    const g = f3.bracket(at(field1, 1));
    const eLeft = f3.bracket(bond.plus(field1)).filter((word) => word % BigInt(letters) !== 0n);
    const eRight = f3.bracket(at(bond, 1).plus(at(field1, 2))).filter((word) => word >= BigInt(letters ** 2));
    return { alpha: right(g.plus(eLeft).plus(eRight), 3), beta: m.plus(right(g, 3)) };
  });
  yield 0.2;
  // Relations Σ a_i α_i + b_i β_i ∈ (R − A) O_3, in the unknowns (image, a, b): those free of the image leave at t: a = x, b = t x.
  const image: Operator[] = [];
  for (const q of strings(3)) {
    image.push(right(q, 3).minus(left(q)));
    if (image.length % 256 === 0) yield 0.3;
  }
  const all = [...image, ...inner.map(({ alpha }) => alpha), ...inner.map(({ beta }) => beta)];
  const { pivots } = eliminate(rowsOf(all, field), all.length, field);
  yield 0.9;
  // Rows whose pivot lies beyond the image tie a and b alone.
  const ties = [...pivots].filter(([pivot]) => pivot >= image.length).map(([, row]) => row);
  const r = tops.length;
  for (let t = 0; t <= k - 3; t++) {
    const factor = t % field.p;
    const rows = ties.map((row): SparseVector => {
      const value = new Array<number>(r).fill(0);
      row.columns.forEach((c, i) => {
        const j = c - image.length;
        const term = j < r ? row.values[i]! : field.multiply(factor, row.values[i]!);
        value[j % r] = (value[j % r]! + term) % field.p;
      });
      const columns = value.flatMap((v, j) => (v === 0 ? [] : [j]));
      return { columns, values: columns.map((j) => value[j]!) };
    });
    most += r - eliminate(rows, r, field).rank;
  }
  return most;
}

/** The matrix with these columns, row by row, modulo p. */
function rowsOf(columns: readonly Operator[], field: Field): SparseVector[] {
  const rows = new Map<bigint, { columns: number[]; values: number[] }>();
  for (const [c, q] of columns.entries())
    for (const [word, value] of q.numerators) {
      const residue = field.residue(value);
      if (residue === 0) continue;
      let row = rows.get(word);
      if (row === undefined) {
        row = { columns: [], values: [] };
        rows.set(word, row);
      }
      row.columns.push(c);
      row.values.push(residue);
    }
  return [...rows.values()];
}
