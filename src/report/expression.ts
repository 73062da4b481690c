/** A grouped density as a row of tokens, and its lines: text, LaTeX and MathML differ only in how they write a token. */
import { type Rational, textFromRational } from '../algebra/rational.ts';
import type { Word } from '../algebra/word.ts';
import type { Chain } from '../lattice/chain.ts';
import { type GroupedDensity, type TermGroup, wordText } from './grouping.ts';

export type Token =
  /** Between two terms; lines are broken in front of it. */
  | { readonly kind: 'plus' | 'minus' }
  /** The sign of the first term. */
  | { readonly kind: 'negative' }
  | { readonly kind: 'open' | 'close' }
  /** Positive, and not 1. */
  | { readonly kind: 'factor'; readonly value: Rational }
  | { readonly kind: 'word'; readonly word: Word };

/** Brackets stand around the groups where they share a factor, and around a group where its words do. */
export function tokensOf({ common, groups }: GroupedDensity): Token[] {
  if (groups.length === 1) return groupTokens(groups[0]!, common, true);
  const inner = groups.flatMap((group, i) => groupTokens(group, { numerator: 1n, denominator: 1n }, i === 0));
  return isOne(common)
    ? inner
    : [{ kind: 'factor', value: common }, { kind: 'open' }, ...inner, { kind: 'close' }];
}

function groupTokens({ factor, terms }: TermGroup, common: Rational, first: boolean): Token[] {
  const negative = factor < 0n;
  const size = {
    numerator: (negative ? -factor : factor) * common.numerator,
    denominator: common.denominator,
  };
  const bracket = terms.length > 1 && (negative || !isOne(size));
  const words = terms.flatMap(({ sign, word }, i): Token[] => [
    ...(i === 0 ? [] : [{ kind: sign < 0 ? 'minus' : 'plus' } as const]),
    { kind: 'word', word },
  ]);
  return [
    ...(first
      ? negative
        ? [{ kind: 'negative' } as const]
        : []
      : [{ kind: negative ? 'minus' : 'plus' } as const]),
    ...(isOne(size) ? [] : [{ kind: 'factor', value: size } as const]),
    ...(bracket ? [{ kind: 'open' } as const, ...words, { kind: 'close' } as const] : words),
  ];
}

function isOne({ numerator, denominator }: Rational): boolean {
  return numerator === 1n && denominator === 1n;
}

/** Lines of at most `width` characters as `tokenText` counts them; a single term is never broken, however long. */
export function linesOf(chain: Chain, tokens: readonly Token[], width: number): Token[][] {
  const terms: Token[][] = [[]];
  for (const token of tokens) {
    if (token.kind === 'plus' || token.kind === 'minus') terms.push([]);
    terms.at(-1)!.push(token);
  }
  const lines: Token[][] = [[]];
  let used = 0;
  for (const term of terms) {
    const length = term.reduce((sum, token) => sum + tokenText(chain, token).length, 0);
    if (used > 0 && used + length > width) {
      lines.push([]);
      used = 0;
    }
    lines.at(-1)!.push(...term);
    used += length;
  }
  return lines;
}

/** A token as plain text, blanks included. */
export function tokenText(chain: Chain, token: Token): string {
  switch (token.kind) {
    case 'plus':
      return ' + ';
    case 'minus':
      return ' - ';
    case 'negative':
      return '-';
    case 'open':
      return '(';
    case 'close':
      return ')';
    case 'factor':
      return `${textFromRational(token.value)} `;
    case 'word':
      return wordText(chain, token.word);
  }
}
