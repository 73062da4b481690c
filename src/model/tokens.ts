/** Formula text to tokens. The letters, numbers, names and subscripts of `docs/model.md`, each with its place in the text. */
import { MAX_NUMBER_LENGTH, type Rational, rationalFromText } from '../algebra/rational.ts';
import { LETTERS, type Word, wordFromText } from '../algebra/word.ts';
import { InputError, show } from '../errors.ts';
import { MAX_FORMULA_LENGTH, MAX_NAME_LENGTH, MAX_WORD_LENGTH } from './limits.ts';

/** Largest site number. */
const MAX_SITE = 1_000_000;
/** Most numbers in one subscript. */
const MAX_COORDINATES = 4;

/** One number in a subscript: `3`, `j`, `j+1`, `j-2`; `index` is the running letter. */
export interface Coordinate {
  readonly index: string | null;
  readonly value: number;
}

export type Token = { readonly at: number } & (
  | { readonly kind: 'number'; readonly value: Rational }
  | { readonly kind: 'word'; readonly word: Word }
  | { readonly kind: 'name'; readonly name: string }
  | {
      readonly kind: 'site';
      readonly letter: number;
      readonly coordinates: readonly Coordinate[];
      /** The letter that ends a subscript and names a spin of the cell, a = 0. */
      readonly leg: number | null;
    }
  | { readonly kind: '+' | '-' | '*' | '/' | '^' | '(' | ')' | 'end' }
);

/** Refuses a formula at a place in its text. */
export function refuse(text: string, offset: number, expected: string, got: string): never {
  throw new InputError('formula', expected, got, { text, offset });
}

/** Greek capitals that look like Latin letters stay out: an imitation X must not pass for a parameter. */
const NAME_LETTER = 'A-Za-zα-ωΓΔΘΛΞΠΣΦΨΩϑϕϵ';
/** The name of a parameter: letters, digits, `_` and `'`; not a word over I X Y Z, nor what looks like a site. */
export const PARAMETER_NAME = new RegExp(`^(?![IXYZ]+(?:\\d*$|_))[${NAME_LETTER}][${NAME_LETTER}0-9_']*$`);
const RUN = new RegExp(`[${NAME_LETTER}][${NAME_LETTER}0-9_']*`, 'y');
const PAULI = /^[IXYZ]+$/;
const SITE = /[IXYZ]_/y;
const NUMBER = /\d+(?:\.\d+)?|\.\d+/y;
const EXPONENT = /[eE][+-]?\d/y;
const SUBSCRIPT = /_(?:(\d+)|([a-z])|\{([^{}]*)\})/y;
const COORDINATE = /^\s*(?:([a-z])\s*(?:([+\-−])\s*(\d+))?|([+\-−]?)\s*(\d+))\s*$/;
const SYMBOLS: Readonly<Record<string, '+' | '-' | '*' | '/' | '^' | '(' | ')'>> = Object.freeze({
  '+': '+',
  '-': '-',
  '−': '-',
  '*': '*',
  '·': '*',
  '⋅': '*',
  '×': '*',
  '/': '/',
  '^': '^',
  '(': '(',
  ')': ')',
});

/** Is this text the name of a parameter, and not too long? */
export function isParameterName(text: string): boolean {
  return text.length <= MAX_NAME_LENGTH && PARAMETER_NAME.test(text);
}

/** @throws InputError at the first character that begins no token, and for over-long texts, words, names and numbers */
export function tokenise(text: string): Token[] {
  if (typeof text !== 'string') throw new InputError('formula', 'a text', show(text));
  if (text.length > MAX_FORMULA_LENGTH)
    throw new InputError('formula', `at most ${MAX_FORMULA_LENGTH} characters`, `${text.length}`);
  const tokens: Token[] = [];
  let at = 0;
  const take = (pattern: RegExp): RegExpExecArray | null => {
    pattern.lastIndex = at;
    return pattern.exec(text);
  };
  while (at < text.length) {
    if (/\s/.test(text[at]!)) {
      at++;
      continue;
    }
    const symbol = Object.hasOwn(SYMBOLS, text[at]!) ? SYMBOLS[text[at]!] : undefined;
    if (symbol !== undefined) {
      tokens.push({ kind: symbol, at });
      at++;
      continue;
    }
    const number = take(NUMBER)?.[0];
    if (number !== undefined) {
      if (number.length > MAX_NUMBER_LENGTH)
        refuse(text, at, `a number of at most ${MAX_NUMBER_LENGTH} characters`, `${number.length}`);
      tokens.push({ kind: 'number', value: rationalFromText(number), at });
      at += number.length;
      if (take(EXPONENT) !== null)
        refuse(
          text,
          at,
          'a number without an exponent (for a parameter, leave a space before its name)',
          show(text[at]),
        );
      continue;
    }
    if (take(SITE) !== null) {
      const { token, end } = readSite(text, at);
      tokens.push(token);
      at = end;
      continue;
    }
    const run = take(RUN)?.[0];
    if (run === undefined)
      refuse(
        text,
        at,
        'a number, a word over I X Y Z, a parameter, an operation or a parenthesis',
        show(String.fromCodePoint(text.codePointAt(at)!)),
      );
    tokens.push(readRun(text, at, run));
    at += run.length;
  }
  tokens.push({ kind: 'end', at: text.length });
  return tokens;
}

/** A run of letters, digits and `_`: a word when it is made of I, X, Y, Z alone, else a name. */
function readRun(text: string, at: number, run: string): Token {
  if (PAULI.test(run)) {
    if (run.length > MAX_WORD_LENGTH)
      refuse(text, at, `a word of at most ${MAX_WORD_LENGTH} letters`, `${run.length}`);
    return { kind: 'word', word: wordFromText(run), at };
  }
  if (run.length > MAX_NAME_LENGTH)
    refuse(text, at, `a parameter name of at most ${MAX_NAME_LENGTH} characters`, `${run.length}`);
  if (/^[IXYZ]+\d+$/.test(run))
    refuse(text, at, 'a parameter name, or a site as in X_0 or X_{0,1}', show(run));
  if (/^[IXYZ]{2,}_/.test(run)) refuse(text, at, 'one letter before a subscript, as in X_0 X_1', show(run));
  if (/^(?:nan|inf|infinity)$/i.test(run)) refuse(text, at, 'a finite exact number', show(run));
  return { kind: 'name', name: run, at };
}

/** `X_0`, `X_j`, `X_{j+1}`, `Z_{0,a}`, `X_{1,0}`. */
function readSite(text: string, at: number): { token: Token; end: number } {
  SUBSCRIPT.lastIndex = at + 1;
  const match = SUBSCRIPT.exec(text);
  if (match === null) refuse(text, at + 1, 'a subscript: _0, _j or _{…}', show(text.slice(at + 1, at + 9)));
  const [whole, digits, letter, braced] = match;
  const parts = (digits ?? letter ?? braced!).split(',');
  if (parts.length > MAX_COORDINATES)
    refuse(text, at, `a subscript of at most ${MAX_COORDINATES} numbers`, `${parts.length}`);
  const last = parts.at(-1)!.trim();
  const leg = parts.length > 1 && /^[a-z]$/.test(last) ? last.charCodeAt(0) - 97 : null;
  const coordinates = (leg === null ? parts : parts.slice(0, -1)).map((part): Coordinate => {
    const found = COORDINATE.exec(part);
    if (found === null) refuse(text, at, 'site numbers as in X_0, X_{j+1}, Z_{0,a} or X_{1,0}', show(part));
    const [, index, shiftSign, shift, sign, plain] = found;
    const size = Number(shift ?? plain ?? '0');
    if (size > MAX_SITE) refuse(text, at, `site numbers up to ${MAX_SITE}`, show(part));
    const negative = (shiftSign ?? sign ?? '+') !== '+' && (shiftSign ?? sign) !== '';
    return { index: index ?? null, value: negative && size > 0 ? -size : size };
  });
  return {
    token: { kind: 'site', letter: LETTERS.indexOf(text[at]!), coordinates, leg, at },
    end: at + 1 + whole.length,
  };
}
