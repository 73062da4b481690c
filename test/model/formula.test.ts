import { describe, expect, test } from 'vitest';
import { Operator } from '../../src/algebra/operator.ts';
import {
  add,
  divide,
  multiply,
  ONE,
  type Rational,
  rational,
  textFromRational,
} from '../../src/algebra/rational.ts';
import {
  LETTERS,
  letterAt,
  product,
  spanOf,
  textFromWord,
  type Word,
  wordFromText,
} from '../../src/algebra/word.ts';
import { HoldfastError, InputError } from '../../src/errors.ts';
import { familyAt, parseDensity, parseFamily, parseModel, parseSites } from '../../src/model/formula.ts';
import { hamiltonianOf } from '../../src/model/hamiltonian.ts';
import { MAX_FORMULA_LENGTH, MAX_NESTING, MAX_TERMS, MAX_WORD_LENGTH } from '../../src/model/limits.ts';
import { property, type Random } from '../support/random.ts';

const density = (formula: string, parameters = {}, cell = 1): string =>
  parseModel(formula, { cell, parameters }).density.toString();

describe('the notation', () => {
  test.each([
    ['XX + YY + 1/2 ZZ + 0.35 X', '7/20 X + XX + YY + 1/2 ZZ'],
    ['2*(XX+YY)', '2 XX + 2 YY'],
    ['-XX', '-XX'],
    ['- -XX + +YY - -ZZ', 'XX + YY + ZZ'],
    ['XX/3 + YY/(1/2)', '1/3 XX + 2 YY'],
    ['XX*2 - 3*YY*2', '2 XX - 6 YY'],
    ['(1/2)(XX + YY)', '1/2 XX + 1/2 YY'],
    ['2(3(4 XX))', '24 XX'],
    ['2XX+3YY', '2 XX + 3 YY'],
    ['2^3 XX + (1/2)^2 YY + (2/3)^-1 ZZ + 2^0 X', 'X + 8 XX + 1/4 YY + 3/2 ZZ'],
    ['-2^2 XX', '-4 XX'],
    ['2 * -XX', '-2 XX'],
    ['XX / -2', '-1/2 XX'],
    ['IXX + XXI + IXXI', '3 XX'],
    ['XX + 5', 'XX'],
    ['XX + 5 I + III', 'XX'],
    ['XX − 2·YY × 3 ⋅ 1', 'XX - 6 YY'],
    ['\n XX\t+\r\n YY ', 'XX + YY'],
    ['.5XX', '1/2 XX'],
    ['6/4/3 XX', '1/2 XX'],
  ])('%s', (formula, expected) => {
    expect(density(formula)).toBe(expected);
  });

  test('parameters', () => {
    const parameters = { Jx: '1/3', Jy: 2, g: '0.1', h: 5n };
    expect(density('Jx XX + Jy*YY - (1/2)(XX - 2 g ZIZ) + h(X+Z)', parameters)).toBe(
      '5 X - 1/6 XX + 2 YY + 5 Z + 1/10 ZIZ',
    );
    expect(density("J_1 XX + Δ ZZ + J' YY + hX X", { J_1: 1, Δ: 2, "J'": 3, hX: 4 })).toBe(
      '4 X + XX + 3 YY + 2 ZZ',
    );
    expect(density('XX/(2 J) + J^-2 YY', { J: '1/3' })).toBe('3/2 XX + 9 YY');
    expect(density('J XX', new Map([['J', '7']]))).toBe('7 XX');
  });

  test('cells', () => {
    expect(density('XIX + IXIX', {}, 2)).toBe('IXIX + XIX');
    expect(density('XIX + IIXIX', {}, 2)).toBe('2 XIX');
    expect(parseModel('XIX', { cell: 2 }).range).toBe(2);
    expect(parseModel('XIX').range).toBe(3);
  });

  test('site by site', () => {
    expect(density('X_0 X_1 + Y_5 Y_6')).toBe('XX + YY');
    expect(density('X_0X_1+Z_{-1} X_{0} Z_{ 1 }')).toBe('XX + ZXZ');
    expect(density('X_j X_{j+1} + g Z_j + Z_{j-1} Y_j Z_{j + 1}', { g: 2 })).toBe('XX + 2 Z + ZYZ');
    expect(density('X_1 Z_0')).toBe('ZX');
    expect(density('(1 - Z_0) X_1 (1 - Z_2)/4')).toBe('1/4 X - 1/4 XZ - 1/4 ZX + 1/4 ZXZ');
    expect(density('Z_{0,a} Z_{1,b} + X_{0,1}', {}, 2)).toBe('IX + ZIIZ');
    expect(density('Z_{j,a} Z_{j+1,b} + X_{j-1,b}', {}, 2)).toBe('IX + ZIIZ');
    // One number counts spins along the chain, as words do.
    expect(density('X_0 X_1 + X_1 X_2', {}, 2)).toBe('IXX + XX');
    expect(density('X_{0,0} X_{1,0}')).toBe('XX');
    expect(density('XX + Y_0 Y_1')).toBe('XX + YY');
    expect(density('I_0 X_3 Y_5 I_9')).toBe('XIY');
  });

  test('letters on one site multiply as Pauli matrices', () => {
    expect(density('X_0 X_0 Y_1')).toBe('Y');
    expect(density('X_0 Y_0 Z_1 X_1')).toBe('-ZY');
    expect(density('X_0 Y_0 Z_2 + Y_0 X_0 Z_2 + X_0')).toBe('X');
    expect(() => density('X_0 Y_0')).toThrow(/anti-Hermitian part i \(1\) Z/);
    expect(() => density('Y_0 X_0')).toThrow(/anti-Hermitian part i \(-1\) Z/);
    expect(() => density('2 X_0 Z_1 Y_0')).toThrow(/anti-Hermitian/);
  });
});

/** A random scalar or density together with its value, computed by other means. `level` 0 sum, 1 product, 2 atom. */
const VALUES: readonly (readonly [string, Rational])[] = [
  ['J', rational(-2n, 3n)],
  ['h_x', rational(5n)],
  ['λ', rational(1n, 7n)],
  ["g'", rational(0n)],
];
const PARAMETERS = new Map(VALUES);
const space = (random: Random): string => random.pick(['', ' ', '  ']);

interface Made<T> {
  readonly text: string;
  readonly level: 0 | 1 | 2;
  readonly value: T;
}

function wrap<T>(made: Made<T>, level: number): string {
  return made.level >= level ? made.text : `(${made.text})`;
}

function scalar(random: Random, depth: number): Made<Rational> {
  const kind = depth === 0 ? random.below(2) : random.below(7);
  if (kind === 0) {
    const [whole, decimals] = [random.below(12), random.pick(['', '5', '25', '04', '000'])];
    const value = rational(BigInt(`${whole}${decimals}`), 10n ** BigInt(decimals.length));
    return { text: decimals === '' ? `${whole}` : `${whole}.${decimals}`, level: 2, value };
  }
  if (kind === 1) {
    const [text, value] = random.pick(VALUES);
    return { text, level: 2, value };
  }
  const a = scalar(random, depth - 1);
  if (kind === 2) {
    const e = random.below(4);
    let value = ONE;
    for (let i = 0; i < e; i++) value = multiply(value, a.value);
    return { text: `${wrap(a, 2)}^${e}`, level: 1, value };
  }
  const b = scalar(random, depth - 1);
  switch (kind) {
    case 3:
      return { text: `${a.text}${space(random)}+ ${wrap(b, 1)}`, level: 0, value: add(a.value, b.value) };
    case 4:
      return {
        text: `${a.text} -${space(random)}${wrap(b, 1)}`,
        level: 0,
        value: add(a.value, multiply(rational(-1n), b.value)),
      };
    case 5:
      return {
        text: `${wrap(a, 1)}${random.pick([' * ', '*', ' '])}${wrap(b, 2)}`,
        level: 1,
        value: multiply(a.value, b.value),
      };
    default:
      if (b.value.numerator === 0n) return a;
      return {
        text: `${wrap(a, 1)}${space(random)}/${wrap(b, 2)}`,
        level: 1,
        value: divide(a.value, b.value),
      };
  }
}

function combination(random: Random, depth: number): Made<Operator> {
  const kind = depth === 0 ? 0 : random.below(6);
  if (kind === 0) {
    const text = random.wordText(random.integer(1, 5));
    return { text, level: 2, value: Operator.of({ [text]: 1 }) };
  }
  const a = combination(random, depth - 1);
  if (kind <= 2) {
    const b = combination(random, depth - 1);
    return kind === 1
      ? {
          text: `${a.text}${space(random)}+${space(random)}${wrap(b, 1)}`,
          level: 0,
          value: a.value.plus(b.value),
        }
      : {
          text: `${a.text}${space(random)}-${space(random)}${wrap(b, 1)}`,
          level: 0,
          value: a.value.minus(b.value),
        };
  }
  const s = scalar(random, depth - 1);
  if (kind === 3) return { text: `-${wrap(a, 1)}`, level: 0, value: a.value.times(-1) };
  if (kind === 4)
    return {
      text: `${wrap(s, 1)}${random.pick([' ', '*', ' * '])}${wrap(a, 2)}`,
      level: 1,
      value: a.value.times(s.value),
    };
  if (s.value.numerator === 0n) return a;
  return { text: `${wrap(a, 1)}/${wrap(s, 2)}`, level: 1, value: a.value.times(divide(ONE, s.value)) };
}

describe('laws', () => {
  property('random formulas have the value of their parts', 400, (random) => {
    const made = combination(random, random.integer(0, 6));
    const used = new Map([...PARAMETERS].filter(([name]) => made.text.includes(name)));
    const read = parseDensity(made.text, { parameters: used });
    expect([made.text, read.toString()]).toEqual([made.text, made.value.toString()]);
  });

  property('parse and print are inverse on Hamiltonians', 150, (random) => {
    const h = random.hamiltonian({ cell: random.integer(1, 3), range: random.integer(1, 3), terms: 6 });
    const again = parseModel(h.density.toString(), { cell: h.chain.cell });
    expect(again).toEqual(h);
  });

  property('a family at a point is the model with these values', 150, (random) => {
    const { text } = combination(random, 5);
    const names = VALUES.map(([name]) => name).filter((name) => text.includes(name));
    let family: ReturnType<typeof parseFamily>;
    try {
      family = parseFamily(text, { cell: 2 });
    } catch (error) {
      // A power or quotient of a parameter, or nothing left: said so, not computed.
      expect(error).toBeInstanceOf(InputError);
      return;
    }
    expect([...family.parameters].sort()).toEqual(names.sort());
    const values = new Map(family.parameters.map((name) => [name, random.rational()] as const));
    let expected: ReturnType<typeof parseModel> | string;
    try {
      expected = parseModel(text, { cell: 2, parameters: values });
    } catch (error) {
      expected = (error as InputError).expected;
      expect(() => familyAt(family, [...values.values()])).toThrow(InputError);
      return;
    }
    expect(familyAt(family, [...values.values()])).toEqual(expected);
  });

  property('a product of sites is the product of strings', 200, (random) => {
    const letters = Array.from({ length: random.integer(1, 8) }, () => ({
      letter: random.integer(1, 3),
      site: random.integer(0, 3),
    }));
    let word: Word = 0n;
    let phase = 0;
    for (const { letter, site } of letters) {
      const step = product(word, BigInt(letter) << BigInt(2 * site));
      phase = (phase + step.phase) % 4;
      word = step.word;
    }
    const index = random.chance(0.5);
    const base = random.integer(-3, 3);
    const text = letters
      .map(({ letter, site }) => {
        const at = site + base;
        const subscript = index ? `j${at < 0 ? at : `+${at}`}` : at;
        return `${LETTERS[letter]}_{${subscript}}`;
      })
      .join(random.pick([' ', '*', '']));
    const left = Math.min(...letters.map(({ site }) => site));
    if (phase % 2 === 1) expect(() => parseDensity(text)).toThrow(/anti-Hermitian/);
    else
      expect([...parseDensity(text).numerators]).toEqual([
        [word >> BigInt(2 * left), phase === 0 ? 1n : -1n],
      ]);
  });

  property('A B + B A and the square of a sum, site by site', 60, (random) => {
    const sites = (o: Operator) =>
      [...o.terms()]
        .map(([word, c]) => {
          const letters = Array.from(
            { length: spanOf(word) },
            (_, s) => `${LETTERS[letterAt(word, s)]}_${s}`,
          );
          return `(${textFromRational(c)}) ${['I_0', ...letters].join(' ')}`;
        })
        .join(' + ') || '0 I_0';
    const [a, b] = [random.operator(3, 3), random.operator(3, 3)];
    const [s, t] = [sites(a), sites(b)];
    expect(parseDensity(`(${s})(${t}) + (${t})*(${s})`).toString()).toBe(
      a.anticommutator(b).times(2).toString(),
    );
  });
});

describe('families', () => {
  test('coefficients are polynomials in the free parameters', () => {
    const family = parseFamily('Jx XX + (Jx+Jy)^2 YY/3 - h/2 (X - 2 k Z) + XX', { parameters: { k: 3 } });
    expect(family.parameters).toEqual(['Jx', 'Jy', 'h']);
    expect(family.terms.map(([word, p]) => [textFromWord(word), p.toString(family.parameters)])).toEqual([
      ['X', '-1/2*h'],
      ['XX', 'Jx + 1'],
      ['YY', '1/3*Jx^2 + 2/3*Jx*Jy + 1/3*Jy^2'],
      ['Z', '3*h'],
    ]);
  });

  test('translates add up, what cancels identically is gone', () => {
    const family = parseFamily('a XX + b IXX + c YY - c IYY + c Z');
    expect(family.terms.map(([word]) => word)).toEqual([wordFromText('XX'), wordFromText('Z')]);
  });

  test.each([
    ['Jx XX + gZ', /gZ \(a product is written g Z\) at position 9/],
    ['XX + g', /g at position 6/],
    ['XX + g ZZ - g ZZ', /g at position 6/],
    ['g - g', /zero or a constant/],
    ['XX/g', /division by a constant.*position 4/s],
    ['g^-1 XX', /division by a constant.*position 1/s],
    ['(g^64)^64 XX', /powers of a parameter/],
    ['(a+b+c+d+e+f+k+l)^60 XX', /at most/],
    [Array.from({ length: 80 }, (_, i) => `a${i} XX`).join('+'), /free parameters/],
  ])('refuses %s', (formula, message) => {
    expect(() => parseFamily(formula)).toThrow(InputError);
    expect(() => parseFamily(formula)).toThrow(message);
  });

  test('a point needs one value a parameter', () => {
    const family = parseFamily('a XX + b Z');
    expect(() => familyAt(family, [1])).toThrow(InputError);
    expect(() => familyAt(family, [0, 0])).toThrow(InputError);
    expect(familyAt(family, [0, '1/2']).density.toString()).toBe('1/2 Z');
  });
});

describe('what is refused, and where', () => {
  test.each<[string, number, RegExp]>([
    ['', 1, /end of the formula/],
    ['   ', 4, /end of the formula/],
    ['XX + ', 6, /end of the formula/],
    ['XX + + ', 8, /end of the formula/],
    ['XX + Q ZZ', 6, /no value for Q/],
    ['XX + gZ', 6, /a product is written g Z/],
    ['XX + xx', 6, /no value for xx/],
    ['XX YY', 4, /product of two words/],
    ['XX * (YY + ZZ)', 6, /product of two words/],
    ['X_0 ZZ', 5, /product of two words/],
    ['(XX + X_0) Z_1', 12, /product of two words/],
    ['XX^2', 1, /scalar as the base of a power/],
    ['2^XX', 3, /exponent/],
    ['2^0.5 XX', 3, /exponent/],
    ['2^65 XX', 3, /exponent/],
    ['2^2^2 XX', 4, /one exponent/],
    ['0^-1 XX', 1, /other than 0/],
    ['XX/0', 4, /other than 0/],
    ['XX/(1 - 1)', 4, /other than 0/],
    ['XX/YY', 4, /scalar as a divisor/],
    ['XX - XX', 1, /zero or a constant/],
    ['0 XX', 1, /zero or a constant/],
    ['3 + I', 1, /zero or a constant/],
    ['(XX', 4, /"\)"/],
    ['XX)', 3, /end of the formula/],
    ['()', 2, /got "\)"/],
    ['XX + * YY', 6, /got "\*"/],
    ['1e5 XX', 2, /without an exponent/],
    ['2.5E-3 XX', 4, /without an exponent/],
    ['NaN XX', 1, /finite/],
    ['XX + Infinity Z', 6, /finite/],
    ['1. XX', 2, /got "\."/],
    ['1,5 XX', 2, /got ","/],
    ['XX + ¤', 6, /got "¤"/],
    ['XΧ', 2, /got "Χ"/],
    ['XX + 😀', 6, /got "😀"/],
    ['X1 X2', 1, /site as in X_0/],
    ['XX_0', 1, /one letter before a subscript/],
    ['X_', 2, /subscript/],
    ['X_{', 2, /subscript/],
    ['X_{}', 1, /site numbers/],
    ['X_{1.5}', 1, /site numbers/],
    ['X_{0,0,0,0,0}', 1, /at most 4/],
    ['X_{0,0,0}', 1, /a cell and a spin/],
    ['X_{0,1}', 1, /spin of a cell of 1/],
    ['X_{0,b}', 1, /spin of a cell of 1/],
    ['X_{0,-1}', 1, /spin of a cell of 1/],
    ['X_j X_1', 5, /same running index/],
    ['X_{9999999} X_0', 1, /up to/],
    ['X_0 X_1000', 5, /within 256/],
    ['X_0 Y_0', 5, /anti-Hermitian/],
    [`${'9'.repeat(201)} XX`, 1, /at most 200/],
    [`${'X'.repeat(MAX_WORD_LENGTH + 1)}`, 1, /at most 256 letters/],
    [`XX + ${'a'.repeat(65)} XX`, 6, /at most 64/],
    [`${'('.repeat(MAX_NESTING + 1)}XX${')'.repeat(MAX_NESTING + 1)}`, MAX_NESTING + 1, /inside one another/],
  ])('%s', (formula, position, message) => {
    let error: unknown;
    try {
      parseModel(formula);
    } catch (caught) {
      error = caught;
    }
    expect(error).toBeInstanceOf(InputError);
    expect((error as InputError).message).toMatch(message);
    expect((error as InputError).source?.offset).toBe(position - 1);
    expect((error as InputError).message).toContain(`position ${position}`);
  });

  test.each<[string, Record<string, unknown>, RegExp]>([
    ['g XX', { g: 0.5 }, /parameter g: .*exact/],
    ['g XX', { g: Number.NaN }, /parameter g/],
    ['g XX', { g: Number.POSITIVE_INFINITY }, /parameter g/],
    ['g XX', { g: '1e5' }, /parameter g/],
    ['g XX', { g: '1/0' }, /parameter g/],
    ['g XX', { g: null }, /parameter g/],
    ['g XX', { g: '9'.repeat(500) }, /parameter g/],
    ['XX', { g: 1 }, /does not use/],
    ['XX', { X: 1 }, /parameters: expected names/],
    ['XX', { XY1: 1 }, /parameters: expected names/],
    ['XX', { 'a b': 1 }, /parameters: expected names/],
    ['XX', { '': 1 }, /parameters: expected names/],
    ['XX', JSON.parse('{"__proto__": 1}'), /parameters: expected names/],
    ['constructor XX', {}, /no value for constructor/],
    ['toString XX', {}, /no value for toString/],
  ])('%s with %j', (formula, parameters, message) => {
    expect(() => parseModel(formula, { parameters: parameters as never })).toThrow(InputError);
    expect(() => parseModel(formula, { parameters: parameters as never })).toThrow(message);
  });

  test.each([0, -1, 13, 1.5, Number.NaN, '2'])('a cell of %j', (cell) => {
    expect(() => parseModel('XX', { cell: cell as number })).toThrow(InputError);
  });

  test.each([null, undefined, 5, {}, ['XX']])('%j instead of text', (formula) => {
    expect(() => parseModel(formula as never)).toThrow(InputError);
  });
});

describe('hostile size', () => {
  const many = (piece: string, count: number) => piece.repeat(count);
  test.each<[string, string]>([
    ['beyond the longest formula', many('XX+', MAX_FORMULA_LENGTH)],
    ['opening parentheses', many('(', 199_999)],
    ['minus signs', many('-', 199_999)],
    ['digits', many('7', 199_999)],
    ['letters', many('X', 199_999)],
    ['names', many('a', 199_999)],
    ['subscripts', `X_{${many('1,', 90_000)}1}`],
    ['words', many('X ', 90_000)],
    ['powers of powers', `${many('(', 50)}7${many('^64)', 50)} XX`],
    ['projectors on many sites', Array.from({ length: 200 }, (_, i) => `(1+Z_${i})`).join('')],
    [
      'sums of sites to a high power',
      Array.from({ length: 60 }, (_, i) => `(X_${i}+Y_${i}+Z_${i}+1)`).join(''),
    ],
    [
      'denominators without a common factor',
      Array.from({ length: 9_000 }, (_, i) => `XX/${10_000_019 + 2 * i}${i}`).join('+'),
    ],
    ['tiny numbers multiplied', `${many('(1/3)', 20_000)} XX`],
    ['quotients', `XX${many('/3', 50_000)}`],
    [
      'more strings than the limit',
      Array.from({ length: MAX_TERMS + 1 }, (_, i) => i.toString(4).padStart(8, '0'))
        .map((w) => w.replace(/./g, (d) => LETTERS[Number(d)]!))
        .join('+'),
    ],
  ])('%s: refused in time', (_, formula) => {
    const start = performance.now();
    expect(() => parseModel(formula)).toThrow(InputError);
    // Generous; a quadratic slip would take minutes.
    expect(performance.now() - start).toBeLessThan(10_000);
  });

  test('a long sum within the limits is read', () => {
    const words = Array.from(
      { length: 8_000 },
      (_, i) =>
        `X${i
          .toString(4)
          .padStart(8, '0')
          .replace(/./g, (d) => LETTERS[Number(d)]!)}`,
    );
    const h = parseModel(words.map((w, i) => `${i + 1}/7 ${w}`).join(' + '));
    expect(h.density.size).toBe(8_000);
    expect(parseModel(h.density.toString()).density.equals(h.density)).toBe(true);
  });

  property('random text is read or refused at a place inside it', 2_000, (random) => {
    const alphabet = [
      'X',
      'Y',
      'Z',
      'I',
      'a',
      'J',
      '_',
      '{',
      '}',
      ',',
      '(',
      ')',
      '+',
      '-',
      '*',
      '/',
      '^',
      '.',
      ' ',
      '0',
      '1',
      '2',
      'j',
      'é',
      '\u0000',
      '𝐗',
    ];
    let text = '';
    for (let i = random.integer(0, 14); i > 0; i--) text += random.pick(alphabet);
    try {
      parseModel(text, { cell: random.integer(1, 2) });
    } catch (error) {
      expect(error).toBeInstanceOf(InputError);
      const { source } = error as InputError;
      expect(source !== undefined && source.offset >= 0 && source.offset <= text.length).toBe(true);
    }
  });
});

test('a Hamiltonian is frozen, and a zero one does not exist', () => {
  const h = parseModel('XX');
  expect(Object.isFrozen(h)).toBe(true);
  expect(() => hamiltonianOf(h.chain, Operator.of({ I: 1 }))).toThrow(HoldfastError);
  expect(parseModel('XX + XY').reflection).toBeNull();
  expect(parseModel('XX + XY + YX').reflection).toBe('spins');
});

describe('letters on the sites of another lattice', () => {
  // A window of 3 × 3 sites of a plane, row by row.
  const plane = (formula: string, parameters = {}): string =>
    parseSites(
      formula,
      ({ sites }) => {
        const low = [0, 1].map((axis) => Math.min(...sites.map((s) => s.coordinates[axis]!.value)));
        return ({ coordinates: [x, y] }) => 3 * (y!.value - low[1]!) + x!.value - low[0]!;
      },
      parameters,
    ).toString();

  test('the caller places them', () => {
    expect(plane('X_{0,0} X_{1,0} + J X_{0,0} X_{0,1}', { J: '1/2' })).toBe('1/2 XIIX + XX');
    expect(plane('Z_{-1,-1} Z_{0,0}')).toBe('ZIIIZ');
  });

  test('words have no place', () => {
    expect(() => plane('X_{0,0} + 2 XX')).toThrow(/got a word at position 13/);
    expect(() => plane('J X_{0,0}')).toThrow(/no value for J/);
  });
});
