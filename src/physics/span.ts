/** Exact linear algebra on sparse rational vectors: the span of operators, coordinates in it, and linear relations. */
import { Operator } from '../algebra/operator.ts';
import type { Rational } from '../algebra/rational.ts';
import type { Word } from '../algebra/word.ts';

/**
 * Grows a span one operator at a time. Each row is kept reduced by the rows before it, with the combination of the given operators
 * that it is. Cost of a step: rows × terms, on exact coefficients; meant for up to some thousand operators.
 */
export class Span {
  readonly #rows: { pivot: Word; row: Operator; combination: Operator }[] = [];
  #given = 0;

  get dimension(): number {
    return this.#rows.length;
  }

  /**
   * Takes the next operator in. Null when it was independent of those before; else the relation `Σ relation[i]·given[i] = 0` in
   * which the new operator has coefficient 1, as a map from the index to the coefficient.
   */
  add(operator: Operator): ReadonlyMap<number, Rational> | null {
    const own = Operator.fromIntegers([[BigInt(this.#given++), 1n]]);
    const { rest, combination } = this.#reduce(operator, own);
    if (rest.isZero()) return new Map([...combination.terms()].map(([i, c]) => [Number(i), c]));
    let pivot: Word | undefined;
    for (const word of rest.numerators.keys()) if (pivot === undefined || word < pivot) pivot = word;
    this.#rows.push({ pivot: pivot!, row: rest, combination });
    return null;
  }

  /** Coefficients by index of the given operators, or null outside the span. Operators that depended on earlier ones are not used. */
  coordinates(operator: Operator): Rational[] | null {
    const { rest, combination } = this.#reduce(operator, Operator.zero);
    if (!rest.isZero()) return null;
    const negative = combination.times(-1);
    return Array.from({ length: this.#given }, (_, i) => negative.coefficient(BigInt(i)));
  }

  #reduce(operator: Operator, own: Operator): { rest: Operator; combination: Operator } {
    let rest = operator;
    let combination = own;
    // A row holds no pivot of an earlier one, so a single pass clears all pivots.
    for (const { pivot, row, combination: made } of this.#rows) {
      const value = rest.coefficient(pivot);
      if (value.numerator === 0n) continue;
      const lead = row.coefficient(pivot);
      const factor = {
        numerator: value.numerator * lead.denominator,
        denominator: value.denominator * lead.numerator,
      };
      rest = rest.minus(row.times(factor));
      combination = combination.minus(made.times(factor));
    }
    return { rest, combination };
  }
}

/** A basis of { c : Σ c_i operators_i = 0 }, each vector as a map from the index to the coefficient. */
export function relations(operators: Iterable<Operator>): ReadonlyMap<number, Rational>[] {
  const span = new Span();
  const found: ReadonlyMap<number, Rational>[] = [];
  for (const operator of operators) {
    const relation = span.add(operator);
    if (relation !== null) found.push(relation);
  }
  return found;
}
