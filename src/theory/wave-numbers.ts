/**
 * Quantities that are not translation invariant: `Q = Σ_j ω^j τ_j(q)` for every wave number |ω| = 1. `docs/theory.md`, section 4.
 *
 * Top parts exist for finitely many ω, the roots of the minors of `R − ωA`; charges of range 1 and 2 likewise. The program finds all of
 * them on the unit circle and evaluates the pencil at ω = 1 and ω = −1; other ones it names and leaves open.
 */
import { rational } from '../algebra/rational.ts';
import { phaseExponent } from '../algebra/word.ts';
import { diagonalForm } from '../linear/diagonal.ts';
import {
  addMultiple,
  degree,
  divideUnivariate,
  evaluate,
  greatestCommonDivisor,
  squareFree,
  type Univariate,
  univariate,
  univariateOf,
} from '../linear/univariate.ts';
import { exactNullSpace, MatrixBuilder } from '../search/null-space.ts';
import type { BondsAndFields } from './decompose.ts';
import { CellGrowth, injectivity, type Sign } from './growth.ts';
import { boundsOf, type PencilBounds } from './pencil.ts';

export interface AtWaveNumber {
  /** ω: 1 for translation-invariant quantities, −1 for those that change sign from cell to cell. */
  readonly omega: Sign;
  /** Charges of range exactly 1 and exactly 2. */
  readonly short: readonly [number, number];
  /** Upper bounds for ranges k ≥ 3, in t = k − 3. */
  readonly bounds: PencilBounds;
}

export type WaveNumberVerdict =
  | {
      readonly kind: 'covered';
      /** Both real wave numbers; at every other one there is no charge of any range. */
      readonly at: readonly [AtWaveNumber, AtWaveNumber];
      /** No charge of range ≥ 3 at any wave number, so translation invariance need not be assumed. */
      readonly noneOfRange3: boolean;
    }
  | { readonly kind: 'open'; readonly reason: string };

/** For an injective chain of one spin a cell with interactions of range 2; anything else is open, with the reason. */
export function decideWaveNumbers(model: BondsAndFields): WaveNumberVerdict {
  if (model.spins !== 1 || model.group !== 1)
    return { kind: 'open', reason: 'wave numbers are decided for chains of one spin a cell and range 2' };
  const kernel = injectivity(model);
  if (kernel.left.length > 0 || kernel.right.length > 0)
    return { kind: 'open', reason: 'the interaction is not injective' };
  for (const cells of [[2], [1, 2]] as const) {
    const columns = cells.flatMap((c) => columnsOf(model, c, cells.length === 1));
    const diagonal = diagonalForm(rowsOf(columns));
    if (diagonal.length < columns.length)
      return { kind: 'open', reason: 'there are charges at every wave number' };
    const other = diagonal.map(otherUnitRoots).find((p) => degree(p) > 0);
    if (other !== undefined)
      return { kind: 'open', reason: 'there may be charges at wave numbers other than 0 and π' };
  }
  const at = ([1, -1] as const).map((omega) => atWaveNumber(model, omega)) as unknown as readonly [
    AtWaveNumber,
    AtWaveNumber,
  ];
  const noneOfRange3 = at.every(({ bounds }) => bounds.generic === 0 && bounds.exceptional.length === 0);
  return { kind: 'covered', at, noneOfRange3 };
}

function atWaveNumber(model: BondsAndFields, omega: Sign): AtWaveNumber {
  const dimension = (cells: readonly (1 | 2)[]): number => {
    const columns = cells.flatMap((c) => columnsOf(model, c, false));
    const builder = new MatrixBuilder();
    columns.forEach((column, j) => {
      for (const [row, p] of column) builder.add(row, j, evaluate(p, rational(BigInt(omega))).numerator);
    });
    return exactNullSpace(builder.finish(columns.length)).length;
  };
  const one = dimension([1]);
  return {
    omega,
    short: [one, dimension([1, 2]) - one],
    bounds: boundsOf(new CellGrowth(model, omega).pencil().pencil, 0),
  };
}

type Column = ReadonlyMap<number, Univariate>;

/**
 * `[q, H]` of every string q on so many cells, as polynomials in ω: an output that starts d cells to the right of q has the factor
 * ω^(1−d), one ω too many throughout. `growthOnly` keeps the outputs that are longer than q.
 */
function columnsOf({ bond, field }: BondsAndFields, cells: 1 | 2, growthOnly: boolean): Column[] {
  const terms = [...bond.numerators, ...field.numerators].map(([word, value]) => ({
    word: Number(word),
    value,
  }));
  const strings = cells === 1 ? [1, 2, 3] : [1, 2, 3].flatMap((b) => [1, 2, 3].map((a) => a | (b << 2)));
  return strings.map((string) => {
    const column = new Map<number, Univariate>();
    const placed = string << 2;
    for (const { word, value } of terms)
      for (let at = word < 4 ? 1 : 0; at <= cells; at++) {
        const moved = word << (2 * at);
        const phase = phaseExponent(placed, moved);
        if ((phase & 1) === 0) continue;
        let image = placed ^ moved;
        let first = 0;
        while ((image & 3) === 0) {
          image >>= 2;
          first++;
        }
        if (growthOnly && image < 4 ** cells) continue;
        const factor = rational(phase === 1 ? -value : value);
        column.set(image, addMultiple(column.get(image) ?? [], univariateOf(1), factor, 2 - first));
      }
    return column;
  });
}

function rowsOf(columns: readonly Column[]): Univariate[][] {
  const rows = new Set(columns.flatMap((column) => [...column.keys()]));
  return [...rows].map((row) => columns.map((column) => column.get(row) ?? []));
}

/**
 * The factor of p whose roots can lie on the unit circle, without those at ±1: with a root ω a real polynomial has 1/ω = ω̄ as
 * well, so it divides p and its mirror image. Square-free; constant where there is nothing left.
 */
function otherUnitRoots(p: Univariate): Univariate {
  let rest = squareFree(greatestCommonDivisor(p, univariate([...p].reverse())));
  for (const root of [1n, -1n]) {
    if (degree(rest) > 0 && evaluate(rest, rational(root)).numerator === 0n)
      rest = divideUnivariate(rest, univariateOf(-root, 1n)).quotient;
  }
  return rest;
}
