/**
 * Results for notebooks: one object that every kernel can show in the best form it knows. The keys are the media types of the Jupyter
 * messaging protocol (`display_data`, version 5), an open standard; kernels for JavaScript call the method named by
 * `Symbol.for('Jupyter.display')` to get them.
 */
import type { SearchResult } from '../search/result.ts';
import { latexDensity } from './latex.ts';
import { reportBody } from './page.ts';
import { pictureOfResult } from './picture.ts';
import { printResult } from './text.ts';

export const DISPLAY: unique symbol = Symbol.for('Jupyter.display') as never;

/** By media type. */
export interface Display {
  readonly 'text/plain': string;
  readonly 'text/html': string;
  readonly 'text/latex': string;
  readonly 'image/svg+xml': string;
}

/** A result that shows itself: as the last value of a cell, or by `toString()`. */
export function rich(result: SearchResult): { [DISPLAY](): Display; toString(): string } {
  return {
    [DISPLAY]: () => displayOf(result),
    toString: () => printResult(result),
  };
}

/** All forms at once. */
export function displayOf(result: SearchResult): Display {
  const { charges, hamiltonian: h } = result;
  const lines = charges.map(
    (q, i) => `Q_{${i + 1}} &= \\sum_j \\bigl[ ${latexDensity(h, q.density)} \\bigr]_j`,
  );
  return {
    'text/plain': printResult(result),
    'text/html': reportBody(result),
    'text/latex':
      lines.length === 0 ? '$\\text{no charge}$' : `\\begin{align*}\n${lines.join(' \\\\\n')}\n\\end{align*}`,
    'image/svg+xml': pictureOfResult(result),
  };
}
