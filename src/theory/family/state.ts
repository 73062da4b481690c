/** A run between two cases as text, to go on from later: for checkpoint files. */
import { Polynomial } from '../../algebra/polynomial.ts';
import { rationalFromText, textFromRational } from '../../algebra/rational.ts';
import { textFromWord, wordFromText } from '../../algebra/word.ts';
import { HoldfastError, InputError } from '../../errors.ts';
import type { Family } from '../../model/formula.ts';
import { type Case, equationsOf } from './case.ts';
import type { FamilyCase, FamilyState } from './classify.ts';

/** Exponents and coefficient of each monomial. */
type PolynomialText = [number[], string][];

/** What the state belongs to: the terms of the family and the range. */
function taskOf({ chain, parameters, terms }: Family, range: number): string {
  return JSON.stringify([
    chain.cell,
    range,
    parameters,
    terms.map(([word, p]) => [textFromWord(word), p.toString(parameters)]),
  ]);
}

/** The state as JSON: exact, and bound to its family and range. `stateFromText` reads it back. */
export function textFromState(family: Family, range: number, { open, closed }: FamilyState): string {
  const p = (q: Polynomial): PolynomialText =>
    [...q.terms(family.parameters.length)].map(([exponents, c]) => [exponents, textFromRational(c)]);
  const where = ({ solved, carried, nonZero }: Case) => ({
    solved: solved.map((s) => [s.variable, p(s.numerator), p(s.denominator)]),
    carried: carried.map(p),
    nonZero: nonZero.map(p),
  });
  return JSON.stringify({
    holdfast: 'family state',
    task: taskOf(family, range),
    open: open.map(where),
    closed: closed.map((c) => ({
      where: where(c.where),
      dimensionByRange: c.dimensionByRange,
      charges: c.charges.map((q) => [q.range, q.density.map(([word, d]) => [textFromWord(word), p(d)])]),
      point: c.point?.map(textFromRational) ?? null,
    })),
  });
}

/** A state that `textFromState` has written. @throws InputError when the text is none, or one of another family or range */
export function stateFromText(family: Family, range: number, text: string): FamilyState {
  const p = (terms: PolynomialText): Polynomial => Polynomial.of(terms);
  const where = (w: {
    solved: [number, PolynomialText, PolynomialText][];
    carried: PolynomialText[];
    nonZero: PolynomialText[];
  }): Case => ({
    solved: w.solved.map(([variable, n, d]) => ({ variable, numerator: p(n), denominator: p(d) })),
    carried: w.carried.map(p),
    nonZero: w.nonZero.map(p),
  });
  try {
    const state = JSON.parse(text);
    if (state.task !== taskOf(family, range))
      throw new InputError('checkpoint', 'a state of this family and range', 'one of another');
    return {
      open: state.open.map(where),
      closed: state.closed.map((c: never): FamilyCase => {
        const {
          where: w,
          dimensionByRange,
          charges,
          point,
        } = c as {
          where: Parameters<typeof where>[0];
          dimensionByRange: number[];
          charges: [number, [string, PolynomialText][]][];
          point: string[] | null;
        };
        const own = where(w);
        return Object.freeze({
          where: own,
          equations: Object.freeze(equationsOf(own)),
          nonZero: own.nonZero,
          dimensionByRange,
          charges: charges.map(([r, density]) => ({
            range: r,
            density: density.map(([word, d]) => [wordFromText(word), p(d)] as const),
          })),
          point: point?.map(rationalFromText) ?? null,
        });
      }),
    };
  } catch (error) {
    if (error instanceof HoldfastError) throw error;
    throw new InputError('checkpoint', 'a state that `holdfast family` has written', 'something else');
  }
}
