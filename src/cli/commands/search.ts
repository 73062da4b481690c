/** `holdfast search`: all charges up to a range. */
import { textFromRational } from '../../algebra/rational.ts';
import { textFromWord } from '../../algebra/word.ts';
import { certificateOf } from '../../certificate/certificate.ts';
import { InputError, show } from '../../errors.ts';
import { printResult } from '../../report/text.ts';
import { search as searchInBackground } from '../../search/background.ts';
import type { SearchResult } from '../../search/result.ts';
import { type Command, type CommandInput, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';
import { writeFileWhole } from '../output-file.ts';
import { progressLine, shareLine } from '../progress.ts';

export const search: Command = {
  name: 'search',
  summary: 'all local conserved quantities up to a range, with exact coefficients',
  help: `holdfast search FORMULA --range K

Finds every charge of range up to K cells, or proves that there is none, on the infinite chain.

  holdfast search "XX + YY + 3 X" --range 6
  holdfast search "Jx XX + Jy YY" --set Jx=1 --set Jy=2/3 --range 5
  holdfast search "XIXI + YIYI + IXIX + IYIY + U ZZ" --cell 2 --set U=4 --range 3 --json

${MODEL_HELP}

Search:
  --range K             largest range, in cells
  --json                the result for machines, and nothing else, on standard output
  --certificate FILE    writes the proof, for "holdfast check FILE"
  --memory GB           refuse to start above so many gigabytes (default: what is free)

Exit status: 0 a complete answer, 1 a failure, 2 bad input.`,
  options: {
    ...MODEL_OPTIONS,
    range: { type: 'string' },
    json: { type: 'boolean' },
    certificate: { type: 'string' },
    memory: { type: 'string' },
  },
  async run(input) {
    const range = rangeOption(input);
    const memory = gigabytesOption(input);
    const model = await modelFromOptions(input);
    const line = progressLine(input);
    const result = await searchInBackground(model, {
      range,
      signal: input.signal,
      onProgress: line.show,
      ...(memory === undefined ? {} : { memory }),
    }).finally(line.clear);
    const file = input.values['certificate'] as string | undefined;
    if (file !== undefined) {
      const writing = shareLine(input, 'writing the certificate');
      const text = await certificateOf(result, { signal: input.signal, onProgress: writing.show }).finally(
        writing.clear,
      );
      await writeFileWhole('--certificate', file, [text], input.signal);
    }
    input.out(
      input.values['json'] === true
        ? `${JSON.stringify(resultToJson(result), null, 2)}\n`
        : printResult(result, { colour: input.colour }),
    );
    return Exit.done;
  },
};

export function rangeOption({ values }: Pick<CommandInput, 'values'>): number {
  const text = values['range'];
  if (typeof text !== 'string' || !/^[1-9]\d{0,3}$/.test(text))
    throw new InputError('--range', 'a whole number of cells, 1 or more', show(text));
  return Number(text);
}

function gigabytesOption({ values }: Pick<CommandInput, 'values'>): number | undefined {
  const text = values['memory'];
  if (text === undefined) return undefined;
  if (typeof text !== 'string' || !/^\d{1,6}(\.\d+)?$/.test(text) || Number(text) === 0)
    throw new InputError('--memory', 'gigabytes, a positive number', show(text));
  return Number(text) * 1e9;
}

/** The JSON contract of `--json`: coefficients as `p/q`, words from the first spin of the first cell on. */
export function resultToJson(result: SearchResult): object {
  const { hamiltonian, charges, dimensionByRange, range } = result;
  const { chain, density } = hamiltonian;
  const terms = (operator: SearchResult['charges'][number]['density']) =>
    [...operator.terms()].map(([word, c]) => ({
      coefficient: textFromRational(c),
      word: textFromWord(word, chain.range(word) * chain.cell),
    }));
  return {
    range,
    cell: chain.cell,
    hamiltonian: { range: hamiltonian.range, reflection: hamiltonian.reflection, terms: terms(density) },
    dimension: dimensionByRange[range - 1],
    dimensionByRange,
    charges: charges.map((q) => ({ range: q.range, parity: q.parity, terms: terms(q.density) })),
    expansionOfH: result.expansionOfH?.map(textFromRational) ?? null,
    validRings: { minimumCells: result.minimumCells },
    primes: result.primes,
    candidates: result.candidates,
    milliseconds: Math.round(result.milliseconds),
  };
}
