/** The search over a grid of ranges, each sample a fresh process, with the compiled pass beside it. */
import type { Method } from '../src/search/result.ts';
import { buildPass, PASS_GRAIN, runPass } from './limit/limit.ts';
import { clockGrain, grainWarning, run, type Spread, spreadOf } from './measure.ts';
import {
  type BenchModel,
  candidatesOf,
  hamiltonianOfBench,
  MODELS,
  nonZeros,
  type Target,
} from './models.ts';
import type { BenchOptions } from './options.ts';
import type { PointAnswer, PointRequest } from './point.ts';
import { megabytes, ratio, seconds } from './table.ts';

export interface Point extends Spread {
  readonly answer: PointAnswer;
}

/** As many samples as asked for while they stay cheap; long points get fewer. */
const BUDGET_SECONDS = 30;

/** Undefined when a run fails or its answer is not the known one, which is reported: a wrong answer has no speed. */
export async function measurePoint(
  model: BenchModel,
  range: number,
  { samples, failure }: BenchOptions,
  method?: Method,
): Promise<Point | undefined> {
  const request: PointRequest = {
    formula: model.formula,
    cell: model.cell,
    range,
    ...(method === undefined ? {} : { method }),
  };
  const times: number[] = [];
  let answer: PointAnswer | undefined;
  let spent = 0;
  while (times.length < samples && (times.length < 1 || spent < BUDGET_SECONDS)) {
    const { status, stdout, stderr } = await run(
      process.execPath,
      [
        '--max-old-space-size=12000',
        '--import',
        'tsx',
        new URL('point.ts', import.meta.url).pathname,
        JSON.stringify(request),
      ],
      { seconds: 1800 },
    );
    if (status !== 0) return void failure(`${model.name}, range ${range}: status ${status}\n${stderr}`);
    const one = JSON.parse(stdout) as PointAnswer;
    if (one.dimension !== model.dimension(range))
      return void failure(
        `${model.name}, range ${range}: ${one.dimension} charges, ${model.dimension(range)} are known`,
      );
    if (answer === undefined || one.peak > answer.peak) answer = one;
    times.push(one.seconds);
    spent += one.seconds;
  }
  return { ...spreadOf(times), answer: answer! };
}

/** Each part of a target with a mark; what was not measured is left out. */
function verdict(target: Target, measured: Readonly<Record<keyof Target, number>>): string {
  const parts: [keyof Target, string][] = [
    ['seconds', `${target.seconds} s`],
    ['megabytes', `${target.megabytes} MB`],
    ['passes', `${target.passes} passes`],
    ['growth', `×${target.growth}`],
  ];
  return parts
    .filter(([name]) => target[name] !== undefined && !Number.isNaN(measured[name]))
    .map(([name, text]) => `${text} ${measured[name] <= target[name]! ? '✓' : '✗'}`)
    .join(', ');
}

function rangesOf(model: BenchModel, { smoke, large }: BenchOptions): readonly number[] {
  if (smoke) return model.smoke;
  return large ? [...model.usual, ...model.large] : model.usual;
}

export async function benchSearch(options: BenchOptions): Promise<void> {
  const pass = await buildPass();
  const grain = clockGrain();
  for (const model of MODELS) {
    if (options.models !== undefined && !options.models.includes(model.name)) continue;
    const h = hamiltonianOfBench(model);
    const rows: string[][] = [];
    const notes = new Set<string>();
    const before: number[] = [];
    if ('missing' in pass) notes.add(pass.missing);
    let previous: { readonly range: number; readonly median: number } | undefined;
    for (const range of options.ranges ?? rangesOf(model, options)) {
      const point = await measurePoint(model, range, options);
      if (point === undefined) break;
      const entries = nonZeros(h, range);
      let passSeconds = Number.NaN;
      if ('program' in pass) {
        const passes = [];
        for (let i = 0; i < Math.min(3, options.samples); i++) {
          const one = await runPass(pass.program, h, range);
          if (one?.nonzeros === entries) passes.push(one.seconds);
          else
            options.failure(
              `${model.name}, range ${range}: the compiled pass met ${one?.nonzeros} non-zeros, not ${entries}`,
            );
        }
        passSeconds = spreadOf(passes).median;
      }
      for (const [time, step] of [
        [point.median, grain],
        [passSeconds, PASS_GRAIN],
      ] as const) {
        const warning = grainWarning(time, step);
        if (warning !== undefined) notes.add(`Range ${range}: ${warning}.`);
      }
      const target = model.targets[range];
      const peak = point.answer.peak;
      const growth = previous?.range === range - 1 ? point.median / previous.median : Number.NaN;
      const passes = point.median / passSeconds;
      rows.push([
        `${range}`,
        `${candidatesOf(model.cell, range)}`,
        `${point.answer.dimension}`,
        point.samples > 1 ? `${seconds(point.median)} ± ${seconds(point.deviation)}` : seconds(point.median),
        `${point.samples}`,
        ratio(growth),
        megabytes(peak),
        ratio((point.median / entries) * 1e9),
        Number.isNaN(passSeconds) ? '—' : seconds(passSeconds),
        ratio(passes),
        target === undefined
          ? ''
          : verdict(target, { seconds: point.median, megabytes: peak / 1e6, passes, growth }),
      ]);
      previous = { range, median: point.median };
      before.push(point.answer.before);
      options.progress(`${model.name}: range ${range} in ${seconds(point.median)}`);
    }
    if (rows.length === 0) continue;
    options.table({
      name: `search-${model.name}`,
      title: `${model.title}: \`${model.formula}\``,
      columns: [
        'range',
        'candidates',
        'charges',
        'time, median ± MAD',
        'samples',
        'growth',
        'peak memory',
        'ns a non-zero',
        'compiled pass',
        'search/pass',
        'target',
      ],
      rows,
      notes: [
        'A sample is one search in a fresh process, one thread, nothing warmed up; without the start of Node.',
        `Peak memory is that of the whole process; Node and the loader have ${megabytes(spreadOf(before).median)} before the search begins.`,
        ...notes,
      ],
    });
  }
}
