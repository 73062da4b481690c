import { describe, expect, it } from 'vitest';
import { scanMap } from '../../src/report/scan-map.ts';
import { answersIn, type ScanResults, scanCsv, scanJson } from '../../src/report/scan-table.ts';
import { mergeRecords } from '../../src/scan/merge.ts';
import { readPlan } from '../../src/scan/plan.ts';
import { pointsIn } from '../../src/scan/points.ts';
import type { Outcome, PointRecord } from '../../src/scan/record.ts';
import { property } from '../support/random.ts';

const HASH = `sha256:${'0'.repeat(64)}`;

function results(fields: object, outcomeOf: (point: number) => Outcome | undefined): ScanResults {
  const { plan } = readPlan({
    plan: 'points',
    model: { formula: 'XX + g Z + h X' },
    parameters: [
      { name: 'g', from: 0, to: 1, steps: 3 },
      { name: 'h', values: ['0', '1/3', '0.5'] },
    ],
    points: 'grid',
    task: { kind: 'search', range: 2 },
    ...fields,
  });
  const points = pointsIn(plan);
  const records: PointRecord[] = [];
  for (let point = 0; point < points.count; point++) {
    const outcome = outcomeOf(point);
    if (outcome !== undefined) records.push({ point, at: [...points.at(point)], outcome, milliseconds: 1 });
  }
  return { plan, hash: HASH, collected: mergeRecords(points, records), rejected: new Map() };
}

const found = (...dimensionByRange: number[]): Outcome => ({
  status: 'done',
  answer: { kind: 'search', dimensionByRange, minimumCells: 5 },
});

/** A reader of CSV as RFC 4180 has it. */
function readCsv(text: string): string[][] {
  const rows: string[][] = [[]];
  for (const [, quoted, plain, end] of text.matchAll(/(?:"((?:[^"]|"")*)"|([^,\n"]*))(,|\n)/g)) {
    rows.at(-1)!.push(quoted === undefined ? plain! : quoted.replaceAll('""', '"'));
    if (end === '\n') rows.push([]);
  }
  return rows.slice(0, -1);
}

/** Tags of a document that open and close as XML does. @throws Error where they do not */
function assertWellFormed(text: string): void {
  const open: string[] = [];
  for (const [tag, close, name, empty] of text.matchAll(
    /<(\/?)([a-zA-Z]+)(?:\s+[\w:-]+="[^"<]*")*\s*(\/?)>/g,
  )) {
    if (close === '/') expect(open.pop(), tag).toBe(name);
    else if (empty !== '/') open.push(name!);
  }
  expect(open).toEqual([]);
  expect(text.replace(/<\/?[a-zA-Z]+(?:\s+[\w:-]+="[^"<]*")*\s*\/?>/g, '')).not.toMatch(/[<>]|&(?!#\d+;)/);
}

describe('the table', () => {
  it('has a line for every point, whatever is known of it', () => {
    const all = results({}, (point) =>
      point === 0
        ? { status: 'refused', reason: 'model: expected "more", got a comma, and a quote' }
        : point === 1
          ? { status: 'failed', reason: 'out of memory\nline two' }
          : point === 2
            ? undefined
            : { ...found(1, 1 + point), certificate: { none: 'too large' } },
    );
    const rows = readCsv([...scanCsv(all)].join(''));
    expect(rows).toHaveLength(13);
    expect(new Set(rows.map((row) => row.length))).toEqual(new Set([rows[0]!.length]));
    const column = (name: string) => rows[0]!.indexOf(name);
    expect(rows.slice(1, 5).map((row) => row[column('status')])).toEqual([
      'refused',
      'failed',
      'missing',
      'done',
    ]);
    expect(rows[1]![column('reason')]).toBe('model: expected "more", got a comma, and a quote');
    expect(rows[2]![column('reason')]).toBe('out of memory\nline two');
    expect(rows[5]!.slice(0, 5)).toEqual(['5', '1/3', '1/3', '0.333333333333', '0.333333333333']);
    expect(rows[5]!.slice(column('range 1'), column('charges') + 1)).toEqual(['1', '4', '5']);
    expect([rows[5]![column('certificate')], rows[5]![column('reason')]]).toEqual(['none', 'too large']);
    const json = JSON.parse([...scanJson(all)].join('')) as {
      points: object[];
      missing: number[];
      failed: number[];
    };
    expect([json.points.length, json.missing, json.failed]).toEqual([12, [3], [2]]);
    expect(json.points[2]).toEqual({ point: 3, at: { g: '0', h: '1/2' }, status: 'missing' });
  });

  it('counts answers, the most frequent first', () => {
    const all = results({}, (point) => (point < 2 ? undefined : point < 5 ? found(0, 2) : found(1, 1)));
    expect(answersIn(all)).toEqual([
      { label: '1 0', count: 7 },
      { label: '0 2', count: 3 },
      { label: 'missing', count: 2 },
    ]);
  });
});

describe('the map', () => {
  it('has a cell for every point of a grid, where it belongs', () => {
    const svg = scanMap(results({}, (point) => found(0, point)))!;
    assertWellFormed(svg);
    const cells = [
      ...svg.matchAll(/<rect x="([\d.]+)" y="([\d.]+)"[^>]*><title>(\d+): g = (\S+), h = (\S+): /g),
    ];
    expect(cells).toHaveLength(12);
    const place = new Map(cells.map(([, x, y, , g, h]) => [`${g} ${h}`, [Number(x), Number(y)] as const]));
    // To the right with the first parameter, up with the second.
    expect(place.get('1 0')![0]).toBeGreaterThan(place.get('2/3 0')![0]);
    expect(place.get('1 0')![1]).toBe(place.get('0 0')![1]);
    expect(place.get('0 1/2')![1]).toBeLessThan(place.get('0 1/3')![1]);
  });

  it('gives every answer a mark of its own, and the rarest one together', () => {
    const fills = (svg: string) =>
      new Set([...svg.matchAll(/<pattern id="m\d+"[^>]*>(.*?)<\/pattern>/g)].map((m) => m[1]));
    expect(fills(scanMap(results({}, (point) => found(0, point)))!).size).toBe(12);
    const many = results(
      {
        parameters: [
          { name: 'g', from: 0, to: 1, steps: 4 },
          { name: 'h', from: 0, to: 1, steps: 4 },
        ],
      },
      (point) => found(0, point),
    );
    const svg = scanMap(many)!;
    expect(fills(svg).size).toBe(14);
    expect(svg).toContain('12 other answers');
  });

  property('is well formed for plans of every shape, with hostile texts in them', 12, (random) => {
    const list = Array.from({ length: random.integer(1, 30) }, (_, i) => [`${i}/7`, `-${i}.5`]);
    const flat = random.chance(0.5);
    const svg = scanMap(
      results(
        {
          name: '<script>alert("&")</script>',
          model: { formula: flat ? 'XX + g Z' : 'XX + g Z + h X' },
          parameters: flat ? [{ name: 'g' }] : [{ name: 'g' }, { name: 'h' }],
          points: { list: flat ? list.map(([g]) => [g]) : list },
          task: { kind: 'residual', candidate: '1/2 XX - YY' },
        },
        () =>
          random.pick([
            undefined,
            { status: 'failed', reason: '<&>' } as const,
            { status: 'refused', reason: '"' } as const,
            {
              status: 'done',
              answer: { kind: 'residual', conserved: random.chance(0.5), squaredNorm: '1' },
            } as const,
          ]),
      ),
    )!;
    assertWellFormed(svg);
    expect(svg.match(/<circle /g)).toHaveLength(list.length);
  });

  it('of a large grid joins equal neighbours', () => {
    const axis = (name: string) => ({ name, from: 0, to: 1, steps: 99 });
    const all = results({ parameters: [axis('g'), axis('h')] }, (point) =>
      found(0, Number(point % 101 === 0)),
    );
    const svg = scanMap(all)!;
    assertWellFormed(svg);
    // A diagonal of another answer: two or three runs in each of the hundred rows.
    expect(svg.match(/fill="url\(#m\d+\)"\/>/g)!.length).toBeLessThan(310);
  });

  it('is not drawn for three parameters', () => {
    const all = results(
      {
        model: { formula: 'XX + g Z + h X + k Y' },
        parameters: ['g', 'h', 'k'].map((name) => ({ name, values: [0, 1] })),
      },
      () => found(0, 1),
    );
    expect(scanMap(all)).toBeNull();
  });
});
