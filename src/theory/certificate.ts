/** Certificates of the kinds `every-range`, `every-range-modular` and `half-steps`: what an independent checker needs to evaluate the pencil again and believe its bound. */
import { Operator } from '../algebra/operator.ts';
import { divide, rational } from '../algebra/rational.ts';
import { canonicalText, terms, text, type Value } from '../certificate/document.ts';
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
import { type BondsAndFields, decompose } from './decompose.ts';
import { CellGrowth, injectivity } from './growth.ts';
import { HALF_STEP_RANGE, HalfStepGrowth, halfSteps } from './half-steps.ts';
import { traceProduct } from './orthogonal.ts';
import { boundsOf, diagonalOf, type Pencil, type Witness } from './pencil.ts';

/** The limits of what is claimed; docs/certificate.md lists them word for word. */
const assumes = (from: number) => [
  'The Hamiltonian is the sum of all translates, by whole cells, of the listed terms; every cell holds the same number of spins 1/2.',
  'Counted are sums of all translates, by whole cells, of one combination of Pauli strings; the identity is left out.',
  `Ranges 1 ${from === 3 ? 'and' : 'to'} ${from - 1} are no part of the claim.`,
  'Nothing is said about quasilocal, non-local or staggered conserved quantities.',
];

function statementOf(cell: number, atMost: number, from: number): string {
  const chain = `On the infinite chain of cells of ${cell} spin${cell === 1 ? '' : 's'} 1/2, for every k of ${from} or more`;
  return atMost === 0
    ? `${chain}, there is no translation-invariant conserved quantity of range exactly k cells.`
    : `${chain}, the translation-invariant conserved quantities of range at most k cells exceed those of range at most k - 1 by at most ${atMost} dimension${atMost === 1 ? '' : 's'}.`;
}

/**
 * The certificate that an injective chain of one or two spins a cell has at most so many charges of every range k ≥ 3, or an Ising-type chain
 * with its bond along an axis at most so many of every range k ≥ 5; canonical text.
 * Milliseconds for one spin a cell, a second for two: there the checker computes the pencil modulo a prime, since functionals on four cells
 * of two spins are too many to list.
 *
 * @throws LimitError for other models, and where the pencil of two spins a cell loses rank at values that no range takes
 */
export function everyRangeCertificate(h: Hamiltonian): string {
  const model = decompose(h);
  if (model === undefined || model.spins > 2 || model.group !== 1 || h.range !== 2)
    throw new LimitError(
      'every-range certificate: written for one or two spins a cell and interactions of range 2',
    );
  const kernel = injectivity(model);
  if (kernel.left.length > 0 || kernel.right.length > 0) return halfStepCertificate(h, model);
  const chain = new Chain(model.spins);
  const growth = new CellGrowth(model);
  const { topParts, pencil: reduced } = growth.pencil();
  const { generic, exceptional } = boundsOf(reduced, 0);
  const atMost = Math.max(generic, ...exceptional.map((e) => e.dimension));
  const claim = { spins: model.spins, from: 3, atMost };
  if (model.spins === 2) {
    const root = rootBelowRanges(reduced, topParts.length - atMost);
    if (root === undefined)
      throw new LimitError(
        'every-range certificate: the pencil of two spins a cell loses rank at values that no range takes; modulo a prime some range does',
      );
    return documentOf('every-range-modular', h, claim, {
      ...topPartEvidence(chain, topParts),
      ...rootEvidence(root, growth.witnesses(topParts, root), (x) => terms(chain, packed(x))),
    });
  }
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
  return documentOf('every-range', h, claim, {
    ...topPartEvidence(chain, topParts),
    functionals: functionals.map((f) => terms(chain, f)),
    minors: minorsOf(rows, topParts.length - atMost, topParts.length),
  });
}

/** What all kinds have in common. */
function documentOf(
  kind: string,
  h: Hamiltonian,
  { spins, from, atMost }: { readonly spins: number; readonly from: number; readonly atMost: number },
  evidence: Value,
): string {
  return canonicalText({
    certificate: 'conserved quantities of a spin chain',
    version: 1,
    kind,
    tool: `holdfast ${VERSION}`,
    model: { cell: spins, range: 2, terms: terms(h.chain, h.density) },
    claim: { from, atMost, statement: statementOf(spins, atMost, from), assumes: assumes(from) },
    charges: [],
    evidence,
  });
}

/** The prime, and the top parts with a string each that no other has. */
function topPartEvidence(chain: Chain, topParts: readonly Operator[]) {
  return {
    prime: primesBelow().next().value!,
    free: topParts.map((f) => {
      const others = topParts.filter((g) => g !== f);
      return text(chain, [...f.numerators.keys()].find((w) => others.every((g) => !g.numerators.has(w)))!);
    }),
    topParts: topParts.map((f) => terms(chain, f)),
  };
}

function rootEvidence(root: bigint, witnesses: readonly Witness[], print: (x: Witness['x']) => Value) {
  return {
    root: String(root),
    witnesses: witnesses.map(({ parts, x }) => ({ parts: parts.map(String), x: print(x) })),
  };
}

function packed(x: Witness['x']): Operator {
  return Operator.fromIntegers([...x].map(([string, value]) => [BigInt(string), value] as const));
}

function halfStepCertificate(h: Hamiltonian, model: BondsAndFields): string {
  const steps = halfSteps(model);
  if (!steps.ok)
    throw new LimitError(
      `every-range certificate: the interaction is not injective, and there are no half steps, since ${steps.reason}`,
    );
  const { letters } = steps;
  if (model.spins !== 1 || model.bond.size !== 1)
    throw new LimitError(
      'every-range certificate: half steps are written for one spin a cell and a bond along X, Y or Z',
    );
  const growth = new HalfStepGrowth(letters);
  const { topParts, pencil } = growth.pencil();
  const { generic, exceptional } = boundsOf(pencil, 0);
  const most = Math.max(generic, ...exceptional.map((e) => e.dimension));
  const root = rootBelowRanges(pencil, topParts.length - most);
  if (root === undefined)
    throw new LimitError(
      'every-range certificate: the pencil of half steps loses rank at values that no range takes; modulo a prime some range does',
    );
  // Letters are Pauli letters here, up to a sign that their primitive form fixes.
  const chain = new Chain(1);
  const operator = (q: ReadonlyMap<number, bigint>): Operator =>
    Operator.fromIntegers(
      [...q].map(([string, value]) => {
        let [word, factor, rest, shift] = [0n, value, string, 0n];
        for (; rest > 0; rest = Math.floor(rest / letters.count), shift += 2n) {
          const [[letter, sign]] = [...letters.basis[rest % letters.count]!.numerators] as [[bigint, bigint]];
          word |= letter << shift;
          factor *= sign;
        }
        return [word, factor] as const;
      }),
    );
  return documentOf(
    'half-steps',
    h,
    { spins: 1, from: HALF_STEP_RANGE, atMost: 2 * most },
    {
      ...topPartEvidence(chain, topParts.map(operator)),
      ...rootEvidence(root, growth.witnesses(topParts, root), (x) => terms(chain, operator(x))),
    },
  );
}

/** Where H alone makes the pencil lose rank: k = 1, t = −2. */
const USUAL_ROOT = -2n;

/**
 * The one negative integer at which the pencil may lose rank, and then by one; elsewhere it has rank `size`. Undefined where constant
 * entries of the diagonal form, and one linear entry with such a root, are not enough to see it.
 */
function rootBelowRanges(pencil: Pencil, size: number): bigint | undefined {
  const diagonal = diagonalOf(pencil);
  const missing = size - diagonal.filter((entry) => entry.length === 1).length;
  if (missing <= 0) return USUAL_ROOT;
  if (missing > 1) return undefined;
  for (const entry of diagonal) {
    if (entry.length !== 2) continue;
    const { numerator, denominator } = divide(entry[0]!, entry[1]!);
    if (denominator === 1n && numerator > 0n) return -numerator;
  }
  return undefined;
}

/** A basis of the functionals on O_4 that vanish on (R − A) O_3. */
function annihilators(growth: CellGrowth): Operator[] {
  const strings = growth.strings(4);
  const column = new Map(strings.map((s, i) => [s, i]));
  const builder = new MatrixBuilder();
  for (const s of growth.strings(3)) {
    const q = Operator.fromIntegers([[BigInt(s), 1n]]);
    for (const [word, value] of growth.grown(q, 3).numerators)
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
