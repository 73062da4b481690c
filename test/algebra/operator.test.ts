import { describe, expect, test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import { gcd, rational } from '../../src/algebra/rational.ts';
import { compareWords, product, textFromWord, wordFromText } from '../../src/algebra/word.ts';
import { InputError } from '../../src/errors.ts';
import { parseDensity } from '../../src/model/formula.ts';
import { type Matrix, matrixOfOperator, plus, scaled, times } from '../support/matrices.ts';
import { property, type Random } from '../support/random.ts';

const commutator = (a: Matrix, b: Matrix): Matrix => plus(times(a, b), times(b, a), -1n);
const anticommutator = (a: Matrix, b: Matrix): Matrix => plus(times(a, b), times(b, a));
const anyOperator = (random: Random): Operator =>
  random.operator(random.integer(1, 20), random.integer(0, 6));
const zero = Operator.zero;

describe('operators against explicit matrices', () => {
  property('sum, bracket and anticommutator on up to four spins', 60, (random) => {
    const spins = random.integer(1, 4);
    const [a, b] = [random.operator(spins, 6), random.operator(spins, 6)];
    const [p, q] = [matrixOfOperator(a, spins), matrixOfOperator(b, spins)];
    const scale = a.denominator * b.denominator;
    const sum = a.plus(b);
    expect(scaled(matrixOfOperator(sum, spins), scale)).toEqual(
      scaled(plus(scaled(p, b.denominator), q, a.denominator), sum.denominator),
    );
    // 2 {…}/2 = {…} and 2 i[…]/2 = i[…], each side times all denominators.
    const bracket = a.bracket(b);
    expect(scaled(matrixOfOperator(bracket, spins), 2n * scale)).toEqual(
      scaled(commutator(p, q), 0n, bracket.denominator),
    );
    const anti = a.anticommutator(b);
    expect(scaled(matrixOfOperator(anti, spins), 2n * scale)).toEqual(
      scaled(anticommutator(p, q), anti.denominator),
    );
  });
});

describe('the Lie algebra', () => {
  property('antisymmetry and bilinearity', 150, (random) => {
    const [a, b, c] = [anyOperator(random), anyOperator(random), anyOperator(random)];
    const x = random.rational();
    expect(a.bracket(b).plus(b.bracket(a)).isZero()).toBe(true);
    expect(a.bracket(b.plus(c.times(x))).equals(a.bracket(b).plus(a.bracket(c).times(x)))).toBe(true);
    expect(a.bracket(a).isZero()).toBe(true);
  });

  property('Jacobi identity', 150, (random) => {
    const [a, b, c] = [anyOperator(random), anyOperator(random), anyOperator(random)];
    const sum = a
      .bracket(b.bracket(c))
      .plus(b.bracket(c.bracket(a)))
      .plus(c.bracket(a.bracket(b)));
    expect(sum.equals(zero)).toBe(true);
  });

  property('the anticommutator is a Jordan product', 100, (random) => {
    const [a, b] = [anyOperator(random), anyOperator(random)];
    expect(a.anticommutator(b).equals(b.anticommutator(a))).toBe(true);
    const square = a.anticommutator(a);
    expect(
      square
        .anticommutator(b)
        .anticommutator(a)
        .equals(square.anticommutator(b.anticommutator(a))),
    ).toBe(true);
  });

  property('the bracket is a derivation of the anticommutator', 100, (random) => {
    const [a, b, c] = [anyOperator(random), anyOperator(random), anyOperator(random)];
    const left = a.bracket(b.anticommutator(c));
    const right = a
      .bracket(b)
      .anticommutator(c)
      .plus(b.anticommutator(a.bracket(c)));
    expect(left.equals(right)).toBe(true);
  });

  property('of two strings: ± their product, or nothing', 100, (random) => {
    const [a, b] = [random.word(20), random.word(20)];
    const one = (word: bigint) => Operator.fromIntegers([[word, 1n]]);
    const { word, phase } = product(a, b);
    const [bracket, anti] = [one(a).bracket(one(b)), one(a).anticommutator(one(b))];
    const [full, empty] = phase % 2 === 1 ? [bracket, anti] : [anti, bracket];
    expect(empty.isZero()).toBe(true);
    expect([...full.numerators.keys()]).toEqual([word]);
    expect(full.numerators.get(word)).toBe(phase === 1 || phase === 2 ? -1n : 1n);
  });
});

describe('the vector space', () => {
  property('laws', 150, (random) => {
    const [a, b, c] = [anyOperator(random), anyOperator(random), anyOperator(random)];
    const [x, y] = [random.rational(), random.rational()];
    expect(a.plus(b).equals(b.plus(a))).toBe(true);
    expect(
      a
        .plus(b)
        .plus(c)
        .equals(a.plus(b.plus(c))),
    ).toBe(true);
    expect(a.minus(b).plus(b).equals(a)).toBe(true);
    expect(
      a
        .times(x)
        .plus(a.times(y))
        .equals(
          a
            .times(rational(1n))
            .times(
              rational(
                x.numerator * y.denominator + y.numerator * x.denominator,
                x.denominator * y.denominator,
              ),
            ),
        ),
    ).toBe(true);
    expect(a.times(0).equals(zero)).toBe(true);
  });

  property('lowest terms: equal operators have equal fields, whatever their history', 150, (random) => {
    const a = anyOperator(random);
    const x = random.nonZeroRational();
    const back = a.times(x).times({ numerator: x.denominator, denominator: x.numerator });
    expect(back.denominator).toBe(a.denominator);
    expect(new Map(back.numerators)).toEqual(new Map(a.numerators));
    let common = a.denominator;
    for (const value of a.numerators.values()) {
      expect(value).not.toBe(0n);
      common = gcd(common, value);
    }
    expect(common).toBe(1n);
    expect(a.denominator > 0n).toBe(true);
  });

  property('negative common denominators', 50, (random) => {
    const a = anyOperator(random);
    const negative = Operator.fromIntegers(
      [...a.numerators].map(([word, value]) => [word, -6n * value] as const),
      -6n * a.denominator,
    );
    expect(negative.equals(a)).toBe(true);
    expect(negative.denominator).toBe(a.denominator);
  });

  property(
    'primitive: the multiple with coprime integers and a positive leading coefficient',
    100,
    (random) => {
      const a = anyOperator(random);
      const leading = [...a.numerators.keys()].sort(compareWords)[0];
      if (leading === undefined) return;
      const p = a.primitive(leading);
      expect(p.denominator).toBe(1n);
      expect(p.numerators.get(leading)! > 0n).toBe(true);
      expect([...p.numerators.values()].reduce(gcd)).toBe(1n);
      const { numerator, denominator } = a.coefficient(leading);
      expect(p.times({ numerator, denominator }).equals(a.times(p.numerators.get(leading)!))).toBe(true);
    },
  );

  property('filter and map', 60, (random) => {
    const a = anyOperator(random);
    const even = (word: bigint) => (word & 1n) === 0n;
    expect(
      a
        .filter(even)
        .plus(a.filter((w) => !even(w)))
        .equals(a),
    ).toBe(true);
    expect(a.mapWords(() => 0n).size <= 1).toBe(true);
  });
});

describe('text', () => {
  property('parse and print are inverse', 150, (random) => {
    const a = anyOperator(random);
    expect(parseDensity(a.toString()).equals(a)).toBe(true);
    expect(parseDensity(a.toString(25)).equals(a)).toBe(true);
    expect(Operator.of(a.toJSON()).equals(a)).toBe(true);
    const fractions = Object.fromEntries(a.toFractions());
    expect(Operator.of(fractions).equals(a)).toBe(true);
  });

  test('prints signs and fractions as papers do', () => {
    expect(Operator.of({ ZI: '-1/2', XX: 1, Y: -3 }).toString(2)).toBe('XX - 3 YI - 1/2 ZI');
    expect(zero.toString()).toBe('0');
    expect(Operator.of({ I: 5 }).toString()).toBe('5 I');
    expect(JSON.stringify(Operator.of({ XX: '2/4' }))).toBe('{"XX":"1/2"}');
  });

  test('terms are in alphabetical order, coefficients in lowest terms', () => {
    const a = Operator.of({ Z: '1/2', Y: '3/2', XX: 1, XI: 2 });
    expect([...a.terms()].map(([word, c]) => [textFromWord(word), c])).toEqual([
      ['X', rational(2n)],
      ['XX', rational(1n)],
      ['Y', rational(3n, 2n)],
      ['Z', rational(1n, 2n)],
    ]);
    expect(a.coefficient(wordFromText('ZZ'))).toEqual(rational(0n));
    expect(a.span).toBe(2);
    expect(zero.span).toBe(0);
  });

  test('refuses floats and foreign letters', () => {
    expect(() => Operator.of({ XX: 0.5 })).toThrow(InputError);
    expect(() => Operator.of({ XW: 1 })).toThrow(InputError);
    expect(() => Operator.of({ '': 1 })).toThrow(InputError);
    expect(() => Operator.fromIntegers([[1n, 1n]], 0n)).toThrow(InputError);
    expect(() => zero.plus(Operator.of({ X: 1 })).times(Number.NaN)).toThrow(InputError);
  });
});
