/**
 * From closed cases to a readable statement: for every answer the closed sets on which it holds, up to symmetry.
 *
 * The dimension up to a range can only grow on closed sets, so the cases with one answer lie densely in few closed sets given by
 * equations alone. A row of the table holds such sets; the answer at a point is the row with the largest dimensions among those
 * whose equations it satisfies. That reading is checked against the cases: no case with a smaller answer meets a set of the row.
 */
import { Polynomial } from '../../algebra/polynomial.ts';
import { primitive } from '../../algebra/polynomial-division.ts';
import { letterAt, reverse, spanOf, type Word } from '../../algebra/word.ts';
import type { Family } from '../../model/formula.ts';
import { EVERYWHERE, equationsOf, imposeAll, reduceOn } from './case.ts';
import type { FamilyCase, FamilyResult } from './classify.ts';

/** A closed set of the parameter space. */
export interface Locus {
  /** Polynomials in all parameters that vanish on it; none for the whole space. */
  readonly equations: readonly Polynomial[];
  /** Conditions without which the equations would say too much; empty nearly always. */
  readonly except: readonly Polynomial[];
  /** The case that fills it but for smaller sets: its charges are those of a general point. */
  readonly general: FamilyCase;
  /** The same set with parameters exchanged or their signs turned, by a symmetry of the family; this one not included. */
  readonly equivalent: readonly Locus[];
}

export interface Answer {
  readonly dimensionByRange: readonly number[];
  readonly loci: readonly Locus[];
}

/** The answers of a family by rising dimension; the first one holds at general parameters. */
export function answersOf(result: FamilyResult): Answer[] {
  const groups = new Map<string, FamilyCase[]>();
  for (const c of result.cases) {
    const key = `${c.dimensionByRange}`;
    groups.set(key, [...(groups.get(key) ?? []), c]);
  }
  const symmetries = symmetriesOf(result.family);
  const answers = [...groups.values()].map((cases) => {
    const { dimensionByRange } = cases[0]!;
    const smaller = result.cases.filter((c) => c.dimensionByRange.some((d, j) => d < dimensionByRange[j]!));
    return { dimensionByRange, loci: orbits(closures(cases, smaller), symmetries) };
  });
  return answers.sort((a, b) => {
    for (let j = a.dimensionByRange.length - 1; j >= 0; j--) {
      const difference = a.dimensionByRange[j]! - b.dimensionByRange[j]!;
      if (difference !== 0) return difference;
    }
    return 0;
  });
}

/** The largest closed sets among cases of one answer; a set that would meet a smaller answer keeps the conditions of its case. */
function closures(cases: readonly FamilyCase[], smaller: readonly FamilyCase[]): Omit<Locus, 'equivalent'>[] {
  const found: Omit<Locus, 'equivalent'>[] = [];
  for (const general of [...cases].sort((a, b) => a.equations.length - b.equations.length)) {
    const inside = (l: Omit<Locus, 'equivalent'>) =>
      l.equations.every((p) => reduceOn(general.where, p).isZero()) &&
      l.except.every((p) => general.nonZero.some((q) => q.equals(p)));
    if (found.some(inside)) continue;
    const { equations } = general;
    const closed = smaller.every((c) => imposeAll(c.where, equations).length === 0);
    found.push({ equations, except: closed ? [] : general.nonZero, general });
  }
  return found;
}

/** A renaming of parameters with signs: parameter v becomes sign[v] times parameter image[v]. */
interface Renaming {
  readonly image: readonly number[];
  readonly sign: readonly (1 | -1)[];
}

function orbits(loci: readonly Omit<Locus, 'equivalent'>[], symmetries: readonly Renaming[]): Locus[] {
  const keys = loci.map((l) => keyOf(l.equations, l.except));
  const taken = new Set<number>();
  return loci.flatMap((locus, i) => {
    if (taken.has(i)) return [];
    taken.add(i);
    const equivalent: Locus[] = [];
    for (const s of symmetries) {
      const key = keyOf(
        locus.equations.map((p) => renamed(p, s)),
        locus.except.map((p) => renamed(p, s)),
      );
      keys.forEach((other, j) => {
        if (other !== key || taken.has(j)) return;
        taken.add(j);
        equivalent.push({ ...loci[j]!, equivalent: [] });
      });
    }
    return [{ ...locus, equivalent }];
  });
}

/** The same text for the same equations in another form, where one triangular set describes them. */
function keyOf(equations: readonly Polynomial[], except: readonly Polynomial[]): string {
  const cases = imposeAll(EVERYWHERE, equations);
  const list = cases.length === 1 ? equationsOf(cases[0]!) : equations.map(primitive);
  const text = (all: readonly Polynomial[]) =>
    all.map((p) => [...p.numerators].sort((a, b) => (a[0] < b[0] ? -1 : 1)).join(';')).sort();
  return `${text(list).join('|')}#${text(except.map(primitive)).join('|')}`;
}

export function renamed(p: Polynomial, { image, sign }: Renaming): Polynomial {
  return Polynomial.of(
    [...p.terms(image.length)].map(([exponents, c]) => {
      const moved = exponents.map(() => 0);
      let negative = false;
      exponents.forEach((e, v) => {
        moved[image[v]!] = e;
        if (e % 2 === 1 && sign[v] === -1) negative = !negative;
      });
      return [moved, negative ? { ...c, numerator: -c.numerator } : c] as const;
    }),
  );
}

const PERMUTATIONS = [
  [1, 2, 3],
  [1, 3, 2],
  [2, 1, 3],
  [2, 3, 1],
  [3, 1, 2],
  [3, 2, 1],
] as const;

/**
 * Renamings of the parameters that carry charges over: a change of the three axes or of their signs, the same at every spin, with or
 * without the mirror image, turns the family into itself with other parameters, up to the sign of H. (An improper change reverses
 * products, and with them the sign of commutators only.)
 */
export function symmetriesOf(family: Family): Renaming[] {
  const found = new Map<string, Renaming>();
  for (const letters of PERMUTATIONS)
    for (let signs = 0; signs < 8; signs++)
      for (const mirror of [false, true])
        for (const overall of [1, -1] as const) {
          const image = (word: Word): { word: Word; sign: 1 | -1 } => {
            let out = 0n;
            let sign: 1 | -1 = overall;
            const span = spanOf(word);
            for (let spin = span - 1; spin >= 0; spin--) {
              const letter = letterAt(word, spin);
              if (letter > 0 && (signs >> (letter - 1)) & 1) sign = sign === 1 ? -1 : 1;
              out = (out << 2n) | BigInt(letter === 0 ? 0 : letters[letter - 1]!);
            }
            const cells = Math.ceil(span / family.chain.cell) * family.chain.cell;
            return { word: family.chain.representative(mirror ? reverse(out, cells) : out), sign };
          };
          const renaming = renamingFor(family, image);
          if (renaming === undefined) continue;
          if (renaming.image.some((v, i) => v !== i) || renaming.sign.includes(-1))
            found.set(`${renaming.image}/${renaming.sign}`, renaming);
        }
  return [...found.values()];
}

function renamingFor(
  family: Family,
  image: (word: Word) => { word: Word; sign: 1 | -1 },
): Renaming | undefined {
  const terms = new Map(family.terms);
  const target = family.parameters.map((_, v) => v);
  const sign = family.parameters.map((): 1 | -1 => 1);
  const fixed = new Set<number>();
  // Coefficients that are a multiple of one parameter decide what becomes of it; the rest is checked below.
  for (const [word, p] of family.terms) {
    const own = variableOf(p);
    const moved = image(word);
    const other = terms.get(moved.word);
    if (other === undefined) return undefined;
    const next = variableOf(other);
    if (own === undefined || next === undefined || fixed.has(own.variable)) continue;
    fixed.add(own.variable);
    target[own.variable] = next.variable;
    sign[own.variable] = (own.positive === next.positive ? moved.sign : -moved.sign) as 1 | -1;
  }
  if (new Set(target).size !== target.length) return undefined;
  const renaming = { image: target, sign };
  // H at p, moved, has at the image of a word the coefficient sign · c(p); it must be the coefficient there at the renamed point.
  for (const [word, p] of family.terms) {
    const moved = image(word);
    const there = terms.get(moved.word)!;
    const expected = moved.sign === 1 ? p : p.scale({ numerator: -1n, denominator: 1n });
    if (!renamed(expected, renaming).equals(there)) return undefined;
  }
  return renaming;
}

function variableOf(p: Polynomial): { variable: number; positive: boolean } | undefined {
  if (p.size !== 1) return undefined;
  const [[monomial, value]] = [...p.numerators] as [[bigint, bigint]];
  for (let v = 0; v < 64; v++)
    if (monomial === [...Polynomial.variable(v).numerators.keys()][0])
      return { variable: v, positive: value > 0n };
  return undefined;
}
