/**
 * A density in the notation of the trade, exact: `Jx XX + Jy YY - 1/2 (XX - 2 g ZIZ) + h (X + Z)`, or site by site,
 * `X_0 X_1 + Z_{0,a} Z_{1,b}`. The notation is described in `docs/model.md`, its grammar in `syntax.ts`.
 *
 * Text → syntax tree → combination of Pauli strings with polynomials in the free parameters as coefficients → exact values.
 */
import type { Operator } from '../algebra/operator.ts';
import { Polynomial } from '../algebra/polynomial.ts';
import { divide, type Exact, exact, MAX_NUMBER_LENGTH, ONE, type Rational } from '../algebra/rational.ts';
import { compareWords, product, spanOf, textFromWord, type Word } from '../algebra/word.ts';
import { InputError, show } from '../errors.ts';
import { Chain } from '../lattice/chain.ts';
import { type Hamiltonian, hamiltonianOf } from './hamiltonian.ts';
import {
  isReadable,
  isWithinBits,
  MAX_COEFFICIENT_BITS,
  MAX_DEGREE,
  MAX_NAME_LENGTH,
  MAX_PARAMETERS,
  MAX_TERMS,
  MAX_WORD_LENGTH,
  MAX_WORK,
  operatorOf,
} from './limits.ts';
import { type Node, parseSyntax, type Site, type Syntax } from './syntax.ts';
import { isParameterName, refuse } from './tokens.ts';

export interface FormulaOptions {
  /** Spins a cell, 1 by default; translations move by one cell. */
  readonly cell?: number;
  /** Values of the parameters: exact text such as `1/3`, bigints, safe integers, fractions. */
  readonly parameters?: Parameters;
}

export type Parameters = Readonly<Record<string, Exact>> | ReadonlyMap<string, Exact>;

/** A density whose coefficients are polynomials in free parameters. */
export interface Family {
  readonly chain: Chain;
  /** The free parameters, in the order in which they appear in the formula: the variables of the polynomials. */
  readonly parameters: readonly string[];
  /** Representatives in alphabetical order, with coefficients that are not zero; without the identity. */
  readonly terms: readonly (readonly [Word, Polynomial])[];
}

/**
 * Reads a Hamiltonian on a chain; translates of a word are the same, a constant is dropped.
 *
 * @throws InputError with the position in the formula: what is not in the notation, a parameter without a value, a value that is
 *   not exact or belongs to no parameter, a product of words, a result that is zero or not Hermitian, anything beyond the limits
 */
export function parseModel(formula: string, options: FormulaOptions = {}): Hamiltonian {
  const chain = new Chain(options.cell ?? 1);
  const density = chain.normalise(densityOf(formula, chain, options.parameters));
  if (density.isZero()) throw nothingLeft(formula);
  return hamiltonianOf(chain, density);
}

/** Reads a density as it stands: words begin on spin 0, a constant stays. Zero is allowed. Reads back what `Operator` prints. */
export function parseDensity(formula: string, options: FormulaOptions = {}): Operator {
  return densityOf(formula, new Chain(options.cell ?? 1), options.parameters);
}

/**
 * Reads a density some of whose parameters stay free.
 *
 * @throws InputError as `parseModel`; also for a free parameter that multiplies no word, or divides one
 */
export function parseFamily(formula: string, options: FormulaOptions = {}): Family {
  const chain = new Chain(options.cell ?? 1);
  const syntax = parseSyntax(formula);
  const values = valuesOf(syntax, options.parameters);
  const parameters = [...syntax.names.keys()].filter((name) => !values.has(name));
  if (parameters.length > MAX_PARAMETERS)
    throw new InputError('formula', `at most ${MAX_PARAMETERS} free parameters`, `${parameters.length}`);
  const sum = new Map<Word, Polynomial>();
  for (const [word, coefficient] of evaluate(syntax, chain, values, parameters)) {
    const representative = chain.representative(word);
    if (representative === 0n) continue;
    const total = (sum.get(representative) ?? Polynomial.zero).plus(coefficient);
    if (total.isZero()) sum.delete(representative);
    else sum.set(representative, total);
  }
  if (sum.size === 0) throw nothingLeft(formula);
  const degrees = [...sum.values()].map((p) => p.degrees(parameters.length));
  parameters.forEach((name, v) => {
    if (degrees.every((d) => d[v] === 0))
      refuse(
        formula,
        syntax.names.get(name)!,
        'every free parameter in the coefficient of a word',
        unused(name),
      );
  });
  return Object.freeze({
    chain,
    parameters: Object.freeze(parameters),
    terms: Object.freeze([...sum].sort(([a], [b]) => compareWords(a, b))),
  });
}

/**
 * The member of a family at a point: one exact value a free parameter, in the order of `family.parameters`.
 *
 * @throws InputError when the number of values differs, or the density is zero there
 */
export function familyAt(family: Family, point: readonly Exact[]): Hamiltonian {
  if (point.length !== family.parameters.length)
    throw new InputError('family', `${family.parameters.length} values`, `${point.length}`);
  const values = point.map(exact);
  return hamiltonianOf(
    family.chain,
    operatorOf(
      'family',
      family.terms.map(([word, p]) => [word, p.evaluate(values)] as const),
    ),
  );
}

function densityOf(formula: string, chain: Chain, parameters: Parameters | undefined): Operator {
  const syntax = parseSyntax(formula);
  const values = valuesOf(syntax, parameters);
  for (const [name, at] of syntax.names)
    if (!values.has(name)) refuse(formula, at, 'a value for every parameter', unbound(name));
  return operatorOf(
    'formula',
    [...evaluate(syntax, chain, values, [])].map(([word, p]) => [word, p.asConstant()!] as const),
  );
}

/** Names of parameters are checked here, so no key of a foreign object is ever used as a property. */
function valuesOf(syntax: Syntax, parameters: Parameters = {}): ReadonlyMap<string, Rational> {
  const values = new Map<string, Rational>();
  for (const [name, value] of parameters instanceof Map ? parameters : Object.entries(parameters)) {
    if (!isParameterName(name))
      throw new InputError(
        'parameters',
        `names of up to ${MAX_NAME_LENGTH} letters, digits, _ and ', not made of I X Y Z alone`,
        show(name),
      );
    if (!syntax.names.has(name))
      throw new InputError('parameters', 'parameters of the formula', `${show(name)}, which it does not use`);
    try {
      values.set(name, exact(value as Exact));
    } catch (error) {
      if (!(error instanceof InputError)) throw error;
      throw new InputError(`parameter ${name}`, error.expected, error.got);
    }
  }
  return values;
}

function unbound(name: string): string {
  const word = /[IXYZ]+$/.exec(name)?.[0];
  const hint =
    word === undefined || word.length === name.length
      ? ''
      : ` (a product is written ${name.slice(0, -word.length)} ${word})`;
  return `no value for ${name}${hint}`;
}

function unused(name: string): string {
  return unbound(name).replace('no value for ', '');
}

function nothingLeft(text: string): InputError {
  return new InputError('formula', 'a term that acts on a spin', 'zero or a constant', { text, offset: 0 });
}

/** A coefficient on its way: products of letters on one site bring factors of i, which must cancel in the end. */
interface Complex {
  readonly re: Polynomial;
  readonly im: Polynomial;
}

interface Value {
  /** What may still multiply it: words have no place on the chain, so a product of words means nothing. */
  readonly kind: 'scalar' | 'sites' | 'words';
  readonly terms: ReadonlyMap<Word, Complex>;
}

function evaluate(
  syntax: Syntax,
  chain: Chain,
  values: ReadonlyMap<string, Rational>,
  free: readonly string[],
): Map<Word, Polynomial> {
  const { text } = syntax;
  const spinOf = placement(syntax, chain);
  let work = 0;
  /** Where a factor of i first arose. */
  let imaginaryAt = -1;

  const spend = (steps: number, at: number): void => {
    work += steps;
    if (work > MAX_WORK)
      refuse(text, at, `a formula of at most ${MAX_WORK} steps when multiplied out`, 'more');
  };
  /** Adds to a coefficient. Looks at the size every time: a sum of many fractions grows with every one of them. */
  const accumulate = (terms: Map<Word, Complex>, word: Word, { re, im }: Complex, at: number): void => {
    const old = terms.get(word) ?? COMPLEX_ZERO;
    const total = { re: old.re.plus(re), im: old.im.plus(im) };
    if (total.re.isZero() && total.im.isZero()) {
      terms.delete(word);
      return;
    }
    spend(total.re.size + total.im.size, at);
    for (const p of [total.re, total.im]) {
      if (!(isWithinBits(p.denominator) && [...p.numerators.values()].every(isWithinBits)))
        refuse(text, at, `coefficients of at most ${MAX_COEFFICIENT_BITS} bits`, 'a longer one');
      if (p.degrees(free.length).some((d) => d > MAX_DEGREE))
        refuse(text, at, `powers of a parameter up to ${MAX_DEGREE}`, 'a higher one');
    }
    terms.set(word, total);
    if (terms.size > MAX_TERMS) refuse(text, at, `at most ${MAX_TERMS} Pauli strings`, 'more');
  };
  const scalar = (p: Polynomial): Value => ({
    kind: 'scalar',
    terms: p.isZero() ? new Map() : new Map([[0n, { re: p, im: Polynomial.zero }]]),
  });

  function valueAt(node: Node): Value {
    switch (node.kind) {
      case 'number':
        return scalar(Polynomial.constant(node.value));
      case 'name': {
        const value = values.get(node.name);
        return scalar(
          value === undefined ? Polynomial.variable(free.indexOf(node.name)) : Polynomial.constant(value),
        );
      }
      case 'word':
        return { kind: 'words', terms: new Map([[node.word, REAL_ONE]]) };
      case 'site':
        return {
          kind: 'sites',
          terms: new Map([[BigInt(node.letter) << BigInt(2 * spinOf(node)), REAL_ONE]]),
        };
      case 'sum':
        return sumOf(node);
      case 'product':
        return node.parts
          .map(({ inverse, node: part }) => ({
            value: inverse ? inverseOf(part) : valueAt(part),
            at: part.at,
          }))
          .reduce(({ value: a }, { value: b, at }) => ({ value: productOf(a, b, at), at })).value;
      case 'power':
        return powerOf(node.base, node.exponent);
    }
  }

  function sumOf(node: Extract<Node, { kind: 'sum' }>): Value {
    const terms = new Map<Word, Complex>();
    let kind: Value['kind'] = 'scalar';
    for (const { negative, node: part } of node.parts) {
      const value = valueAt(part);
      if (value.kind === 'words' || kind === 'scalar') kind = value.kind;
      for (const [word, coefficient] of value.terms)
        accumulate(terms, word, negative ? turn(coefficient, 2) : coefficient, part.at);
    }
    return { kind, terms: terms };
  }

  function productOf(a: Value, b: Value, at: number): Value {
    if (a.kind !== 'scalar' && b.kind !== 'scalar' && (a.kind === 'words' || b.kind === 'words'))
      refuse(
        text,
        at,
        'a sum, or a product of single letters with sites as in X_0 X_1 (words have no fixed place)',
        'a product of two words',
      );
    const sum = new Map<Word, Complex>();
    for (const [u, x] of a.terms)
      for (const [v, y] of b.terms) {
        spend((x.re.size + x.im.size) * (y.re.size + y.im.size), at);
        const { word, phase } = product(u, v);
        if ((phase & 1) === 1 && imaginaryAt < 0) imaginaryAt = at;
        accumulate(sum, word, turn(multiply(x, y), phase), at);
      }
    return { kind: a.kind === 'scalar' ? b.kind : a.kind, terms: sum };
  }

  function scalarOf(node: Node, use: string): Polynomial {
    const value = valueAt(node);
    if (value.kind !== 'scalar') refuse(text, node.at, `a scalar as ${use}`, 'Pauli letters');
    return value.terms.get(0n)?.re ?? Polynomial.zero;
  }

  function reciprocal(p: Polynomial, at: number): Polynomial {
    const constant = p.asConstant();
    if (constant === undefined)
      refuse(text, at, 'a division by a constant', `${p.toString(free)}, which has a free parameter`);
    if (constant.numerator === 0n) refuse(text, at, 'a divisor other than 0', '0');
    return Polynomial.constant(divide(ONE, constant));
  }

  function inverseOf(node: Node): Value {
    return scalar(reciprocal(scalarOf(node, 'a divisor'), node.at));
  }

  function powerOf(node: Node, exponent: number): Value {
    const base = scalarOf(node, 'the base of a power');
    let power = scalar(Polynomial.one);
    const factor = scalar(exponent < 0 ? reciprocal(base, node.at) : base);
    for (let e = Math.abs(exponent); e > 0; e--) power = productOf(power, factor, node.at);
    return power;
  }

  const result = new Map<Word, Polynomial>();
  for (const [word, { re, im }] of valueAt(syntax.root).terms) {
    if (!im.isZero())
      refuse(
        text,
        Math.max(0, imaginaryAt),
        'a Hermitian density',
        `the anti-Hermitian part i (${im.toString(free)}) ${textFromWord(word)}`,
      );
    if (spanOf(word) > MAX_WORD_LENGTH)
      refuse(text, 0, `words of at most ${MAX_WORD_LENGTH} letters`, `${spanOf(word)}`);
    for (const monomial of re.numerators.keys())
      if (!isReadable(re.coefficient(monomial)))
        refuse(text, 0, `coefficients of at most ${MAX_NUMBER_LENGTH} characters`, 'a longer one');
    result.set(word, re);
  }
  return result;
}

/**
 * Subscripts to spins on a chain. One number counts spins along the chain, as words do; two count cells, then spins of the cell,
 * which may be letters (a = 0). The whole formula moves by cells so that its first site lies in cell 0.
 */
function placement({ text, sites }: Syntax, chain: Chain): (site: Site) => number {
  const absolute = (site: Site): number => {
    const { at, coordinates, leg } = site;
    const [first, second] = coordinates;
    if (coordinates.length > 2 || (coordinates.length === 2 && leg !== null))
      refuse(text, at, 'on a chain, a cell and a spin of the cell', `${coordinates.length} numbers`);
    if (second?.index != null) refuse(text, at, 'a running index in the first place', show(second.index));
    const inCell = leg ?? second?.value ?? null;
    if (inCell === null) {
      if (first!.index !== null && chain.cell > 1)
        refuse(text, at, `a spin of the cell after the index: X_{${first!.index},a}`, 'the index alone');
      return first!.value;
    }
    if (!(inCell >= 0 && inCell < chain.cell))
      refuse(text, at, `a spin of a cell of ${chain.cell}, counted from 0 or a`, `spin ${inCell}`);
    return first!.value * chain.cell + inCell;
  };
  let base = Infinity;
  const index = sites[0]?.coordinates[0]?.index ?? null;
  for (const site of sites) {
    if (site.coordinates[0]!.index !== index)
      refuse(
        text,
        site.at,
        'the same running index, or none, at all sites',
        `${site.coordinates[0]!.index ?? 'none'}`,
      );
    base = Math.min(base, Math.floor(absolute(site) / chain.cell));
  }
  for (const site of sites)
    if (absolute(site) - base * chain.cell >= MAX_WORD_LENGTH)
      refuse(text, site.at, `sites within ${MAX_WORD_LENGTH} spins of one another`, 'a farther one');
  return (site) => absolute(site) - base * chain.cell;
}

const COMPLEX_ZERO: Complex = { re: Polynomial.zero, im: Polynomial.zero };
const REAL_ONE: Complex = { re: Polynomial.one, im: Polynomial.zero };

function multiply(a: Complex, b: Complex): Complex {
  if (a.im.isZero() && b.im.isZero()) return { re: a.re.times(b.re), im: Polynomial.zero };
  return {
    re: a.re.times(b.re).minus(a.im.times(b.im)),
    im: a.re.times(b.im).plus(a.im.times(b.re)),
  };
}

/** Times i^phase. */
function turn({ re, im }: Complex, phase: number): Complex {
  if (phase === 0) return { re, im };
  if (phase === 2) return { re: Polynomial.zero.minus(re), im: Polynomial.zero.minus(im) };
  const turned = { re: Polynomial.zero.minus(im), im: re };
  return phase === 1 ? turned : { re: im, im: Polynomial.zero.minus(re) };
}
