/** The equations of a search handed to general-purpose exact libraries as a plain matrix: rank, time, and how many times slower. */
import { textFromWord } from '../../src/algebra/word.ts';
import { type BenchModel, hamiltonianOfBench, MODELS } from '../models.ts';
import type { BenchOptions } from '../options.ts';
import { measurePoint } from '../search.ts';
import { ratio, seconds } from '../table.ts';
import { findLibraries, type Limits } from './libraries.ts';
import { type PlainTerm, plainMatrix } from './matrix.ts';

const USUAL_MODELS = ['xyz-field', 'ising-mixed'];
const USUAL_RANGES = [5, 6, 7, 8, 9];
/** A prime that every library here takes. */
const PRIME = 67_108_859;
const GIGABYTES = 3;

export async function benchExternal(options: BenchOptions): Promise<void> {
  const libraries = await findLibraries();
  const wanted = options.models ?? (options.smoke ? USUAL_MODELS.slice(0, 1) : USUAL_MODELS);
  const limits: Limits = { seconds: options.limit, gigabytes: GIGABYTES, prime: PRIME };
  for (const model of MODELS.filter((m) => wanted.includes(m.name))) {
    const rows: string[][] = [];
    const given = new Set<string>();
    for (const range of options.ranges ?? (options.smoke ? [5] : USUAL_RANGES)) {
      const matrix = plainMatrix(plainTerms(model), model.cell, range);
      const expected = matrix.columns - model.dimension(range);
      const search = await measurePoint(model, range, options);
      if (search === undefined) break;
      const row = [
        `${range}`,
        `${matrix.rows} × ${matrix.columns}`,
        `${matrix.entries.length}`,
        seconds(search.median),
      ];
      for (const entry of libraries) {
        if ('missing' in entry) {
          row.push('not installed');
          continue;
        }
        const { library } = entry;
        if (given.has(library.name)) {
          row.push('—');
          continue;
        }
        const answer =
          library.bytes(matrix) > GIGABYTES * 1e9 ? { failed: 'memory' } : await library.rank(matrix, limits);
        if ('rank' in answer) {
          if (answer.rank !== expected)
            options.failure(
              `${model.name}, range ${range}: ${library.name} finds rank ${answer.rank}, not ${expected}`,
            );
          row.push(`${seconds(answer.seconds)}, ×${ratio(answer.seconds / search.median)}`);
        } else {
          // What is too large at one range is larger at the next.
          given.add(library.name);
          row.push(
            answer.failed === 'time'
              ? `over ${options.limit} s`
              : answer.failed === 'memory'
                ? `over ${GIGABYTES} GB`
                : 'failed',
          );
          if (answer.failed !== 'time' && answer.failed !== 'memory')
            options.progress(`${library.name}: ${answer.failed}`);
        }
        options.progress(`${model.name}: range ${range}, ${library.name}: ${row.at(-1)}`);
      }
      rows.push(row);
    }
    if (rows.length === 0) continue;
    options.table({
      name: `external-${model.name}`,
      title: `${model.title}: \`${model.formula}\`, rank by general-purpose libraries`,
      columns: [
        'range',
        'matrix',
        'non-zeros',
        'whole search',
        ...libraries.map((entry) => ('missing' in entry ? entry.name : entry.library.name)),
      ],
      rows,
      notes: [
        ...libraries.map((entry) =>
          'missing' in entry
            ? `${entry.name}: ${entry.missing}.`
            : `${entry.library.name}: ${entry.library.method}; the time of the elimination alone, without writing and reading the matrix.`,
        ),
        `The limits, ${options.limit} s and ${GIGABYTES} GB, hold for reading the matrix and elimination together; after one is met, larger ranges are left out.`,
        'A rank alone: the libraries were not asked for the charges. Every rank agrees with the search.',
      ],
    });
  }
}

function plainTerms(model: BenchModel): PlainTerm[] {
  return [...hamiltonianOfBench(model).density.numerators].map(([word, value]) => [
    Number(value),
    textFromWord(word),
  ]);
}
