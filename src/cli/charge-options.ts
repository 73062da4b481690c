/** What the commands on charges share: a model and one formula more, searches, and work in steps. */
import type { Operator } from '../algebra/operator.ts';
import { InputError } from '../errors.ts';
import { parseDensity } from '../model/formula.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { search } from '../search/background.ts';
import type { SearchResult } from '../search/result.ts';
import type { CommandInput } from './command.ts';
import { modelFromOptions } from './model-options.ts';
import { giveWay } from './output-file.ts';
import { progressLine, shareLine } from './progress.ts';

/** The formula is read with the cell of the model. Its coefficients are numbers: `--set` belongs to the model. */
export async function modelAndFormula(
  input: CommandInput,
  what: string,
): Promise<{ model: Hamiltonian; formula: string; density: Operator }> {
  const formula = input.positionals.at(-1);
  const models = input.values['model'] === undefined ? 1 : 0;
  if (formula === undefined || input.positionals.length !== models + 1)
    throw new InputError(
      'command line',
      `${models === 1 ? 'the model, then ' : ''}${what}, in quotes`,
      `${input.positionals.length} formulas`,
    );
  const model = await modelFromOptions({ ...input, positionals: input.positionals.slice(0, -1) });
  return { model, formula, density: parseDensity(formula, { cell: model.chain.cell }) };
}

/** A search with the progress line, stopped by the first interrupt. */
export async function searchWithProgress(
  input: CommandInput,
  model: Hamiltonian,
  range: number,
): Promise<SearchResult> {
  const line = progressLine(input);
  return search(model, { range, signal: input.signal, onProgress: line.show }).finally(line.clear);
}

/** Runs work that comes in steps, with a progress line; the first interrupt stops it before the next step. */
export async function steps<T>(
  input: CommandInput,
  what: string,
  work: Generator<number, T>,
  share: (step: number) => number,
): Promise<T> {
  const line = shareLine(input, what);
  try {
    for (;;) {
      const step = work.next();
      if (step.done) return step.value;
      line.show(share(step.value));
      await giveWay(what, input.signal);
    }
  } finally {
    line.clear();
  }
}
