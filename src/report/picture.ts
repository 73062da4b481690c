/**
 * Pictures of charges as SVG: a row a string, a column a spin. Letters differ by shape as well as by tone, and a coefficient by its number,
 * its sign, and a bar whose shade and length both say its size: all of it survives a grey printer and any colour vision.
 */
import { textFromRational } from '../algebra/rational.ts';
import type { Charge, SearchResult } from '../search/result.ts';
import { groupTerms, type TermGroup, wordText } from './grouping.ts';
import { escapeMarkup } from './markup.ts';
import { foldGroups, restText } from './text.ts';
import { grouped, strings } from './verdict.ts';

const TILE = 16;
const ROW = 20;
/** Room for the largest bar. */
const BAR = 34;
/** Rows in a column of rows, when there are many. */
const ROWS = 24;
/** Strings drawn before the rest is only counted. */
const FOLD = 144;
const DIGIT = 7.2;
const INK = '#1d2935';
const FAINT = '#5b6875';

/** What each letter looks like on its tile of 16 × 16. The identity has no tile. */
const SHAPES: Readonly<Record<string, string>> = {
  I: `<circle cx="8" cy="8" r="1.4" fill="${FAINT}"/>`,
  X: `<rect width="16" height="16" rx="2" fill="${INK}"/><path d="M4 4 12 12M12 4 4 12" stroke="#fff" stroke-width="2.2" stroke-linecap="round"/>`,
  Y: '<rect width="16" height="16" rx="2" fill="#7e8f9f"/><circle cx="8" cy="8" r="4" fill="none" stroke="#fff" stroke-width="2.2"/>',
  Z: `<rect x=".6" y=".6" width="14.8" height="14.8" rx="2" fill="#eef1f4" stroke="${INK}" stroke-width="1.2"/><path d="M4 5.5h8M4 10.5h8" stroke="${INK}" stroke-width="2.2" stroke-linecap="round"/>`,
};

/** One charge. `name` goes to the title and into the ids, so that pictures can share a page. */
export function pictureOfCharge(charge: Charge, result: SearchResult, name: string, fold = FOLD): string {
  const { body, width, height } = drawCharge(charge, result, name, fold);
  return frame(`${name}: range ${charge.range}, ${strings(charge.density.size)}`, width, height, body, name);
}

/** All charges of a result, one below the other, with the legend. */
export function pictureOfResult(result: SearchResult, fold = FOLD): string {
  let y = 8;
  let width = 420;
  let body = '';
  result.charges.forEach((charge, i) => {
    const name = `Q${i + 1}`;
    const parity = charge.parity === null ? '' : `, ${charge.parity}`;
    body += label(
      8,
      y + 14,
      `${name}: range ${charge.range}${parity}, ${strings(charge.density.size)}`,
      INK,
      'font-weight="600"',
    );
    const drawn = drawCharge(charge, result, 'sheet', fold);
    body += `<g transform="translate(0 ${y + 24})">${drawn.body}</g>`;
    width = Math.max(width, drawn.width);
    y += drawn.height + 40;
  });
  if (result.charges.length === 0) {
    body += label(8, y + 14, `Nothing to draw up to range ${result.range}.`, INK);
    y += 40;
  }
  body += `<g transform="translate(8 ${y})">${legendBody('sheet')}</g>`;
  return frame(
    `Charges of range ≤ ${result.range}`,
    Math.max(width, LEGEND_WIDTH + 16),
    y + 34,
    body,
    'sheet',
  );
}

const LEGEND_WIDTH = 470;

/** What the shapes mean. */
export function legendPicture(): string {
  return frame(
    'Legend: letters and bars',
    LEGEND_WIDTH,
    26,
    `<g transform="translate(0 4)">${legendBody('legend')}</g>`,
    'legend',
  );
}

/** Strings of each charge against its range, on a logarithmic scale, with the numbers written out. */
export function growthPicture(result: SearchResult): string {
  const rows = result.charges.map((q, i) => ({ name: `Q${i + 1}`, range: q.range, size: q.density.size }));
  const most = Math.max(1, ...rows.map((r) => r.size));
  const scale = (size: number) => 12 + (228 * Math.log(size)) / Math.max(1, Math.log(most));
  const body = rows
    .map(({ name, range, size }, i) => {
      const y = i * ROW + 4;
      return `${label(4, y + 13, name, INK)}${label(44, y + 13, `range ${range}`, FAINT)}<rect x="112" y="${y + 3}" width="${scale(size).toFixed(1)}" height="11" fill="#7e8f9f"/>${label(118 + scale(size), y + 13, grouped(size), INK)}`;
    })
    .join('');
  return frame(
    'Strings of each charge, bars on a logarithmic scale',
    430,
    rows.length * ROW + 8,
    body,
    'growth',
  );
}

function drawCharge(
  { density }: Charge,
  { hamiltonian: h }: SearchResult,
  prefix: string,
  fold: number,
): { body: string; width: number; height: number } {
  const { shown, rest } = foldGroups(groupTerms(h, density), fold);
  const rows = shown.groups.flatMap(({ factor, terms }) =>
    terms.map(({ sign, word }) => ({ value: sign < 0 ? -factor : factor, word: wordText(h.chain, word) })),
  );
  const size = (value: bigint) => (value < 0n ? -value : value);
  let largest = 1n;
  for (const value of density.numerators.values()) if (size(value) > largest) largest = size(value);
  const numbers = rows.map(({ value }) =>
    coefficientText(value * shown.common.numerator, shown.common.denominator),
  );
  const digits = Math.max(...numbers.map((n) => n.length)) * DIGIT + 8;
  const spins = Math.max(...rows.map((r) => r.word.length));
  const { cell } = h.chain;
  const wide =
    digits + BAR + 8 + spins * (TILE + 2) + Math.floor((spins - 1) / cell) * (cell > 1 ? 6 : 0) + 22;
  const columns = Math.min(4, Math.ceil(rows.length / ROWS));
  const perColumn = Math.ceil(rows.length / columns);
  const body = rows.map(({ value, word }, i) => {
    const x = Math.floor(i / perColumn) * wide + 8;
    const y = (i % perColumn) * ROW;
    // Thousandths are exact enough for a shade; the number itself is written beside it.
    const share = Number((size(value) * shown.common.numerator * 1000n) / largest) / 1000;
    const tone = Math.round(222 - 190 * share);
    const tiles = [...word].map((letter, spin) => {
      const at = digits + BAR + 8 + spin * (TILE + 2) + (cell > 1 ? Math.floor(spin / cell) * 6 : 0);
      return `<use href="#${prefix}-${letter}" x="${at.toFixed(1)}" y="2"/>`;
    });
    return `<g transform="translate(${x.toFixed(1)} ${y})"><title>${numbers[i]} ${word}</title>${label(digits, 14, numbers[i]!, INK, 'text-anchor="end"')}<rect x="${(digits + 4).toFixed(1)}" y="5" width="${(4 + (BAR - 8) * share).toFixed(1)}" height="10" fill="rgb(${tone} ${tone} ${tone})" stroke="${INK}" stroke-width=".6"/>${tiles.join('')}</g>`;
  });
  let height = perColumn * ROW;
  let width = columns * wide + 8;
  if (rest.length > 0) {
    const lines = restLines(rest);
    lines.forEach((line, i) => void body.push(label(8, height + 18 + 16 * i, line, FAINT)));
    height += 14 + 16 * lines.length;
    width = Math.max(width, 620);
  }
  return { body: body.join(''), width, height };
}

function restLines(rest: readonly TermGroup[]): string[] {
  return restText(rest).match(/.{1,86}(?:\s|$)/g) ?? [];
}

function coefficientText(numerator: bigint, denominator: bigint): string {
  const text = textFromRational({ numerator: numerator < 0n ? -numerator : numerator, denominator });
  return `${numerator < 0n ? '−' : '+'}${text}`;
}

function legendBody(prefix: string): string {
  const names = { I: 'identity', X: 'X', Y: 'Y', Z: 'Z' };
  const keys = Object.entries(names).map(
    ([letter, name], i) =>
      `<use href="#${prefix}-${letter}" x="${i === 0 ? 0 : 44 + i * 46}" y="0"/>${label((i === 0 ? 0 : 44 + i * 46) + 21, 12, name, INK)}`,
  );
  return `${keys.join('')}${label(244, 12, 'bar: size against the largest', INK)}`;
}

function label(x: number, y: number, text: string, fill: string, more = ''): string {
  return `<text x="${x.toFixed(1)}" y="${y}" fill="${fill}"${more === '' ? '' : ` ${more}`}>${escapeMarkup(text)}</text>`;
}

function frame(title: string, width: number, height: number, body: string, prefix: string): string {
  const shapes = Object.entries(SHAPES)
    .filter(([letter]) => body.includes(`#${prefix}-${letter}"`))
    .map(([letter, shape]) => `<g id="${prefix}-${letter}">${shape}</g>`)
    .join('');
  return `<svg xmlns="http://www.w3.org/2000/svg" role="img" aria-label="${escapeMarkup(title)}" viewBox="0 0 ${Math.ceil(width)} ${Math.ceil(height)}" width="${Math.ceil(width)}" height="${Math.ceil(height)}" font-family="ui-monospace, 'DejaVu Sans Mono', monospace" font-size="12"><title>${escapeMarkup(title)}</title>${shapes === '' ? '' : `<defs>${shapes}</defs>`}${body}</svg>`;
}
