/**
 * What larger machines reach: the measured tables of docs/performance.md, continued to range 18 by the growth that was measured last, and the
 * search that follows growth measured beside them. Written to docs/scaling.md.
 */
import { readFileSync } from 'node:fs';
import { MAX_SPINS } from '../src/search/addresses.ts';
import { candidatesOf, MODELS } from './models.ts';
import type { BenchOptions } from './options.ts';
import { measurePoint } from './search.ts';
import { megabytes, seconds, type Table } from './table.ts';

const PAGE = 'scaling.md';
/** Chains of one spin a cell whose tables go far: cheap, dear and in between. */
const CHAINS = ['xx-field', 'xyz-field', 'xyz', 'ising-mixed'];
const RANGES = [8, 9, 10, 11, 12, 13, 14, 15, 16, 17, 18];
const CORE_HOURS = [0.001, 0.01, 0.1, 1, 10];
const GIGABYTES = [4, 8, 16, 32, 64, 128, 256, 512, 1024, 2048];

/** A row of a measured table, as far as it is used. */
export interface Measured {
  readonly range: number;
  readonly seconds: number;
  readonly bytes: number;
}

/** What one model costs: measured, and beyond by `growth` a range in time and 4 in memory. */
export interface Cost {
  readonly measured: ReadonlyMap<number, Measured>;
  readonly last: Measured;
  /** Bytes at the largest range, without those of the runtime, over the packed strings 4^k. */
  readonly bytesAString: number;
  /** Bytes before the search begins. */
  readonly base: number;
  /** Time over that of one range less: geometric mean of the last two steps. */
  readonly growth: number;
}

/** The table of a model in docs/performance.md. @throws Error when it is not there or cannot be read */
export function costOf(page: string, model: string): Cost {
  const text = page.slice(
    page.indexOf(`<!-- table search-${model} -->`),
    page.indexOf(`<!-- end search-${model} -->`),
  );
  const rows = text.split('\n').filter((line) => line.startsWith('|'));
  const head = (rows[0] ?? '').split('|').map((cell) => cell.trim());
  const column = (name: string) => head.findIndex((cell) => cell.startsWith(name));
  const measured = new Map<number, Measured>();
  for (const row of rows.slice(2)) {
    const cells = row.split('|').map((cell) => cell.trim());
    const range = Number(cells[column('range')]);
    measured.set(range, {
      range,
      seconds: secondsFrom(cells[column('time')]!),
      bytes: Number(cells[column('peak')]!.replace(' MB', '')) * 1e6,
    });
  }
  const last = [...measured.values()].at(-1);
  const before = last && measured.get(last.range - 2);
  const base = /the loader have (\d+) MB/.exec(text)?.[1];
  if (
    last === undefined ||
    before === undefined ||
    base === undefined ||
    !(last.seconds > 0 && last.bytes > 0)
  )
    throw new Error(`docs/performance.md: no table of ${model} that can be read`);
  return {
    measured,
    last,
    base: Number(base) * 1e6,
    bytesAString: (last.bytes - Number(base) * 1e6) / 4 ** last.range,
    growth: Math.sqrt(last.seconds / before.seconds),
  };
}

function secondsFrom(text: string): number {
  const [, value, unit] = /^([\d.]+) (µs|ms|s)/.exec(text) ?? [];
  return Number(value) * { µs: 1e-6, ms: 1e-3, s: 1 }[unit as 's'];
}

/** Seconds and bytes at a range, and whether they were measured. */
export function costAt(cost: Cost, range: number): Measured & { readonly isMeasured: boolean } {
  const own = cost.measured.get(range);
  if (own !== undefined) return { ...own, isMeasured: true };
  return {
    range,
    seconds: cost.last.seconds * cost.growth ** (range - cost.last.range),
    bytes: cost.base + cost.bytesAString * 4 ** range,
    isMeasured: false,
  };
}

/** Searches that follow growth, with the ranges at which they are timed. */
const GROWING: readonly {
  readonly name: string;
  readonly usual: readonly number[];
  readonly large: readonly number[];
}[] = [
  { name: 'xx-field', usual: [12, 15, 18], large: [24] },
  { name: 'xyz-field', usual: [12, 15, 18], large: [20] },
  { name: 'xyz', usual: [10, 12, 14], large: [16] },
];

export async function benchScaling(options: BenchOptions): Promise<void> {
  const page = readFileSync(new URL('../docs/performance.md', import.meta.url), 'utf8');
  const costs = CHAINS.map((name) => ({ name, formula: formulaOf(name), cost: costOf(page, name) }));
  const derived = (table: Omit<Table, 'page' | 'heading'>) =>
    options.table({
      ...table,
      page: PAGE,
      heading: 'Computed from the measured tables of docs/performance.md.',
    });
  derived({
    name: 'scaling-cost',
    title: 'Measured cost a candidate, at the largest range measured',
    columns: [
      'chain',
      'range',
      'candidates',
      'time',
      'ns a candidate',
      'peak memory',
      'bytes a string',
      'time a range',
    ],
    rows: costs.map(({ formula, cost: { last, bytesAString, growth } }) => [
      `\`${formula}\``,
      `${last.range}`,
      `${candidatesOf(1, last.range)}`,
      seconds(last.seconds),
      ((1e9 * last.seconds) / candidatesOf(1, last.range)).toFixed(1),
      megabytes(last.bytes),
      bytesAString.toFixed(2),
      `×${growth.toFixed(2)}`,
    ]),
    notes: [
      'Bytes a string: peak memory without that of the runtime, over the 4^k packed strings of range up to k, the identity and all translates of a shorter string included.',
      'Time a range: geometric mean of the last two steps that were measured.',
    ],
  });
  const span = (range: number) => {
    const all = costs.map(({ cost }) => costAt(cost, range));
    const by = (value: (c: Measured) => number) =>
      [Math.min(...all.map(value)), Math.max(...all.map(value))] as const;
    return { time: by((c) => c.seconds), memory: by((c) => c.bytes), known: all.every((c) => c.isMeasured) };
  };
  derived({
    name: 'scaling-ranges',
    title: 'One search, one thread: least and most demanding of these chains',
    columns: ['range', 'candidates', 'memory', 'time', 'searches an hour and core', ''],
    rows: RANGES.map((range) => {
      const { time, memory, known } = span(range);
      return [
        `${range}`,
        candidatesOf(1, range).toLocaleString('en'),
        `${gigabytes(memory[0])} – ${gigabytes(memory[1])}`,
        `${duration(time[0])} – ${duration(time[1])}`,
        `${rate(time[1])} – ${rate(time[0])}`,
        known ? 'measured' : range <= MAX_SPINS ? 'partly extrapolated' : 'extrapolated',
      ];
    }),
    notes: [
      `Extrapolated: memory by 4 a range from the bytes a string, time by the last column of the table above. Above ${MAX_SPINS} spins the arrays of one process end (one more where the model has four conserved sectors), so these rows say what an exhaustive search would cost, not what can be started.`,
    ],
  });
  derived({
    name: 'scaling-memory',
    title: 'Largest range of an exhaustive search by memory of the node, and its time in one thread',
    columns: ['memory', 'least demanding', 'time', 'most demanding', 'time'],
    rows: GIGABYTES.map((size) => {
      const reach = (pick: 0 | 1) => RANGES.findLast((range) => span(range).memory[pick] <= size * 1e9)!;
      const [easy, hard] = [reach(0), reach(1)];
      return [`${size} GB`, `${easy}`, duration(span(easy).time[0]), `${hard}`, duration(span(hard).time[1])];
    }),
    notes: [`Ranges above ${MAX_SPINS} as above: the arithmetic, not an offer.`],
  });
  derived({
    name: 'scaling-hours',
    title: 'Largest range of an exhaustive search by hours of one core, and the memory that it takes',
    columns: ['core hours', 'least demanding', 'memory', 'most demanding', 'memory'],
    rows: CORE_HOURS.map((budget) => {
      const reach = (pick: 0 | 1) => RANGES.findLast((range) => span(range).time[pick] <= budget * 3_600)!;
      const [easy, hard] = [reach(0), reach(1)];
      return [
        `${budget}`,
        `${easy}`,
        gigabytes(span(easy).memory[0]),
        `${hard}`,
        gigabytes(span(hard).memory[1]),
      ];
    }),
    notes: [
      'Up to range 18. A search is one thread: on a node of its own, an hour of it is an hour of the node.',
    ],
  });
  await benchGrowth(options);
}

async function benchGrowth(options: BenchOptions): Promise<void> {
  const rows: string[][] = [];
  for (const { name, usual, large } of GROWING) {
    if (options.models !== undefined && !options.models.includes(name)) continue;
    const model = MODELS.find((m) => m.name === name)!;
    const ranges = options.ranges ?? (options.smoke ? [6] : options.large ? [...usual, ...large] : usual);
    for (const range of ranges) {
      options.progress(`${name}, range ${range}, by growth`);
      const point = await measurePoint(model, range, options, 'growth');
      if (point === undefined) break;
      const { median, samples, deviation } = point;
      rows.push([
        `\`${model.formula}\``,
        `${range}`,
        candidatesOf(1, range).toPrecision(3),
        `${point.answer.dimension}`,
        samples > 1 ? `${seconds(median)} ± ${seconds(deviation)}` : seconds(median),
        megabytes(point.answer.peak),
      ]);
    }
  }
  options.table({
    page: PAGE,
    name: 'scaling-growth',
    title: 'The search that follows growth, for injective nearest-neighbour chains',
    columns: ['chain', 'range', 'candidates, never visited', 'charges', 'time', 'peak memory'],
    rows,
    notes: [],
  });
}

function formulaOf(name: string): string {
  return MODELS.find((m) => m.name === name)!.formula;
}

function gigabytes(bytes: number): string {
  const value = bytes / 1e9;
  return `${value < 10 ? value.toPrecision(2) : value.toFixed(0)} GB`;
}

function duration(time: number): string {
  const short = (value: number) => (value < 10 ? value.toPrecision(2) : value.toFixed(0));
  if (time < 60) return `${short(time)} s`;
  return time < 3_600 ? `${short(time / 60)} min` : `${short(time / 3_600)} h`;
}

function rate(time: number): string {
  const value = 3600 / time;
  return value < 1 ? '< 1' : Number(value.toPrecision(2)).toLocaleString('en');
}
