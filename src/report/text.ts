/** Results as text for a terminal. Densities are printed so that the formula reader takes them back. */
import type { Operator } from '../algebra/operator.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { Charge, SearchResult } from '../search/result.ts';
import { linesOf, tokensOf, tokenText } from './expression.ts';
import { type GroupedDensity, groupTerms, type TermGroup } from './grouping.ts';
import { labelsOf, labelText } from './labels.ts';
import {
  addedByRange,
  byLemma,
  CAUTIONS,
  expansionText,
  grouped,
  strings,
  validityOf,
  verdictOf,
} from './verdict.ts';

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
    wrap(line, width).map((l) => (code === undefined ? l : style(code, l)));
  const paragraphs = [prose(verdictOf(result), 1).join('\n')];
  const labels = labelsOf(result);
  result.charges.forEach((charge, i) => {
    const [head, ...body] = printCharge(charge, result.hamiltonian, options).split('\n');
    const label = labels[i];
    if (label) body.unshift(...wrap(labelText(label), width - INDENT.length));
    paragraphs.push(
      [`  ${style(1, `Q${i + 1}`)}  ${head}`, ...body.map((line) => `${INDENT}${line}`)].join('\n'),
    );
  });
  const unlabelled = labels.includes(null);
  const counts = addedByRange(result)
    .map((added, j) => `${j + 1}: ${added}`)
    .join('   ');
  const notes = [
    ...(unlabelled
      ? ['The list is too long to say here what each charge owes to symmetries; holdfast algebra says it.']
      : []),
    expansionText(result),
    `New charges by range  ${counts}   (in all ${result.charges.length})`,
    validityOf(result),
    `Proved by exact re-multiplication of every charge and the rank of the equations modulo ${result.primes[0]}, among ${grouped(result.candidates)} candidates${byLemma(result)}.`,
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
  const room = width - INDENT.length;
  const lines = densityLines(h, shown, room - 2).map((line, i) => `${i === 0 ? 'Σ' : ' '} ${line}`);
  if (rest.length > 0)
    lines.push(...wrap(restText(rest), room - 2).map((line, i) => (i === 0 ? line : `  ${line}`)));
  return [head, ...lines].join('\n');
}

/** A density as papers print it, in full, in one line: `1/2 (XX + YY) + 3 Z`. `parseDensity` reads it back. */
export function printDensity(h: Hamiltonian, density: Operator): string {
  return density.isZero() ? '0' : densityLines(h, groupTerms(h, density), Number.POSITIVE_INFINITY).join('');
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

function densityLines({ chain }: Hamiltonian, density: GroupedDensity, width: number): string[] {
  return linesOf(chain, tokensOf(density), width).map((line) =>
    line
      .map((token) => tokenText(chain, token))
      .join('')
      .trim(),
  );
}

/** Greedy lines of a sentence. */
export function wrap(sentence: string, width: number): string[] {
  const lines: string[] = [];
  for (const word of sentence.split(' ')) {
    const last = lines.at(-1);
    if (last !== undefined && last.length + 1 + word.length <= width)
      lines[lines.length - 1] = `${last} ${word}`;
    else lines.push(word);
  }
  return lines;
}
