import { ZIGZAG } from '../../model/catalogue/sources.ts';
import type { PublishedTheorem } from '../citations.ts';

/** `J1 (XZ + ZX) + J2 ZIZ + h Y`, the family of the zigzag classification that is integrable and not classical. */
export const zigzagIntegrable: PublishedTheorem = {
  id: 'zigzag-integrable',
  conclusion: 'Integrable: one of the two integrable families of inversion-symmetric zigzag chains.',
  hypotheses: 'H = J1 (XZ + ZX) + J2 ZIZ + h Y with J1 and J2 not zero, after renaming axes.',
  source: ZIGZAG,
  basis: 'from memory',
  cell: 1,
  terms: [
    { word: 'XZ', coupling: 'J1' },
    { word: 'ZX', coupling: 'J1' },
    { word: 'ZIZ', coupling: 'J2' },
    { word: 'Y', coupling: 'h' },
  ],
  condition: ({ J1 = 0n, J2 = 0n }) => J1 !== 0n && J2 !== 0n,
  verdict: 'integrable',
};

/** `J1 ZZ + J2 ZIZ + h Z`: every term commutes with every other. */
export const zigzagClassical: PublishedTheorem = {
  id: 'zigzag-classical',
  conclusion: 'Integrable in the classical sense: all terms commute with one another.',
  hypotheses: 'H = J1 ZZ + J2 ZIZ + h Z with J2 not zero, after renaming axes.',
  source: ZIGZAG,
  basis: 'from memory',
  cell: 1,
  terms: [
    { word: 'ZZ', coupling: 'J1' },
    { word: 'ZIZ', coupling: 'J2' },
    { word: 'Z', coupling: 'h' },
  ],
  condition: ({ J2 = 0n }) => J2 !== 0n,
  verdict: 'integrable',
};

const PAIRS = ['XX', 'XY', 'XZ', 'YY', 'YZ', 'ZZ'];
const LETTERS = ['X', 'Y', 'Z'];

/** The rest of the classification: inversion-symmetric, both exchanges present, in neither family after any rotation. */
export const zigzagOther: PublishedTheorem = {
  id: 'zigzag-non-integrable',
  conclusion:
    'No local charge of range 4 or more, as for every inversion-symmetric zigzag chain outside two families.',
  hypotheses:
    'Spin 1/2, symmetric nearest- and next-nearest-neighbour exchange, neither zero, any field, and no rotation takes it into one of the two integrable families.',
  source: ZIGZAG,
  basis: 'from memory',
  cell: 1,
  terms: [
    ...PAIRS.flatMap((pair) => {
      const [a, b] = [pair.charAt(0), pair.charAt(1)];
      return (
        a === b
          ? [[a, b]]
          : [
              [a, b],
              [b, a],
            ]
      ).flatMap(([x, y]) => [
        { word: `${x}${y}`, coupling: `n${pair}` },
        { word: `${x}I${y}`, coupling: `m${pair}` },
      ]);
    }),
    ...LETTERS.map((word) => ({ word, coupling: `h${word}` })),
  ],
  condition: (c) =>
    PAIRS.some((pair) => c[`n${pair}`]) && PAIRS.some((pair) => c[`m${pair}`]) && !inFamily(c),
  verdict: 'none',
  from: 4,
};

type Vector = readonly bigint[];

/**
 * Is the model, up to a rotation, in one of the two families? Both have next-nearest exchange J2 v vᵀ. Classical: nearest exchange
 * along v as well, field along v. The other: nearest exchange u vᵀ + v uᵀ with u ⊥ v, field across both.
 */
function inFamily(c: Readonly<Record<string, bigint>>): boolean {
  const matrix = (kind: string): Vector[] =>
    LETTERS.map((a) => LETTERS.map((b) => c[`${kind}${[a, b].sort().join('')}`] ?? 0n));
  const [near, next] = [matrix('n'), matrix('m')];
  const field = LETTERS.map((a) => c[`h${a}`] ?? 0n);
  const v = next.find((row) => row.some((x) => x !== 0n))!;
  if (!next.every((row) => isParallel(row, v))) return false;
  if (near.every((row) => isParallel(row, v))) return isParallel(field, v);
  const u = near.map((row) => dot(row, v));
  const across = (x: Vector): Vector => x.map((e, i) => dot(v, v) * e - dot(v, x) * v[i]!);
  const noneAcross = LETTERS.every((_, i) =>
    LETTERS.every((__, j) => {
      const [p, q] = [across(unit(i)), across(unit(j))];
      return (
        dot(
          p,
          near.map((row) => dot(row, q)),
        ) === 0n
      );
    }),
  );
  return noneAcross && dot(v, u) === 0n && dot(field, v) === 0n && dot(field, u) === 0n;
}

function unit(i: number): Vector {
  return LETTERS.map((_, j) => (i === j ? 1n : 0n));
}

function dot(x: Vector, y: Vector): bigint {
  return x.reduce((sum, e, i) => sum + e * y[i]!, 0n);
}

/** Are all 2×2 minors zero? The zero vector is parallel to every other. */
function isParallel(x: Vector, y: Vector): boolean {
  return x.every((_, i) => y.every((__, j) => x[i]! * y[j]! === x[j]! * y[i]!));
}
