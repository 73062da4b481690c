/** Eigenvalues and eigenvectors of real symmetric matrices, in floats, and what small rings need of them. Textbook methods, for tests. */
import type { Operator } from '../../src/algebra/operator.ts';
import { textFromWord } from '../../src/algebra/word.ts';
import { onRing } from './vectors.ts';

/** Σ over translates as a dense real matrix, row by row. Entries must be real. */
export function realMatrix(density: Operator, cell: number, cells: number): Float64Array[] {
  const size = 2 ** (cell * cells);
  const matrix = Array.from({ length: size }, () => new Float64Array(size));
  const words = [...density.numerators].map(([word, value]) => [textFromWord(word), value] as const);
  for (const { flip, sign, power, coefficient } of onRing(words, cell, cells)) {
    if ((power & 1) === 1) throw new Error('an imaginary entry');
    for (let state = 0; state < size; state++) {
      let ones = 0;
      for (let rest = state & sign; rest !== 0; rest &= rest - 1) ones++;
      const value = ((power / 2 + ones) & 1) === 1 ? -Number(coefficient) : Number(coefficient);
      matrix[state ^ flip]![state]! += value / Number(density.denominator);
    }
  }
  return matrix;
}

/** Cyclic Jacobi rotations. `vectors[k]` belongs to `values[k]`. */
export function jacobi(symmetric: readonly Float64Array[]): { values: number[]; vectors: Float64Array[] } {
  const n = symmetric.length;
  const a = symmetric.map((row) => row.slice());
  const v = a.map((_, i) => new Float64Array(n).fill(0).map((__, j) => (i === j ? 1 : 0)));
  for (let sweep = 0; sweep < 40; sweep++) {
    let off = 0;
    for (let p = 0; p < n; p++) for (let q = p + 1; q < n; q++) off += a[p]![q]! ** 2;
    if (off < 1e-22 * n) break;
    for (let p = 0; p < n; p++)
      for (let q = p + 1; q < n; q++) {
        const apq = a[p]![q]!;
        if (Math.abs(apq) < 1e-15) continue;
        const theta = (a[q]![q]! - a[p]![p]!) / (2 * apq);
        const t = (theta >= 0 ? 1 : -1) / (Math.abs(theta) + Math.hypot(theta, 1));
        const c = 1 / Math.hypot(t, 1);
        const s = t * c;
        const [rp, rq, vp, vq] = [a[p]!, a[q]!, v[p]!, v[q]!];
        for (let k = 0; k < n; k++) {
          const row = a[k]!;
          const [x, y] = [row[p]!, row[q]!];
          row[p] = c * x - s * y;
          row[q] = s * x + c * y;
        }
        for (let k = 0; k < n; k++) {
          const [x, y] = [rp[k]!, rq[k]!];
          rp[k] = c * x - s * y;
          rq[k] = s * x + c * y;
          const [z, w] = [vp[k]!, vq[k]!];
          vp[k] = c * z - s * w;
          vq[k] = s * z + c * w;
        }
      }
  }
  return { values: a.map((row, i) => row[i]!), vectors: v };
}

/** lim 1/T ∫ (A(t)|A) dt per cell on a ring of `cells` spins: Σ_{E_m = E_n} |A_mn|² / (cells · 2^cells). */
export function timeAveraged(h: Operator, observable: Operator, cells: number): number {
  const { values, vectors } = jacobi(realMatrix(h, 1, cells));
  const a = realMatrix(observable, 1, cells);
  const n = values.length;
  let sum = 0;
  for (let k = 0; k < n; k++) {
    const image = a.map((row) => {
      let total = 0;
      for (let j = 0; j < n; j++) total += row[j]! * vectors[k]![j]!;
      return total;
    });
    for (let m = 0; m < n; m++) {
      if (Math.abs(values[m]! - values[k]!) > 1e-7) continue;
      let element = 0;
      for (let j = 0; j < n; j++) element += vectors[m]![j]! * image[j]!;
      sum += element ** 2;
    }
  }
  return sum / (cells * n);
}

/** Eigenvalues alone, ascending: Householder reflections to tridiagonal form, then bisection by Sturm sequences. */
export function eigenvalues(symmetric: readonly Float64Array[]): number[] {
  const n = symmetric.length;
  const a = symmetric.map((row) => row.slice());
  const diagonal = new Float64Array(n);
  const beside = new Float64Array(n);
  for (let k = 0; k < n - 2; k++) {
    const x = a[k]!.slice(k + 1);
    const norm = Math.hypot(...x);
    diagonal[k] = a[k]![k]!;
    if (norm === 0) continue;
    const alpha = x[0]! > 0 ? -norm : norm;
    beside[k + 1] = alpha;
    x[0]! -= alpha;
    let square = 0;
    for (const value of x) square += value * value;
    const m = n - k - 1;
    const p = new Float64Array(m);
    for (let i = 0; i < m; i++) {
      const row = a[k + 1 + i]!;
      let total = 0;
      for (let j = 0; j < m; j++) total += row[k + 1 + j]! * x[j]!;
      p[i] = (2 * total) / square;
    }
    let overlap = 0;
    for (let i = 0; i < m; i++) overlap += p[i]! * x[i]!;
    for (let i = 0; i < m; i++) p[i]! -= (overlap / square) * x[i]!;
    for (let i = 0; i < m; i++) {
      const row = a[k + 1 + i]!;
      const [xi, pi] = [x[i]!, p[i]!];
      for (let j = 0; j < m; j++) row[k + 1 + j]! -= xi * p[j]! + pi * x[j]!;
    }
  }
  if (n > 1) {
    diagonal[n - 2] = a[n - 2]![n - 2]!;
    beside[n - 1] = a[n - 2]![n - 1]!;
  }
  diagonal[n - 1] = a[n - 1]![n - 1]!;
  let reach = 0;
  for (let i = 0; i < n; i++)
    reach = Math.max(reach, Math.abs(diagonal[i]!) + Math.abs(beside[i]!) + Math.abs(beside[i + 1] ?? 0));
  const below = (x: number) => {
    let count = 0;
    let d = 1;
    for (let i = 0; i < n; i++) {
      d = diagonal[i]! - x - (i === 0 ? 0 : beside[i]! ** 2 / d);
      if (d === 0) d = 1e-300;
      if (d < 0) count++;
    }
    return count;
  };
  return Array.from({ length: n }, (_, k) => {
    let [low, high] = [-reach - 1, reach + 1];
    for (let step = 0; step < 46; step++) {
      const middle = (low + high) / 2;
      if (below(middle) > k) high = middle;
      else low = middle;
    }
    return (low + high) / 2;
  });
}

/**
 * Σ over translates in one sector of ∏Z as a dense real symmetric matrix. Where entries are imaginary, the real form (Re, −Im; Im, Re) of
 * twice the size, in which every eigenvalue occurs twice.
 */
export function sectorMatrix(density: Operator, cell: number, cells: number, parity: 1 | -1): Float64Array[] {
  const states: number[] = [];
  const place = new Map<number, number>();
  for (let state = 0; state < 2 ** (cell * cells); state++) {
    let ones = 0;
    for (let rest = state; rest !== 0; rest &= rest - 1) ones++;
    if ((ones & 1) === (parity === 1 ? 0 : 1)) place.set(state, states.push(state) - 1);
  }
  const words = [...density.numerators].map(([word, value]) => [textFromWord(word), value] as const);
  const placed = onRing(words, cell, cells);
  const n = states.length;
  const double = placed.some(({ power }) => (power & 1) === 1);
  const matrix = Array.from({ length: double ? 2 * n : n }, () => new Float64Array(double ? 2 * n : n));
  for (const { flip, sign, power, coefficient } of placed)
    for (const [column, state] of states.entries()) {
      let ones = 0;
      for (let rest = state & sign; rest !== 0; rest &= rest - 1) ones++;
      const turns = (power + 2 * ones) & 3;
      const value = Number(coefficient) / Number(density.denominator);
      const row = place.get(state ^ flip)!;
      const [re, im] = [
        [1, 0],
        [0, 1],
        [-1, 0],
        [0, -1],
      ][turns]!.map((x) => x * value) as [number, number];
      matrix[row]![column]! += re;
      if (!double) continue;
      matrix[row + n]![column + n]! += re;
      matrix[row + n]![column]! += im;
      matrix[row]![column + n]! -= im;
    }
  return matrix;
}
