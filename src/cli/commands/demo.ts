/** `holdfast demo`: the main job on an invented model, from formula to verdict. */
import { parseModel } from '../../model/formula.ts';
import { printResult } from '../../report/text.ts';
import { search } from '../../search/background.ts';
import { type Command, Exit } from '../command.ts';
import { progressLine } from '../progress.ts';

/** Invented: a chain of magnetic ions between two electrodes, in a gate field that can be tilted. No such device exists. */
const DEVICE = '3/2 XX + 5/4 YY + 7/10 ZZ';
const TILTED = `${DEVICE} + 1/5 X + 2/5 Z`;
const RANGE = 6;

export const demo: Command = {
  name: 'demo',
  summary: 'the main job on an invented model, in a second',
  help: `holdfast demo

Searches an invented device twice: without a field, where it has a charge of every range,
and with a tilted field, where nothing but the energy is left.

  holdfast demo

Exit status: 0 shown, 1 a failure.`,
  options: {},
  async run(input) {
    const cases = [
      ['Gate off', DEVICE],
      ['Gate tilted', TILTED],
    ] as const;
    input.out('The "Tern" wire, an invented device with invented couplings: what does it conserve?\n\n');
    for (const [title, formula] of cases) {
      const line = progressLine(input);
      const result = await search(parseModel(formula), {
        range: RANGE,
        signal: input.signal,
        onProgress: line.show,
      }).finally(line.clear);
      input.out(`${title}: H = Σ ${formula}\n\n${printResult(result, { colour: input.colour })}\n`);
    }
    return Exit.done;
  },
};
