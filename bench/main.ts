/** `npm run bench`: see `USAGE`. Exit status 1 when a run fails or gives an answer that is known to be wrong. */
import { parseArgs } from 'node:util';
import { benchExternal } from './external/external.ts';
import { benchGrowth } from './growth.ts';
import { benchLattice } from './lattice.ts';
import { machine } from './measure.ts';
import { MODELS } from './models.ts';
import type { BenchOptions } from './options.ts';
import { benchScaling } from './scaling.ts';
import { benchSearch } from './search.ts';
import { markdown, writeTable } from './table.ts';

const BENCHES: Readonly<
  Record<string, { readonly what: string; run(options: BenchOptions): Promise<void> }>
> = {
  search: { what: 'the exhaustive search, beside one compiled pass over all non-zeros', run: benchSearch },
  growth: { what: 'the search that follows growth, for injective chains and ladders', run: benchGrowth },
  lattice: { what: 'other lattices, and the uniform chain through both engines', run: benchLattice },
  scaling: {
    what: 'what larger machines reach: the tables continued to range 18, and the search by growth',
    run: benchScaling,
  },
  external: { what: 'the same matrices through general-purpose exact libraries', run: benchExternal },
};

const USAGE = `npm run bench -- [NAME…] [options]

${Object.entries(BENCHES)
  .map(([name, { what }]) => `  ${name.padEnd(12)}${what}`)
  .join('\n')}

  --smoke          small sizes, one sample
  --large          the largest sizes too: half an hour, ten gigabytes
  --range A-B      these ranges instead of the usual ones
  --model NAME     this model only, may be repeated: ${MODELS.map((m) => m.name).join(', ')}
  --samples N      samples a point, 5; fewer where a point takes long
  --limit SECONDS  time limit of a point of another library, 120
  --write          puts the tables into docs/performance.md and docs/scaling.md
`;

async function main(): Promise<number> {
  const { values, positionals } = parseArgs({
    allowPositionals: true,
    options: {
      smoke: { type: 'boolean', default: false },
      large: { type: 'boolean', default: false },
      range: { type: 'string' },
      model: { type: 'string', multiple: true },
      samples: { type: 'string' },
      limit: { type: 'string' },
      write: { type: 'boolean', default: false },
      help: { type: 'boolean', short: 'h', default: false },
    },
  });
  const range = values.range === undefined ? undefined : /^(\d+)(?:-(\d+))?$/.exec(values.range);
  const count = (text: string | undefined, usual: number) => (text === undefined ? usual : Number(text));
  const samples = count(values.samples, values.smoke ? 1 : 5);
  const limit = count(values.limit, values.smoke ? 20 : 120);
  const unknown = [
    ...positionals.filter((name) => !(name in BENCHES)),
    ...(values.model ?? []).filter((name) => !MODELS.some((m) => m.name === name)),
  ];
  if (values.help || unknown.length > 0 || range === null || !(samples >= 1) || !(limit > 0)) {
    const reason = unknown.length > 0 ? `unknown: ${unknown.join(', ')}\n\n` : '';
    (values.help ? process.stdout : process.stderr).write(`${reason}${USAGE}`);
    return values.help ? 0 : 2;
  }
  const [from, to] = [Number(range?.[1]), Number(range?.[2] ?? range?.[1])];
  const heading = `Measured on ${new Date().toISOString().slice(0, 10)}: ${machine()}.`;
  let failures = 0;
  const options: BenchOptions = {
    smoke: values.smoke,
    large: values.large,
    ranges: range === undefined ? undefined : Array.from({ length: to - from + 1 }, (_, i) => from + i),
    models: values.model,
    samples: Math.floor(samples),
    limit,
    progress: (text) => process.stderr.write(`  ${text}\n`),
    table(table) {
      console.log(`${markdown(table)}\n`);
      if (values.write) writeTable(table, heading);
    },
    failure(text) {
      failures++;
      process.stderr.write(`FAILED ${text}\n`);
    },
  };
  console.log(`${heading}\n`);
  for (const name of positionals.length > 0 ? positionals : Object.keys(BENCHES)) {
    await BENCHES[name]!.run(options);
  }
  return failures === 0 ? 0 : 1;
}

process.exitCode = await main();
