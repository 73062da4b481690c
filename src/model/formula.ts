/**
 * A density in the notation of the trade, exact: `Jx XX + Jy YY - 1/2 (XX - 2 g ZIZ) + h (X + Z)`, or site by site,
 * `X_0 X_1 + Z_{0,a} Z_{1,b}`. The notation is described in `docs/model.md`, its grammar in `syntax.ts`.
 *
 * Text → syntax tree → combination of Pauli strings with polynomials in the free parameters as coefficients → exact values.
 */
import type { Operator } from '../algebra/operator.ts';
import { Polynomial } from '../algebra/polynomial.ts';
import { type Exact, exact, type Rational } from '../algebra/rational.ts';
import { compareWords, type Word } from '../algebra/word.ts';
import { InputError, show } from '../errors.ts';
import { Chain } from '../lattice/chain.ts';
import { evaluate } from './evaluate.ts';
import { type Hamiltonian, hamiltonianOf } from './hamiltonian.ts';
import { MAX_NAME_LENGTH, MAX_PARAMETERS, operatorOf } from './limits.ts';
import { placeOnChain } from './sites.ts';
import { parseSyntax, type Site, type Syntax } from './syntax.ts';
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
 * Reads a density on any lattice, letters on sites alone: `X_{0,0} X_{1,0} + Z_{0,0,a}`. The caller gives every site a spin of a window
 * of its own, after a look at all of them, and refuses those that are not on the lattice. Zero is allowed.
 *
 * @throws InputError as `parseModel`, and for words, which have no place but on a chain
 */
export function parseSites(
  formula: string,
  place: (syntax: Syntax) => (site: Site) => number,
  parameters?: Parameters,
): Operator {
  const syntax = parseSyntax(formula);
  if (syntax.wordAt !== null)
    refuse(formula, syntax.wordAt, 'letters with a subscript, as in X_{0,0} X_{1,0}', 'a word');
  return boundOperator(syntax, place(syntax), parameters);
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
  for (const [word, coefficient] of evaluate(syntax, {
    spinOf: placeOnChain(syntax, chain),
    values,
    free: parameters,
  })) {
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
  return boundOperator(syntax, placeOnChain(syntax, chain), parameters);
}

function boundOperator(
  syntax: Syntax,
  spinOf: (site: Site) => number,
  parameters: Parameters | undefined,
): Operator {
  const values = valuesOf(syntax, parameters);
  for (const [name, at] of syntax.names)
    if (!values.has(name)) refuse(syntax.text, at, 'a value for every parameter', unbound(name));
  const terms = [...evaluate(syntax, { spinOf, values, free: [] })];
  return operatorOf(
    'formula',
    terms.map(([word, p]) => [word, p.asConstant()!] as const),
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
