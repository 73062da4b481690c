/**
 * Matrices of polynomials in one variable over the rationals, brought to diagonal form by row and column operations of
 * determinant ±1: at every value of the variable the rank is the number of diagonal entries that do not vanish there.
 */
import { rational } from '../algebra/rational.ts';
import { addMultiple, degree, divideUnivariate, timesUnivariate, type Univariate } from './univariate.ts';

const MINUS_ONE = rational(-1n);

/**
 * The non-zero entries of a diagonal form; their number is the generic rank. Cost: cubic, times the growth of degrees; meant for
 * matrices of a few columns.
 */
export function diagonalForm(matrix: readonly (readonly Univariate[])[]): Univariate[] {
  let rows = matrix.map((row) => [...row]);
  const diagonal: Univariate[] = [];
  for (;;) {
    rows = rows.filter((row) => row.some((entry) => entry.length > 0));
    const pivot = smallest(rows);
    if (pivot === undefined) return diagonal;
    const [i, j] = pivot;
    const entry = rows[i]![j]!;
    // A remainder has a smaller degree and becomes the next pivot, so this ends.
    let clean = true;
    for (let r = 0; r < rows.length; r++) {
      const other = rows[r]![j]!;
      if (r === i || other.length === 0) continue;
      const { quotient, remainder } = divideUnivariate(other, entry);
      rows[r] = rows[r]!.map((value, c) =>
        addMultiple(value, timesUnivariate(quotient, rows[i]![c]!), MINUS_ONE),
      );
      if (remainder.length > 0) clean = false;
    }
    if (!clean) continue;
    for (let c = 0; c < rows[i]!.length; c++) {
      if (c === j || rows[i]![c]!.length === 0) continue;
      const { remainder } = divideUnivariate(rows[i]![c]!, entry);
      // The pivot's column has only the pivot left, so a column operation changes its row alone.
      rows[i]![c] = remainder;
      if (remainder.length > 0) clean = false;
    }
    if (!clean) continue;
    diagonal.push(entry);
    rows.splice(i, 1);
    rows = rows.map((row) => row.filter((_, c) => c !== j));
  }
}

function smallest(rows: readonly (readonly Univariate[])[]): [number, number] | undefined {
  let best: [number, number] | undefined;
  let lowest = Number.POSITIVE_INFINITY;
  rows.forEach((row, i) => {
    row.forEach((entry, j) => {
      if (entry.length > 0 && degree(entry) < lowest) {
        lowest = degree(entry);
        best = [i, j];
      }
    });
  });
  return best;
}
