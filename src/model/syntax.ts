/**
 * Tokens to a syntax tree, by recursive descent:
 *
 *     sum     = { sign } product { ( "+" | "-" ) product }
 *     product = factor { [ "*" ] factor | "/" factor }
 *     factor  = { sign } atom [ "^" { sign } number ]        signs only first in a sum or after * and /
 *     atom    = number | word | name | site | "(" sum ")"
 *
 * Products and quotients are read from the left, so `1/2 ZZ` is (1/2) ZZ and `1/2 g ZZ` is (g/2) ZZ.
 */
import type { Rational } from '../algebra/rational.ts';
import type { Word } from '../algebra/word.ts';
import { show } from '../errors.ts';
import { MAX_NESTING, MAX_POWER } from './limits.ts';
import { refuse, type Token, tokenise } from './tokens.ts';

export type Site = Extract<Token, { kind: 'site' }>;

/** A node of the tree; `at` is where it begins in the text. */
export type Node = { readonly at: number } & (
  | { readonly kind: 'number'; readonly value: Rational }
  | { readonly kind: 'word'; readonly word: Word }
  | { readonly kind: 'name'; readonly name: string }
  | Site
  | { readonly kind: 'sum'; readonly parts: readonly { readonly negative: boolean; readonly node: Node }[] }
  | {
      readonly kind: 'product';
      readonly parts: readonly { readonly inverse: boolean; readonly node: Node }[];
    }
  | { readonly kind: 'power'; readonly base: Node; readonly exponent: number }
);

export interface Syntax {
  readonly text: string;
  readonly root: Node;
  /** The parameters in the order in which they appear, with the place of the first appearance. */
  readonly names: ReadonlyMap<string, number>;
  readonly sites: readonly Site[];
  /** Where the first word stands, if there is one. */
  readonly wordAt: number | null;
}

/** @throws InputError with the position of the first token that does not fit */
export function parseSyntax(text: string): Syntax {
  const tokens = tokenise(text);
  const names = new Map<string, number>();
  const sites: Site[] = [];
  let wordAt: number | null = null;
  let next = 0;
  let depth = 0;

  const peek = (): Token => tokens[next]!;
  const got = (token: Token): string =>
    token.kind === 'end' ? 'the end of the formula' : show(text.slice(token.at, tokens[next + 1]!.at).trim());

  /** Takes all signs that stand here; true when together they are a minus. */
  function signs(): boolean {
    let negative = false;
    for (; peek().kind === '+' || peek().kind === '-'; next++) if (peek().kind === '-') negative = !negative;
    return negative;
  }

  function sum(): Node {
    const at = peek().at;
    const parts = [{ negative: signs(), node: product() }];
    while (peek().kind === '+' || peek().kind === '-') parts.push({ negative: signs(), node: product() });
    return parts.length === 1 && !parts[0]!.negative ? parts[0]!.node : { kind: 'sum', parts, at };
  }

  function product(): Node {
    const at = peek().at;
    const parts = [{ inverse: false, node: factor() }];
    for (;;) {
      const { kind } = peek();
      if (kind === '*' || kind === '/') {
        next++;
        const sign = peek().at;
        const negative = signs();
        const node = factor();
        parts.push({
          inverse: kind === '/',
          node: negative ? { kind: 'sum', parts: [{ negative, node }], at: sign } : node,
        });
      } else if (kind === 'number' || kind === 'word' || kind === 'name' || kind === 'site' || kind === '(')
        parts.push({ inverse: false, node: factor() });
      else return parts.length === 1 ? parts[0]!.node : { kind: 'product', parts, at };
    }
  }

  function factor(): Node {
    const base = atom();
    if (peek().kind !== '^') return base;
    next++;
    const negative = signs();
    const token = peek();
    if (
      token.kind !== 'number' ||
      token.value.denominator !== 1n ||
      token.value.numerator > BigInt(MAX_POWER)
    )
      refuse(text, token.at, `a whole number up to ${MAX_POWER} as the exponent`, got(token));
    next++;
    if (peek().kind === '^') refuse(text, peek().at, 'one exponent (use parentheses for more)', got(peek()));
    const exponent = Number(token.value.numerator);
    return { kind: 'power', base, exponent: negative && exponent > 0 ? -exponent : exponent, at: base.at };
  }

  function atom(): Node {
    const token = peek();
    switch (token.kind) {
      case 'name':
        if (!names.has(token.name)) names.set(token.name, token.at);
        next++;
        return token;
      case 'site':
        sites.push(token);
        next++;
        return token;
      case 'word':
        wordAt ??= token.at;
        next++;
        return token;
      case 'number':
        next++;
        return token;
      case '(': {
        if (++depth > MAX_NESTING)
          refuse(text, token.at, `at most ${MAX_NESTING} parentheses inside one another`, 'more');
        next++;
        const node = { ...sum(), at: token.at };
        if (peek().kind !== ')') refuse(text, peek().at, 'an operation or ")"', got(peek()));
        next++;
        depth--;
        return node;
      }
      default:
        return refuse(text, token.at, 'a number, a word over I X Y Z, a parameter or "("', got(token));
    }
  }

  const root = sum();
  if (peek().kind !== 'end') refuse(text, peek().at, 'an operation or the end of the formula', got(peek()));
  return { text, root, names, sites, wordAt };
}
