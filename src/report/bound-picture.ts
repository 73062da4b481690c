/** The curve of a bound against the range of the charges used, as SVG. */
import { type Rational, textFromRational } from '../algebra/rational.ts';
import type { MazurBound } from '../physics/overlaps.ts';
import { decimalText } from './decimal.ts';
import { escapeMarkup } from './markup.ts';

const [WIDTH, HEIGHT, LEFT, TOP, RIGHT, BOTTOM] = [560, 300, 60, 40, 20, 50];
const INK = '#1d2935';
const FAINT = '#5b6875';

/** Shares of (A|A) from 0 to 1. Every point carries its exact value as a title. */
export function boundPicture(bounds: readonly MazurBound[], title: string): string {
  const most = bounds.at(-1)?.range ?? 1;
  const x = (range: number) => LEFT + ((range - 0.5) / most) * (WIDTH - LEFT - RIGHT);
  const y = (share: Rational) => HEIGHT - BOTTOM - Number(decimalText(share, 6)) * (HEIGHT - TOP - BOTTOM);
  const text = (at: number, down: number, words: string, anchor = 'middle', fill = FAINT) =>
    `<text x="${at.toFixed(1)}" y="${down.toFixed(1)}" text-anchor="${anchor}" fill="${fill}">${escapeMarkup(words)}</text>`;
  let body = text(LEFT, 20, title, 'start', INK);
  for (let tenth = 0; tenth <= 10; tenth += 2) {
    const at = y({ numerator: BigInt(tenth), denominator: 10n });
    body += `<path d="M${LEFT} ${at.toFixed(1)}H${WIDTH - RIGHT}" stroke="#dfe4e9"/>${text(LEFT - 8, at + 4, `0.${tenth}`.replace('0.10', '1.0'), 'end')}`;
  }
  for (const { range } of bounds) body += text(x(range), HEIGHT - BOTTOM + 18, `${range}`);
  body += text((LEFT + WIDTH - RIGHT) / 2, HEIGHT - 12, 'largest range of the charges used');
  body += `<path d="M${bounds.map((b) => `${x(b.range).toFixed(1)} ${y(b.share).toFixed(1)}`).join('L')}" fill="none" stroke="${INK}" stroke-width="1.5"/>`;
  for (const { range, share } of bounds)
    body += `<circle cx="${x(range).toFixed(1)}" cy="${y(share).toFixed(1)}" r="4" fill="${INK}"><title>range ${range}: ${textFromRational(share)}</title></circle>`;
  return `<svg xmlns="http://www.w3.org/2000/svg" width="${WIDTH}" height="${HEIGHT}" viewBox="0 0 ${WIDTH} ${HEIGHT}" font-family="sans-serif" font-size="12" role="img"><title>${escapeMarkup(title)}</title><rect width="100%" height="100%" fill="#fff"/>${body}</svg>\n`;
}
