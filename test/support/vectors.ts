/**
 * Sums over a periodic ring as explicit matrices, applied to basis vectors: bits of an integer are the spins, X flips a bit, Z
 * gives its sign, Y = iXZ both. Exact Gaussian integers; shares nothing with the packed strings of the library.
 */

/** Printed words, first letter on spin 0 of a cell, with integer coefficients. */
export type PlainDensity = readonly (readonly [word: string, coefficient: bigint])[];

/** A column of a matrix: basis state → [real, imaginary]. */
type Vector = Map<number, [bigint, bigint]>;

interface Placed {
  /** Bits that are flipped, and bits whose value 1 gives a sign. */
  readonly flip: number;
  readonly sign: number;
  /** i to this power, from the Ys. */
  readonly power: number;
  readonly coefficient: bigint;
}

/** Σ_j τ_j(density) on a ring of `cells` cells, site by site. Words must not be longer than the ring. */
export function onRing(density: PlainDensity, cell: number, cells: number): readonly Placed[] {
  const spins = cell * cells;
  return density.flatMap(([word, coefficient]) =>
    Array.from({ length: cells }, (_, j) => {
      let [flip, sign, power] = [0, 0, 0];
      [...word].forEach((letter, i) => {
        const bit = 1 << ((j * cell + i) % spins);
        if (letter === 'X' || letter === 'Y') flip |= bit;
        if (letter === 'Z' || letter === 'Y') sign |= bit;
        if (letter === 'Y') power++;
      });
      return { flip, sign, power, coefficient };
    }),
  );
}

function apply(operator: readonly Placed[], vector: Vector): Vector {
  const image: Vector = new Map();
  for (const [state, [re, im]] of vector)
    for (const { flip, sign, power, coefficient } of operator) {
      let ones = 0;
      for (let rest = state & sign; rest !== 0; rest &= rest - 1) ones++;
      // Y|0⟩ = i|1⟩, Y|1⟩ = −i|0⟩.
      let [x, y] = [re * coefficient, im * coefficient];
      for (let turns = (power + 2 * ones) & 3; turns > 0; turns--) [x, y] = [-y, x];
      const target = state ^ flip;
      const sum = image.get(target);
      image.set(target, sum === undefined ? [x, y] : [sum[0] + x, sum[1] + y]);
    }
  return image;
}

/** Number of entries of the matrix [A, B] on the ring that are not zero; each is computed. */
export function commutatorEntries(
  a: PlainDensity,
  b: PlainDensity,
  ring: { readonly cell: number; readonly cells: number },
): number {
  const first = onRing(a, ring.cell, ring.cells);
  const second = onRing(b, ring.cell, ring.cells);
  let entries = 0;
  for (let state = 0; state < 2 ** (ring.cell * ring.cells); state++) {
    const basis: Vector = new Map([[state, [1n, 0n]]]);
    const difference = apply(first, apply(second, basis));
    for (const [target, [re, im]] of apply(second, apply(first, basis))) {
      const [x, y] = difference.get(target) ?? [0n, 0n];
      difference.set(target, [x - re, y - im]);
    }
    for (const [re, im] of difference.values()) if (re !== 0n || im !== 0n) entries++;
  }
  return entries;
}
