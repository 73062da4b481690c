/** `holdfast currents`: densities and currents of all charges. */

import { InputError, show } from '../../errors.ts';
import { currentOf } from '../../physics/currents.ts';
import { printDensity } from '../../report/text.ts';
import { searchWithProgress } from '../charge-options.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';
import { rangeOption } from '../number-options.ts';

export const currents: Command = {
  name: 'currents',
  summary: 'the currents of all charges, under H or under another charge',
  help: `holdfast currents FORMULA --range K

For every charge of range up to K, with density q_j: the current J_j with i[H, q_j] = J_j - J_{j+1}, exactly. J_0 is printed where it
stands: "@ c" means that its words begin in cell c. A current belongs to the density shown; another density of the same charge
has another current.

  holdfast currents "XX + YY + 1/2 ZZ" --range 3
  holdfast currents "XX + YY + 1/2 ZZ" --range 3 --flow 3      under the flow of the charge Q3 instead of H

${MODEL_HELP}

Options:
  --range K             largest range of the charges, in cells
  --flow N              the flow of charge number N of "holdfast search" instead of H
  --json                for machines

Exit status: 0 answered, 1 a failure, 2 bad input.`,
  options: {
    ...MODEL_OPTIONS,
    range: { type: 'string' },
    flow: { type: 'string' },
    json: { type: 'boolean' },
  },
  async run(input) {
    const range = rangeOption(input);
    const model = await modelFromOptions(input);
    const found = await searchWithProgress(input, model, range);
    const flow = input.values['flow'];
    const number = flow === undefined ? 0 : Number(flow);
    if (
      flow !== undefined &&
      !(typeof flow === 'string' && /^\d+$/.test(flow) && number >= 1 && number <= found.charges.length)
    )
      throw new InputError('--flow', `the number of a charge, 1 to ${found.charges.length}`, show(flow));
    const generator = number === 0 ? model.density : found.charges[number - 1]!.density;
    const name = number === 0 ? 'H' : `Q${number}`;
    const rows = found.charges.map(({ density }) => ({
      density,
      current: model.chain.bracket(generator, density).isZero()
        ? currentOf(model.chain, generator, density)
        : null,
    }));
    if (input.values['json'] === true) {
      const answer = rows.map(({ density, current }) => ({
        density,
        current: current === null ? null : { cell: current.placed.cell, operator: current.placed.operator },
      }));
      input.out(`${JSON.stringify({ generator, range, charges: answer }, null, 2)}\n`);
      return Exit.done;
    }
    const lines = [`i[${name}, q_j] = J_j - J_{j+1}`, ''];
    rows.forEach(({ density, current }, i) => {
      lines.push(`Q${i + 1}  q_0 = ${printDensity(model, density)}`);
      lines.push(
        current === null
          ? `    no current: [${name}, Q${i + 1}] is not zero`
          : current.placed.operator.isZero()
            ? '    J_0 = 0: every q_j is conserved by itself'
            : `    J_0 = ${current.placed.operator.toString()}  @ ${current.placed.cell}`,
      );
    });
    input.out(`${lines.join('\n')}\n`);
    return Exit.done;
  },
};
