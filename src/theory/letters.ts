/**
 * One cell's operators in a basis made for an Ising-type bond `h = J a⊗a`: the identity, then K = { x traceless : [x, a] = 0 },
 * then C = image of [·, a], with the structure constants of both Hermitian products.
 *
 * [·, a] is skew for the trace product, so C is the orthogonal complement of K, and an orthogonal basis of either is rational
 * although lengths are not. `docs/theory.md`, section 5.
 */
import { Operator } from '../algebra/operator.ts';
import { gcd, lcm } from '../algebra/rational.ts';
import type { Word } from '../algebra/word.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import type { BondsAndFields } from './decompose.ts';
import { orthogonalBasis, traceProduct } from './orthogonal.ts';

/** Linear combinations of letters, by number. */
export type Combination = readonly (readonly [letter: number, value: bigint])[];

export interface Letters {
  /** Number of letters with the identity, which is letter 0. */
  readonly count: number;
  /** What the letters are. */
  readonly basis: readonly Operator[];
  /** Letters 1 … kept are a basis of K, the rest of C. */
  readonly kept: number;
  /** Common denominator of the tables: entries are `denominator` times the structure constants. */
  readonly denominator: bigint;
  /** `i[x, y]/2`, at x·count + y. */
  readonly commutators: readonly Combination[];
  /** `{x, y}/2`, at x·count + y. */
  readonly anticommutators: readonly Combination[];
  /** a, a primitive integer combination, times `scale` gives the bond: h = coupling · a⊗a. */
  readonly axis: Combination;
  readonly coupling: { readonly numerator: bigint; readonly denominator: bigint };
  /** w without its trace, times `denominator`. */
  readonly field: Combination;
}

/** `h = J a⊗a` with a primitive a, or undefined where h has no such form. */
export function isingForm({
  bond,
  spins,
}: BondsAndFields): { axis: Operator; coupling: bigint; norm: bigint } | undefined {
  const bits = BigInt(2 * spins);
  const first = (1n << bits) - 1n;
  const entry = (a: Word, b: Word): bigint => bond.numerators.get(a | (b << bits)) ?? 0n;
  const [seed] = [...bond.numerators.keys()];
  if (seed === undefined) return undefined;
  // Row of one letter: proportional to a when the matrix of couplings is c v vᵀ.
  const pivot = seed & first;
  const row: [Word, bigint][] = [];
  for (const [word, value] of bond.numerators) if ((word & first) === pivot) row.push([word >> bits, value]);
  const axis = Operator.fromIntegers(row).primitive(row[0]![0]);
  const own = axis.numerators.get(pivot) ?? 0n;
  if (own === 0n) return undefined;
  // c = entry(pivot, pivot)/own², a fraction; compare products instead of quotients.
  const coupling = entry(pivot, pivot);
  const norm = own * own;
  const letters = [...axis.numerators];
  if (bond.size !== letters.length ** 2) return undefined;
  for (const [p, x] of letters)
    for (const [q, y] of letters) if (entry(p, q) * norm !== coupling * x * y) return undefined;
  return { axis, coupling, norm };
}

/** Undefined when the bond is not of Ising type. */
export function lettersOf(model: BondsAndFields): Letters | undefined {
  const ising = isingForm(model);
  if (ising === undefined) return undefined;
  const all = 4 ** model.spins;
  const builder = new MatrixBuilder();
  const images: Operator[] = [];
  for (let x = 1; x < all; x++) {
    const image = Operator.fromIntegers([[BigInt(x), 1n]]).bracket(ising.axis);
    images.push(image);
    for (const [word, value] of image.numerators) builder.add(Number(word), x - 1, value);
  }
  const kernel = exactNullSpace(builder.finish(all - 1)).map(({ columns, values }) =>
    Operator.fromIntegers(columns.map((c, i) => [BigInt(c + 1), values[i]!] as const)),
  );
  const keep = orthogonalBasis(kernel);
  const basis = [Operator.fromIntegers([[0n, 1n]]), ...keep, ...orthogonalBasis(images)];
  const norms = basis.map((e) => traceProduct(e, e));
  const denominator = norms.reduce(lcm, 1n);
  const coordinates = (x: Operator): Combination =>
    basis.flatMap((e, i) => {
      const value = traceProduct(e, x);
      return value === 0n ? [] : [[i, value * (denominator / norms[i]!)] as const];
    });
  const table = (product: (x: Operator, y: Operator) => Operator): Combination[] =>
    basis.flatMap((x) => basis.map((y) => coordinates(product(x, y))));
  const axis = coordinates(ising.axis);
  const common = axis.reduce((g, [, v]) => gcd(g, v), 0n);
  return {
    count: all,
    basis,
    kept: keep.length,
    denominator,
    commutators: table((x, y) => x.bracket(y)),
    anticommutators: table((x, y) => x.anticommutator(y)),
    axis: axis.map(([letter, v]) => [letter, v / common] as const),
    // h = coupling/norm · axis⊗axis, and axis = common/denominator · (primitive combination).
    coupling: {
      numerator: ising.coupling * common * common,
      denominator: ising.norm * denominator * denominator,
    },
    field: coordinates(model.field.filter((word) => word !== 0n)),
  };
}
