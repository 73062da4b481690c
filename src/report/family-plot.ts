/**
 * A map of two parameters as SVG: curves and points on which more charges appear than at general couplings. Drawn in floats, from the
 * exact polynomials; the picture proves nothing, the table beside it does.
 */
import type { Polynomial } from '../algebra/polynomial.ts';
import { powerIn } from '../algebra/polynomial-division.ts';
import type { FamilyResult } from '../theory/family/classify.ts';
import { answersOf, type Locus } from '../theory/family/loci.ts';
import { conditionText } from './family.ts';
import { escapeMarkup } from './markup.ts';
import { PALETTE } from './palette.ts';

export interface PlotWindow {
  readonly left: number;
  readonly right: number;
  readonly bottom: number;
  readonly top: number;
}

const SIDE = 420;
const MARGIN = { left: 64, top: 24, bottom: 56 };
/** Squares a side in which a curve is looked for. */
const GRID = 240;
/** Told apart without colour too: every curve has its own dashes. */
const DASHES = ['none', '7 3', '2 3', '9 3 2 3', '12 4', '4 2', '1 2'] as const;

/** @param result a family with two parameters: the first runs to the right, the second up */
export function plotFamily(result: FamilyResult, view: PlotWindow): string {
  const names = result.family.parameters;
  const sx = SIDE / (view.right - view.left);
  const sy = SIDE / (view.top - view.bottom);
  const px = (x: number) => MARGIN.left + (x - view.left) * sx;
  const py = (y: number) => MARGIN.top + (view.top - y) * sy;
  const [general, ...answers] = answersOf(result);
  const body: string[] = [];
  const legend: { label: string; mark: string }[] = [
    { label: `${general!.dimensionByRange.join(', ')}   general couplings`, mark: square('#f4f4f0', '#999') },
  ];
  let style = 0;
  let points = 0;
  for (const answer of answers)
    for (const locus of answer.loci.flatMap((l) => [l, ...l.equivalent])) {
      const stroke = PALETTE[style % PALETTE.length]!;
      const dash = DASHES[style % DASHES.length]!;
      const label = `${answer.dimensionByRange.join(', ')}   ${conditionText(locus, names)}`;
      if (locus.equations.length === 1) {
        const path = curve(locus.equations[0]!, view, px, py);
        body.push(
          `<path d="${path}" fill="none" stroke="${stroke}" stroke-width="2.5" stroke-dasharray="${dash}"><title>${escapeMarkup(label)}</title></path>`,
        );
        legend.push({
          label,
          mark: `<line x1="0" x2="26" y1="-4" y2="-4" stroke="${stroke}" stroke-width="2.5" stroke-dasharray="${dash}"/>`,
        });
        style++;
      } else {
        const number = ++points;
        const at = pointOf(locus);
        if (at === undefined) continue;
        const inside = at[0] >= view.left && at[0] <= view.right && at[1] >= view.bottom && at[1] <= view.top;
        if (inside)
          body.push(
            `<circle cx="${px(at[0]).toFixed(1)}" cy="${py(at[1]).toFixed(1)}" r="5" fill="${stroke}" stroke="#fff"><title>${escapeMarkup(label)}</title></circle><text x="${(px(at[0]) + 8).toFixed(1)}" y="${(py(at[1]) - 6).toFixed(1)}">${number}</text>`,
          );
        legend.push({
          label,
          mark: `<circle cx="8" cy="-4" r="5" fill="${stroke}"/><text x="18">${number}</text>`,
        });
        style++;
      }
    }
  const longest = Math.max(...legend.map((l) => l.label.length), 40);
  const x0 = MARGIN.left + SIDE + 28;
  const width = x0 + 40 + longest * 7;
  const height = Math.max(MARGIN.top + SIDE + MARGIN.bottom, MARGIN.top + 44 + legend.length * 22);
  return [
    `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}" viewBox="0 0 ${width} ${height}" font-family="sans-serif" font-size="13">`,
    `<title>Couplings with more charges, ranges up to ${result.range}</title>`,
    `<rect width="${width}" height="${height}" fill="#fff"/>`,
    `<clipPath id="window"><rect x="${MARGIN.left}" y="${MARGIN.top}" width="${SIDE}" height="${SIDE}"/></clipPath>`,
    `<rect x="${MARGIN.left}" y="${MARGIN.top}" width="${SIDE}" height="${SIDE}" fill="#f4f4f0"/>`,
    `<g clip-path="url(#window)">${body.join('')}</g>`,
    `<rect x="${MARGIN.left}" y="${MARGIN.top}" width="${SIDE}" height="${SIDE}" fill="none" stroke="#333"/>`,
    ...ticks(view.left, view.right).map(
      (t) =>
        `<text x="${px(t).toFixed(1)}" y="${MARGIN.top + SIDE + 18}" text-anchor="middle">${t}</text><line x1="${px(t).toFixed(1)}" x2="${px(t).toFixed(1)}" y1="${MARGIN.top + SIDE}" y2="${MARGIN.top + SIDE + 4}" stroke="#333"/>`,
    ),
    ...ticks(view.bottom, view.top).map(
      (t) =>
        `<text x="${MARGIN.left - 8}" y="${(py(t) + 4).toFixed(1)}" text-anchor="end">${t}</text><line x1="${MARGIN.left - 4}" x2="${MARGIN.left}" y1="${py(t).toFixed(1)}" y2="${py(t).toFixed(1)}" stroke="#333"/>`,
    ),
    `<text x="${MARGIN.left + SIDE / 2}" y="${MARGIN.top + SIDE + 42}" text-anchor="middle" font-style="italic">${escapeMarkup(names[0]!)}</text>`,
    `<text x="18" y="${MARGIN.top + SIDE / 2}" text-anchor="middle" font-style="italic">${escapeMarkup(names[1]!)}</text>`,
    `<text x="${x0}" y="${MARGIN.top + 12}" font-weight="bold">Dimension up to range 1 … ${result.range}, and where</text>`,
    ...legend.map(
      ({ label, mark }, i) =>
        `<g transform="translate(${x0} ${MARGIN.top + 40 + 22 * i})">${mark}<text x="36">${escapeMarkup(label)}</text></g>`,
    ),
    '</svg>',
    '',
  ].join('\n');
}

function square(fill: string, stroke: string): string {
  return `<rect x="6" y="-11" width="14" height="12" fill="${fill}" stroke="${stroke}"/>`;
}

/** Round numbers from low to high, about six. */
export function ticks(low: number, high: number): number[] {
  const rough = (high - low) / 6;
  const unit = 10 ** Math.floor(Math.log10(rough));
  const step = [1, 2, 5, 10].map((m) => m * unit).find((s) => s >= rough)!;
  const list: number[] = [];
  for (let i = Math.ceil(low / step); i * step <= high; i++) list.push(Number((i * step).toPrecision(12)));
  return list;
}

function pointOf({ general }: Locus): [number, number] | undefined {
  if (general.point === null) return undefined;
  const [x, y] = general.point.map((r) => Number(r.numerator) / Number(r.denominator));
  return [x!, y!];
}

/** The zero set of a polynomial in the window: segments between sign changes on the edges of a grid that avoids round numbers. */
function curve(
  p: Polynomial,
  view: PlotWindow,
  px: (x: number) => number,
  py: (y: number) => number,
): string {
  const terms = [...p.numerators].map(([m, value]) => [powerIn(m, 0), powerIn(m, 1), Number(value)] as const);
  const value = (x: number, y: number) => terms.reduce((sum, [a, b, c]) => sum + c * x ** a * y ** b, 0);
  const n = GRID + 2;
  const dx = (view.right - view.left) / GRID;
  const dy = (view.top - view.bottom) / GRID;
  // Half an odd step off: a curve along a grid line would have no sign change.
  const xs = Array.from({ length: n }, (_, i) => view.left + (i - 0.5123) * dx);
  const ys = Array.from({ length: n }, (_, i) => view.bottom + (i - 0.5237) * dy);
  const values = ys.map((y) => xs.map((x) => value(x, y)));
  const segments: [string, string][] = [];
  for (let j = 0; j + 1 < n; j++)
    for (let i = 0; i + 1 < n; i++) {
      const corners = [
        [xs[i]!, ys[j]!, values[j]![i]!],
        [xs[i + 1]!, ys[j]!, values[j]![i + 1]!],
        [xs[i + 1]!, ys[j + 1]!, values[j + 1]![i + 1]!],
        [xs[i]!, ys[j + 1]!, values[j + 1]![i]!],
      ] as const;
      const cuts: string[] = [];
      for (let e = 0; e < 4; e++) {
        const [x1, y1, v1] = corners[e]!;
        const [x2, y2, v2] = corners[(e + 1) % 4]!;
        if (v1 > 0 === v2 > 0) continue;
        const t = v1 / (v1 - v2);
        cuts.push(`${px(x1 + t * (x2 - x1)).toFixed(1)} ${py(y1 + t * (y2 - y1)).toFixed(1)}`);
      }
      for (let c = 0; c + 1 < cuts.length; c += 2) segments.push([cuts[c]!, cuts[c + 1]!]);
    }
  return chained(segments);
}

/** Segments with common ends as one path, so that dashes run on. */
function chained(segments: readonly (readonly [string, string])[]): string {
  const at = new Map<string, Set<number>>();
  segments.forEach((ends, i) => {
    for (const end of ends) at.set(end, (at.get(end) ?? new Set()).add(i));
  });
  const used = new Set<number>();
  const follow = (from: string): string[] => {
    const path: string[] = [];
    for (let end = from; ; ) {
      const next = [...(at.get(end) ?? [])].find((i) => !used.has(i));
      if (next === undefined) return path;
      used.add(next);
      const [a, b] = segments[next]!;
      end = a === end ? b : a;
      path.push(end);
    }
  };
  return segments
    .flatMap(([a], i) => (used.has(i) ? [] : [`M${[...follow(a).reverse(), a, ...follow(a)].join('L')}`]))
    .join('');
}
