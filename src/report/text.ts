/** Results as text for a terminal. Densities are printed so that the formula reader takes them back. */
import type { Operator } from '../algebra/operator.ts';
import { textFromRational } from '../algebra/rational.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { Charge, SearchResult } from '../search/result.ts';
import { type GroupedDensity, groupTerms, type TermGroup, wordText } from './grouping.ts';
import { addedByRange, CAUTIONS, expansionText, grouped, strings, validityOf, verdictOf } from './verdict.ts';

export interface TextOptions {
  /** Escape sequences for bold and faint. They only repeat what the words say. */
  readonly colour?: boolean;
  /** Charges with more strings are folded to about so many, with the count of the rest. `Infinity` prints all. */
  readonly fold?: number;
  /** Characters a line. A group's words are never broken. */
  readonly width?: number;
}

const FOLD = 24;
const WIDTH = 100;
const INDENT = '      ';

/** The whole answer: verdict, charges, counts, where it holds, and the cautions. */
export function printResult(result: SearchResult, options: TextOptions = {}): string {
  const { width = WIDTH, colour = false } = options;
  const style = (code: number, text: string) => (colour ? `\u001b[${code}m${text}\u001b[0m` : text);
  const prose = (line: string, code?: number) =>
    wrap(line.split(' '), width).map((l) => (code === undefined ? l : style(code, l)));
  const paragraphs = [prose(verdictOf(result), 1).join('\n')];
  result.charges.forEach((charge, i) => {
    const [head, ...body] = printCharge(charge, result.hamiltonian, options).split('\n');
    paragraphs.push(
      [`  ${style(1, `Q${i + 1}`)}  ${head}`, ...body.map((line) => `${INDENT}${line}`)].join('\n'),
    );
  });
  const counts = addedByRange(result)
    .map((added, j) => `${j + 1}: ${added}`)
    .join('   ');
  const notes = [
    expansionText(result),
    `New charges by range  ${counts}   (in all ${result.charges.length})`,
    validityOf(result),
    `Proved by exact re-multiplication of every charge and the rank of the equations modulo ${result.primes[0]}, among ${grouped(result.candidates)} candidates.`,
  ];
  paragraphs.push(notes.flatMap((line) => prose(line)).join('\n'));
  paragraphs.push(CAUTIONS.flatMap((line) => prose(line, 2)).join('\n'));
  return `${paragraphs.join('\n\n')}\n`;
}

/** A line about the charge, then its density; lines are not indented. */
export function printCharge(
  { range, parity, density }: Charge,
  h: Hamiltonian,
  { fold = FOLD, width = WIDTH }: TextOptions = {},
): string {
  const { shown, rest } = foldGroups(groupTerms(h, density), fold);
  const head = `range ${range}${parity === null ? '' : `, ${parity}`}, ${strings(density.size)}`;
  const lines = wrap(['Σ', ...pieces(h, shown)], width - INDENT.length, '  ');
  if (rest.length > 0) lines.push(...wrap(restText(rest).split(' '), width - INDENT.length, '  '));
  return [head, ...lines].join('\n');
}

/** A density as papers print it, in full, in one line: `1/2 (XX + YY) + 3 Z`. `parseDensity` reads it back. */
export function printDensity(h: Hamiltonian, density: Operator): string {
  const groups = groupTerms(h, density);
  return groups.groups.length === 0 ? '0' : pieces(h, groups).join(' ');
}

/** The first groups with at most `fold` strings, but at least one group, and the others. */
export function foldGroups(
  density: GroupedDensity,
  fold: number,
): { shown: GroupedDensity; rest: readonly TermGroup[] } {
  const { common, groups } = density;
  let taken = 0;
  let count = 0;
  while (taken < groups.length && (taken === 0 || count + groups[taken]!.terms.length <= fold))
    count += groups[taken++]!.terms.length;
  return { shown: { common, groups: groups.slice(0, taken) }, rest: groups.slice(taken) };
}

/** What was folded away: counts a pattern. */
export function restText(rest: readonly TermGroup[]): string {
  const patterns = new Map<string, number>();
  for (const { pattern, terms } of rest) patterns.set(pattern, (patterns.get(pattern) ?? 0) + terms.length);
  const total = rest.reduce((sum, g) => sum + g.terms.length, 0);
  const list = [...patterns].map(([pattern, count]) => `${pattern} ${grouped(count)}`);
  return `… and ${strings(total)} more, by pattern (* a letter, . the identity): ${list.join(', ')}`;
}

/** Words and signs between which a line may be broken. */
function pieces({ chain }: Hamiltonian, { common, groups }: GroupedDensity): string[] {
  const outer = common.numerator === 1n && common.denominator === 1n ? '' : textFromRational(common);
  const single = groups.length === 1;
  const parts = groups.flatMap(({ factor, terms }, i) => {
    const negative = factor < 0n;
    // A single group takes the common factor for its own, so there are never two brackets around it.
    const size = single && outer !== '' ? outer : `${negative ? -factor : factor}`;
    const sign = i > 0 ? [negative ? '-' : '+'] : [];
    const minus = i === 0 && negative ? '-' : '';
    const number = size === '1' ? (terms.length > 1 && minus !== '' ? '1 ' : '') : `${size} `;
    const words = terms.map(
      (t, at) => `${at === 0 ? '' : t.sign < 0 ? '- ' : '+ '}${wordText(chain, t.word)}`,
    );
    if (terms.length === 1) return [...sign, `${minus}${number}${words[0]}`];
    const open = `${minus}${number}(`;
    // A positive group of factor 1 needs no bracket.
    if (open === '(' && (i === 0 || !negative)) return [...sign, ...words.flatMap((w) => w.split(' '))];
    return [
      ...sign,
      `${open}${words[0]}`,
      ...words.slice(1, -1).flatMap((w) => w.split(' ')),
      ...`${words.at(-1)!})`.split(' '),
    ];
  });
  if (outer === '' || single) return parts;
  return [`${outer} (${parts[0]}`, ...parts.slice(1, -1), parts.length > 1 ? `${parts.at(-1)!})` : ''].filter(
    (p) => p !== '',
  );
}

/** Greedy lines of words; an operator begins a line rather than ending one. */
function wrap(words: readonly string[], width: number, indent = ''): string[] {
  const lines: string[] = [];
  let line = '';
  for (let i = 0; i < words.length; i++) {
    const operator = (words[i] === '+' || words[i] === '-') && i + 1 < words.length;
    const word = operator ? `${words[i]} ${words[++i]}` : words[i]!;
    if (line !== '' && line.length + 1 + word.length > width) {
      lines.push(line);
      line = `${indent}${word}`;
    } else line = line === '' ? word : `${line} ${word}`;
  }
  if (line !== '') lines.push(line);
  return lines;
}
