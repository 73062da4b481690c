/** `holdfast ladder`: explicit charges range by range, from the boost operator. */

import { once } from 'node:events';
import { createWriteStream } from 'node:fs';
import { textFromWord } from '../../algebra/word.ts';
import { InputError, show } from '../../errors.ts';
import { unpack, wordOf } from '../../theory/boost.ts';
import { climbing, type Rung } from '../../theory/ladder.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';
import { rangeOption } from '../number-options.ts';
import { giveWay } from '../output-file.ts';

/** Terms up to which a charge is printed. */
const FOLD = 24;

export const ladder: Command = {
  name: 'ladder',
  summary: 'explicit charges of rising range from a boost operator, each re-checked exactly',
  help: `holdfast ladder FORMULA --range K

Charges by repeated commutators with a boost operator, at a cost proportional to the answer. Each one is multiplied
with H again, exactly, before it is shown. A model without such a ladder may still have charges: use search.

  holdfast ladder "2 XX + 3 YY + 5 ZZ" --range 8
  holdfast ladder "2 XX + 3 YY + 5 ZZ" --range 14 --output charges.jsonl

${MODEL_HELP}

Ladder:
  --range K             largest range, in cells
  --output FILE         every term to a new file: a charge a line, {"range", "terms": [[word, coefficient], …]}

Exit status: 0 the ladder reached its range, 1 there is none or a failure, 2 bad input.`,
  options: { ...MODEL_OPTIONS, range: { type: 'string' }, output: { type: 'string' } },
  async run(input) {
    const range = rangeOption(input);
    if (range < 2) throw new InputError('--range', 'a whole number of cells, 2 or more', show(String(range)));
    const file = input.values['output'] as string | undefined;
    const model = await modelFromOptions(input);
    const sink = file === undefined ? undefined : await openNew(file);
    let reached = 0;
    try {
      for (const step of climbing(model, { range })) {
        if (!('packed' in step)) {
          await giveWay('ladder', input.signal);
          if (input.interactive)
            input.note(
              `\r\u001b[2Kladder: range ${step.range}, ${step.terms.toLocaleString('en')} terms, ${(100 * step.done).toFixed(0)} %`,
            );
          continue;
        }
        if (input.interactive) input.note('\r\u001b[2K');
        reached = step.range;
        const text = sink === undefined && step.size <= FOLD ? `: ${unpack(step.packed)}` : '';
        input.out(`range ${step.range}: ${step.size} terms${text}\n`);
        if (sink !== undefined)
          for (const piece of lineOf(step, model.chain.cell))
            if (!sink.write(piece)) await once(sink, 'drain');
      }
    } finally {
      sink?.end();
      if (sink !== undefined) await once(sink, 'close');
    }
    if (reached < range)
      input.note(`The ladder ends at range ${reached}: its next rung is zero or no longer.\n`);
    return reached < range ? Exit.failed : Exit.done;
  },
};

/** Refuses to overwrite. */
async function openNew(file: string): Promise<ReturnType<typeof createWriteStream>> {
  const stream = createWriteStream(file, { flags: 'wx' });
  try {
    await once(stream, 'open');
  } catch (error) {
    throw new InputError(
      '--output',
      'a new file in a folder that can be written',
      `${show(file)}: ${(error as Error).message}`,
    );
  }
  return stream;
}

/** One JSON text in pieces, so that a long charge is never a string of its own. */
function* lineOf({ range, packed }: Rung, cell: number): Generator<string> {
  let piece = `{"range":${range},"terms":[`;
  for (let i = 0; i < packed.coefficients.length; i++) {
    const word = wordOf(packed.low[i]!, packed.high[i]!);
    piece += `${i === 0 ? '' : ','}["${textFromWord(word, cell)}","${packed.coefficients[i]}"]`;
    if (piece.length > 65_536) {
      yield piece;
      piece = '';
    }
  }
  yield `${piece}]}\n`;
}
