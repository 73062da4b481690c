/** Results as LaTeX: needs `amsmath` and nothing else. */
import type { Operator } from '../algebra/operator.ts';
import type { Rational } from '../algebra/rational.ts';
import type { Chain } from '../lattice/chain.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { SearchResult } from '../search/result.ts';
import { linesOf, type Token, tokensOf, tokenText } from './expression.ts';
import { groupTerms, wordText } from './grouping.ts';
import { labelsOf, labelText } from './labels.ts';
import { addedByRange, CAUTIONS, strings, validityOf, verdictOf } from './verdict.ts';

/** Characters of plain text that fill a line of an article in LaTeX. */
const LINE = 62;

/** A density in full as mathematics without surroundings, in one line: `30\,XX + 25\,YY`, words upright. */
export function latexDensity(h: Hamiltonian, density: Operator): string {
  if (density.isZero()) return '0';
  return tokensOf(groupTerms(h, density))
    .map((token) => latexToken(h.chain, token))
    .join('');
}

/** `name = Σ_j […]_j` as an `align*` that may break across pages; every string is there. */
export function latexEquation(name: string, h: Hamiltonian, density: Operator): string {
  const lines = linesOf(h.chain, tokensOf(groupTerms(h, density)), LINE).map((line) =>
    line.map((token) => latexToken(h.chain, token)).join(''),
  );
  return `\\begin{align*}\n${name} &= \\sum_j \\bigl[\\, ${lines.join(' \\\\\n&\\qquad ')} \\,\\bigr]_j\n\\end{align*}`;
}

/** A document that compiles as it stands: model, verdict, charges in full, where it holds, cautions. */
export function latexResult(result: SearchResult): string {
  const { hamiltonian, charges, range, expansionOfH } = result;
  const { cell } = hamiltonian.chain;
  const example = cell === 1 ? ['XZ', 'X_j Z_{j+1}'] : [`X${'I'.repeat(cell - 1)}`, 'X_{j,1}'];
  const labels = labelsOf(result);
  const body = charges.flatMap((charge, i) => [
    `\\subsection*{$Q_{${i + 1}}$: range ${charge.range}${charge.parity === null ? '' : `, ${charge.parity}`}, ${strings(charge.density.size)}}`,
    ...(labels[i] ? [`${latexText(capital(labelText(labels[i])))}.`] : []),
    latexEquation(`Q_{${i + 1}}`, hamiltonian, charge.density),
  ]);
  const expansion = expansionOfH === null ? [] : [`\\[ H = ${combination(expansionOfH)} \\]`];
  return `${[
    '\\documentclass{article}',
    '\\usepackage{amsmath}',
    '\\allowdisplaybreaks',
    '\\begin{document}',
    `\\section*{Local charges of range $\\le ${range}$}`,
    latexEquation('H', hamiltonian, hamiltonian.density),
    `Words of Pauli letters run along the spins, ${cell === 1 ? 'one spin' : `${cell} spins`} a cell, and $[\\ldots]_j$ starts in cell $j$: $[\\mathrm{${example[0]}}]_j = ${example[1]}$.`,
    '',
    latexText(`${verdictOf(result)} ${validityOf(result)}`),
    '',
    `Charges by range $1, \\ldots, ${range}$: $${addedByRange(result).join(', ')}$.`,
    ...body,
    ...expansion,
    ...CAUTIONS.map((caution) => `\n${latexText(caution)}`),
    '\\end{document}',
  ].join('\n')}\n`;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}

/** Σ c_i Q_i without the zeros. */
function combination(coefficients: readonly Rational[]): string {
  let text = '';
  coefficients.forEach(({ numerator, denominator }, i) => {
    if (numerator === 0n) return;
    const size = { numerator: numerator < 0n ? -numerator : numerator, denominator };
    const factor = size.numerator === 1n && denominator === 1n ? '' : `${latexRational(size)}\\,`;
    text += `${numerator < 0n ? ' - ' : text === '' ? '' : ' + '}${factor}Q_{${i + 1}}`;
  });
  return text;
}

function latexToken(chain: Chain, token: Token): string {
  if (token.kind === 'factor') return `${latexRational(token.value)}\\,`;
  if (token.kind === 'word') return `\\mathrm{${cells(chain, wordText(chain, token.word))}}`;
  return tokenText(chain, token);
}

/** A thin space between cells of several spins. */
function cells(chain: Chain, word: string): string {
  return chain.cell === 1 ? word : word.match(new RegExp(`.{${chain.cell}}`, 'g'))!.join('\\,');
}

function latexRational({ numerator, denominator }: Rational): string {
  return denominator === 1n ? `${numerator}` : `\\tfrac{${numerator}}{${denominator}}`;
}

/** A sentence of ours; what is special to LaTeX is escaped. */
export function latexText(text: string): string {
  return text
    .replace(/[\\{}]/g, (c) => (c === '\\' ? '\\textbackslash{}' : `\\${c}`))
    .replace(/[#$%&_]/g, '\\$&')
    .replaceAll('≤', '$\\le$')
    .replaceAll('≥', '$\\ge$');
}
