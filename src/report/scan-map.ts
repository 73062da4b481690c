/**
 * The results of a scan over one or two parameters as SVG. A grid is drawn in the order of its values, a cell a point; points of lists and
 * samples stand at their values. Answers differ in colour and in pattern, and in a letter where there is room.
 */
import { rationalFromText } from '../algebra/rational.ts';
import { valuesOn } from '../scan/points.ts';
import { ticks } from './family-plot.ts';
import { escapeMarkup } from './markup.ts';
import { PALETTE } from './palette.ts';
import { answersIn, cautionsOf, labelOf, labelTitle, type ScanResults } from './scan-table.ts';
import { wrap } from './text.ts';

const SIDE = 460;
const LEFT = 92;
const TOP = 44;
/** Smallest side of a cell that takes a letter, and most cells with a text of their own. */
const LETTER_SIDE = 15;
const MAX_TITLES = 2_500;
/** Most answers with a mark of their own; the rarest share one. */
const MAX_ANSWERS = 14;

/** Strokes over the colour, 8 × 8: what tells two answers apart without it. */
const PATTERNS = [
  '',
  'M0 8L8 0M-2 2L2 -2M6 10L10 6',
  'M0 4H8',
  'M0 0L8 8M-2 6L2 10M6 -2L10 2',
  'M4 0V8',
  'M0 4H8M4 0V8',
  'M0 0L8 8M0 8L8 0',
] as const;

interface Mark {
  readonly label: string;
  readonly count: number;
  /** The letter, or nothing for points without an answer. */
  readonly letter: string;
  readonly colour: string;
  readonly pattern: number;
}

/** The map, or null where the plan has none, or more than two parameters. */
export function scanMap(results: ScanResults): string | null {
  const { plan } = results;
  if (plan.parameters.length === 0 || plan.parameters.length > 2) return null;
  const marks = marksOf(results);
  const markOf = (point: number): number => {
    const label = labelOf(results.collected.outcomes.get(point));
    const index = marks.findIndex((mark) => mark.label === label);
    return index < 0 ? marks.length - 1 : index;
  };
  const drawn = plan.points === 'grid' ? gridBody(results, marks, markOf) : dotBody(results, marks, markOf);
  const legend = [...marks];
  const notes = cautionsOf(plan.task).flatMap((caution) => wrap(caution, 96));
  const title = plan.name ?? plan.model.formula;
  const x0 = LEFT + drawn.width + 32;
  const longest = Math.max(labelTitle(plan.task).length, ...legend.map((m) => m.label.length + 8));
  const below = Math.max(TOP + drawn.height + 64, TOP + 40 + 22 * legend.length + 8);
  const width = Math.max(x0 + 44 + longest * 7.2, LEFT + 96 * 6.2, 24 + Math.min(title.length, 90) * 8);
  const height = below + 18 * notes.length + 12;
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${Math.ceil(width)}" height="${height}" viewBox="0 0 ${Math.ceil(width)} ${height}" font-family="sans-serif" font-size="13">`,
    `<title>${escapeMarkup(title)}</title>`,
    '<defs>',
    ...marks.map((mark, i) => patternOf(mark, i)),
    '</defs>',
    `<rect width="100%" height="100%" fill="#fff"/>`,
    `<text x="${LEFT}" y="24" font-size="15" font-weight="bold">${escapeMarkup(title.length > 90 ? `${title.slice(0, 89)}…` : title)}</text>`,
    drawn.body,
    `<text x="${x0}" y="${TOP + 12}" font-weight="bold">${escapeMarkup(labelTitle(plan.task))}</text>`,
    ...legend.map(
      (mark, i) =>
        `<g transform="translate(${x0} ${TOP + 40 + 22 * i})"><rect y="-13" width="22" height="17" fill="url(#m${i})" stroke="#333"/>${mark.letter === '' ? '' : boxed(mark.letter, 11, 0)}<text x="32">${escapeMarkup(mark.label)}   (${mark.count})</text></g>`,
    ),
    ...notes.map(
      (note, i) =>
        `<text x="24" y="${below + 18 * i}" fill="#444" font-size="12">${escapeMarkup(note)}</text>`,
    ),
    '</svg>',
    '',
  ].join('\n');
}

/** The most frequent answer is pale and plain, so that the exceptions stand out; what is no answer is grey and hatched. */
function marksOf(results: ScanResults): Mark[] {
  const answers = answersIn(results);
  const kept = answers.length > MAX_ANSWERS ? answers.slice(0, MAX_ANSWERS - 1) : answers;
  let style = 0;
  const marks = kept.map(({ label, count }): Mark => {
    if (label === 'missing' || label === 'failed' || label === 'no Hamiltonian')
      return {
        label,
        count,
        letter: label === 'missing' ? '?' : label === 'failed' ? '!' : '–',
        colour: '#bbbbbb',
        pattern: 6,
      };
    const i = style++;
    const letter = String.fromCharCode(65 + i);
    if (i === 0) return { label, count, letter, colour: '#f0f0ea', pattern: 0 };
    return {
      label,
      count,
      letter,
      colour: PALETTE[(i - 1) % PALETTE.length]!,
      pattern: (i - 1 + Math.floor((i - 1) / PALETTE.length)) % PATTERNS.length,
    };
  });
  const rest = answers.slice(kept.length);
  if (rest.length > 0)
    marks.push({
      label: `${rest.length} other answers`,
      count: rest.reduce((sum, { count }) => sum + count, 0),
      letter: '*',
      colour: '#ffffff',
      pattern: 5,
    });
  return marks;
}

function patternOf({ colour, pattern }: Mark, i: number): string {
  const strokes = PATTERNS[pattern]!;
  const over =
    strokes === ''
      ? ''
      : `<path d="${strokes}" stroke="${colour === '#ffffff' ? '#333' : '#fff'}" stroke-width="1.6" fill="none"/>`;
  return `<pattern id="m${i}" width="8" height="8" patternUnits="userSpaceOnUse"><rect width="8" height="8" fill="${colour}"/>${over}</pattern>`;
}

/** A letter that can be read on any pattern. */
function boxed(letter: string, x: number, y: number): string {
  return `<text x="${x}" y="${y}" text-anchor="middle" font-size="11" font-weight="bold" stroke="#fff" stroke-width="2.4" paint-order="stroke">${escapeMarkup(letter)}</text>`;
}

interface Drawn {
  readonly body: string;
  readonly width: number;
  readonly height: number;
}

/** The first parameter runs to the right, the second up. */
function gridBody(
  { plan, collected }: ScanResults,
  marks: readonly Mark[],
  markOf: (point: number) => number,
): Drawn {
  const across = valuesOn(plan.parameters[0]!);
  const up = plan.parameters.length === 2 ? valuesOn(plan.parameters[1]!) : [''];
  const side = Math.min(44, SIDE / Math.max(across.length, up.length));
  const [width, height] = [side * across.length, side * up.length];
  const single = across.length * up.length <= MAX_TITLES;
  const parts: string[] = [];
  for (let j = 0; j < up.length; j++)
    for (let i = 0; i < across.length; ) {
      const mark = markOf(i * up.length + j);
      let end = i + 1;
      while (!single && end < across.length && markOf(end * up.length + j) === mark) end++;
      const x = LEFT + i * side;
      const y = TOP + height - (j + 1) * side;
      const rect = `<rect x="${x.toFixed(2)}" y="${y.toFixed(2)}" width="${((end - i) * side).toFixed(2)}" height="${side.toFixed(2)}" fill="url(#m${mark})"${single && side >= 6 ? ' stroke="#fff" stroke-width="0.7"' : ''}`;
      if (!single) parts.push(`${rect}/>`);
      else {
        const point = i * up.length + j;
        parts.push(
          `${rect}>${titleOf(
            plan.parameters.map((a) => a.name),
            collected.points.at(point),
            point,
            marks[mark]!.label,
          )}</rect>`,
        );
        if (side >= LETTER_SIDE) parts.push(boxed(marks[mark]!.letter, x + side / 2, y + side / 2 + 4));
      }
      i = end;
    }
  parts.push(
    `<rect x="${LEFT}" y="${TOP}" width="${width.toFixed(2)}" height="${height.toFixed(2)}" fill="none" stroke="#333"/>`,
  );
  for (const i of some(across.length, Math.max(1, Math.floor(width / 52))))
    parts.push(below(LEFT + (i + 0.5) * side, TOP + height, across[i]!));
  if (plan.parameters.length === 2)
    for (const j of some(up.length, Math.max(1, Math.floor(height / 22)))) {
      const y = TOP + height - (j + 0.5) * side;
      parts.push(beside(y, up[j]!));
    }
  parts.push(
    ...axisNames(
      plan.parameters.map((a) => a.name),
      width,
      height,
    ),
  );
  return { body: parts.join('\n'), width: Math.max(width, 120), height };
}

function dotBody(
  { plan, collected }: ScanResults,
  marks: readonly Mark[],
  markOf: (point: number) => number,
): Drawn {
  const { points } = collected;
  const names = plan.parameters.map((a) => a.name);
  const flat = names.length === 1;
  const at = Array.from({ length: points.count }, (_, point) => points.at(point).map(approximate));
  const [x, y] = [
    windowOf(at.map((p) => p[0]!)),
    flat ? { low: -1, high: 1 } : windowOf(at.map((p) => p[1]!)),
  ];
  const [width, height] = [SIDE, flat ? 60 : SIDE];
  const px = (value: number) => LEFT + ((value - x.low) / (x.high - x.low)) * width;
  const py = (value: number) => TOP + ((y.high - value) / (y.high - y.low)) * height;
  const radius = points.count <= 400 ? 9 : points.count <= 2_000 ? 4 : 2;
  const parts = [
    `<rect x="${LEFT}" y="${TOP}" width="${width}" height="${height}" fill="none" stroke="#333"/>`,
    ...ticks(x.low, x.high).map((t) => below(px(t), TOP + height, String(t))),
    ...(flat ? [] : ticks(y.low, y.high).map((t) => beside(py(t), String(t)))),
  ];
  at.forEach((values, point) => {
    const mark = markOf(point);
    const [cx, cy] = [px(values[0]!), py(flat ? 0 : values[1]!)];
    const title =
      points.count <= MAX_TITLES ? titleOf(names, points.at(point), point, marks[mark]!.label) : '';
    parts.push(
      `<circle cx="${cx.toFixed(1)}" cy="${cy.toFixed(1)}" r="${radius}" fill="url(#m${mark})" stroke="#333" stroke-width="0.6">${title}</circle>`,
    );
    if (radius === 9) parts.push(boxed(marks[mark]!.letter, cx, cy + 4));
  });
  parts.push(...axisNames(names, width, height));
  return { body: parts.join('\n'), width, height };
}

function axisNames(names: readonly string[], width: number, height: number): string[] {
  const [x, y] = names.map(escapeMarkup);
  return [
    `<text x="${LEFT + width / 2}" y="${TOP + height + 40}" text-anchor="middle" font-style="italic">${x}</text>`,
    ...(y === undefined
      ? []
      : [`<text x="20" y="${TOP + height / 2 + 4}" text-anchor="middle" font-style="italic">${y}</text>`]),
  ];
}

function below(x: number, y: number, text: string): string {
  return `<line x1="${x.toFixed(1)}" x2="${x.toFixed(1)}" y1="${y}" y2="${y + 4}" stroke="#333"/><text x="${x.toFixed(1)}" y="${y + 18}" text-anchor="middle">${clip(text)}</text>`;
}

function beside(y: number, text: string): string {
  return `<line x1="${LEFT - 4}" x2="${LEFT}" y1="${y.toFixed(1)}" y2="${y.toFixed(1)}" stroke="#333"/><text x="${LEFT - 8}" y="${(y + 4).toFixed(1)}" text-anchor="end">${clip(text)}</text>`;
}

function titleOf(names: readonly string[], at: readonly string[], point: number, label: string): string {
  const where = names.map((name, i) => `${name} = ${at[i]}`).join(', ');
  return `<title>${escapeMarkup(`${point + 1}: ${where}: ${label}`)}</title>`;
}

/** Exact values are long at times; the text of a point has them in full. */
function clip(text: string): string {
  return text.length > 8 ? `${text.slice(0, 7)}…` : text;
}

/** At most so many of 0 … count − 1, equally spaced, the first one included. */
function some(count: number, most: number): number[] {
  const step = Math.ceil(count / most);
  return Array.from({ length: Math.ceil(count / step) }, (_, i) => i * step);
}

/** For drawing only. */
function approximate(text: string): number {
  const { numerator, denominator } = rationalFromText(text);
  return Number(numerator) / Number(denominator);
}

function windowOf(values: readonly number[]): { low: number; high: number } {
  let [low, high] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const value of values) [low, high] = [Math.min(low, value), Math.max(high, value)];
  const margin = high > low ? (high - low) / 20 : 1;
  return { low: low - margin, high: high + margin };
}
