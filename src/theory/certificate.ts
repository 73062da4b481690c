/** Certificates of the kind `every-range`: what an independent checker needs to evaluate the pencil again and believe its bound. */
import { Operator } from '../algebra/operator.ts';
import { rational } from '../algebra/rational.ts';
import { canonicalText, terms, text } from '../certificate/document.ts';
import { VERSION } from '../certificate/version.ts';
import { LimitError } from '../errors.ts';
import { Chain } from '../lattice/chain.ts';
import { diagonalForm } from '../linear/diagonal.ts';
import { primesBelow } from '../linear/field.ts';
import {
  addMultiple,
  evaluate,
  integerRoots,
  timesUnivariate,
  type Univariate,
  univariateOf,
} from '../linear/univariate.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import { decompose } from './decompose.ts';
import { CellGrowth, injectivity } from './growth.ts';
import { traceProduct } from './orthogonal.ts';
import { boundsOf } from './pencil.ts';

/** The limits of what is claimed; docs/certificate.md lists them word for word. */
const ASSUMES = [
  'The Hamiltonian is the sum of all translates, by whole cells, of the listed terms; every cell holds the same number of spins 1/2.',
  'Counted are sums of all translates, by whole cells, of one combination of Pauli strings; the identity is left out.',
  'Ranges 1 and 2 are no part of the claim.',
  'Nothing is said about quasilocal, non-local or staggered conserved quantities.',
];

function statementOf(cell: number, atMost: number): string {
  const chain = `On the infinite chain of cells of ${cell} spin${cell === 1 ? '' : 's'} 1/2, for every k of 3 or more`;
  return atMost === 0
    ? `${chain}, there is no translation-invariant conserved quantity of range exactly k cells.`
    : `${chain}, the translation-invariant conserved quantities of range at most k cells exceed those of range at most k - 1 by at most ${atMost} dimension${atMost === 1 ? '' : 's'}.`;
}

/**
 * The certificate that an injective chain of one spin a cell has at most so many charges of every range k ≥ 3; canonical text. Milliseconds.
 *
 * @throws LimitError for other models: functionals on four cells of two spins are too many to list
 */
export function everyRangeCertificate(h: Hamiltonian): string {
  const model = decompose(h);
  if (model === undefined || model.spins !== 1 || model.group !== 1 || h.range !== 2)
    throw new LimitError('every-range certificate: written for one spin a cell and interactions of range 2');
  const kernel = injectivity(model);
  if (kernel.left.length > 0 || kernel.right.length > 0)
    throw new LimitError(
      'every-range certificate: the interaction is not injective, and half steps have none yet',
    );
  const chain = new Chain(1);
  const growth = new CellGrowth(model);
  const { topParts, pencil: reduced } = growth.pencil();
  const { generic, exceptional } = boundsOf(reduced, 0);
  const atMost = Math.max(generic, ...exceptional.map((e) => e.dimension));
  const inner = topParts.map((f) => growth.inner(f));
  const functionals: Operator[] = [];
  const rows: (readonly [bigint, bigint])[][] = [];
  for (const functional of annihilators(growth)) {
    const row = inner.map(
      ({ alpha, beta }) => [traceProduct(functional, alpha), traceProduct(functional, beta)] as const,
    );
    if (rank([...rows, row]) === rows.length) continue;
    rows.push(row);
    functionals.push(functional);
  }
  const free = topParts.map((f) => {
    const own = [...f.numerators.keys()].find((w) => topParts.every((g) => g === f || !g.numerators.has(w)));
    return text(chain, own!);
  });
  return canonicalText({
    certificate: 'conserved quantities of a spin chain',
    version: 1,
    kind: 'every-range',
    tool: `holdfast ${VERSION}`,
    model: { cell: 1, range: 2, terms: terms(chain, h.density) },
    claim: { from: 3, atMost, statement: statementOf(1, atMost), assumes: ASSUMES },
    charges: [],
    evidence: {
      prime: primesBelow().next().value!,
      free,
      topParts: topParts.map((f) => terms(chain, f)),
      functionals: functionals.map((f) => terms(chain, f)),
      minors: minorsOf(rows, topParts.length - atMost, topParts.length),
    },
  });
}

/** A basis of the functionals on O_4 that vanish on (R − A) O_3. */
function annihilators(growth: CellGrowth): Operator[] {
  const strings = growth.strings(4);
  const column = new Map(strings.map((s, i) => [s, i]));
  const builder = new MatrixBuilder();
  for (const s of growth.strings(3)) {
    const q = Operator.fromIntegers([[BigInt(s), 1n]]);
    for (const [word, value] of growth.right(q, 3).minus(growth.left(q)).numerators)
      builder.add(s, column.get(Number(word))!, value);
  }
  return exactNullSpace(builder.finish(strings.length)).map(({ columns, values }) =>
    Operator.fromIntegers(columns.map((c, i) => [BigInt(strings[c]!), values[i]!] as const)),
  );
}

/** Of rows of pairs (constant, linear), as plain vectors. */
function rank(rows: readonly (readonly (readonly [bigint, bigint])[])[]): number {
  return diagonalForm(rows.map((row) => row.flat().map((v) => univariateOf(v)))).length;
}

/** Minors, each as rows and columns, of which at least one does not vanish at any t ≥ 0. */
function minorsOf(
  rows: readonly (readonly (readonly [bigint, bigint])[])[],
  size: number,
  columns: number,
): number[][][] {
  if (size === 0) return [];
  const candidates = subsets(rows.length, size).flatMap((r) =>
    subsets(columns, size).map((c) => ({
      place: [r, c],
      value: determinant(r.map((i) => c.map((j) => univariateOf(...rows[i]![j]!)))),
    })),
  );
  const first = candidates.find(({ value }) => value.length > 0)!;
  const chosen = [first];
  for (const t of integerRoots(first.value, 0n)) {
    const differs = ({ value }: { value: Univariate }) => evaluate(value, rational(t)).numerator !== 0n;
    if (!chosen.some(differs)) chosen.push(candidates.find(differs)!);
  }
  return chosen.map(({ place }) => place);
}

function subsets(count: number, size: number, from = 0): number[][] {
  if (size === 0) return [[]];
  const found: number[][] = [];
  for (let i = from; i <= count - size; i++)
    for (const rest of subsets(count, size - 1, i + 1)) found.push([i, ...rest]);
  return found;
}

function determinant(matrix: readonly (readonly Univariate[])[]): Univariate {
  if (matrix.length === 0) return univariateOf(1);
  return matrix[0]!.reduce<Univariate>((sum, entry, c) => {
    const minor = determinant(matrix.slice(1).map((row) => row.filter((_, j) => j !== c)));
    return addMultiple(sum, timesUnivariate(entry, minor), rational(c % 2 === 0 ? 1n : -1n));
  }, []);
}
