/** Dense Gaussian elimination over GF(p), in bigints: the plain twin of the sparse and union-find solvers. */

/** The reduced row echelon form, without zero rows; its length is the rank. */
export function echelonForm(rows: readonly (readonly bigint[])[], p: bigint): bigint[][] {
  const work = rows.map((row) => row.map((v) => ((v % p) + p) % p));
  const columns = rows[0]?.length ?? 0;
  let rank = 0;
  for (let c = 0; c < columns && rank < work.length; c++) {
    const pivot = work.findIndex((row, i) => i >= rank && row[c] !== 0n);
    if (pivot < 0) continue;
    [work[rank], work[pivot]] = [work[pivot]!, work[rank]!];
    const inverse = power(work[rank]![c]!, p - 2n, p);
    work[rank] = work[rank]!.map((v) => (v * inverse) % p);
    for (let i = 0; i < work.length; i++) {
      const factor = work[i]![c]!;
      if (i === rank || factor === 0n) continue;
      work[i] = work[i]!.map((v, j) => (((v - factor * work[rank]![j]!) % p) + p) % p);
    }
    rank++;
  }
  return work.slice(0, rank);
}

export function power(base: bigint, exponent: bigint, p: bigint): bigint {
  let result = 1n;
  for (let b = base % p, e = exponent; e > 0n; e >>= 1n, b = (b * b) % p)
    if ((e & 1n) === 1n) result = (result * b) % p;
  return result;
}
