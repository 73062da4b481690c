/** `holdfast matrix`: the equations of a search for other exact linear-algebra software. */

import { InputError, show } from '../../errors.ts';
import { EquationMatrix, type MatrixSize } from '../../search/matrix.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';
import { rangeOption } from '../number-options.ts';
import { giveWay, writeFileWhole } from '../output-file.ts';

export const matrix: Command = {
  name: 'matrix',
  summary: 'the equations of a search as a sparse matrix, for other software',
  help: `holdfast matrix FORMULA --range K --output FILE

Writes the equations [H, Q] = 0 for all candidates of range up to K as a plain sparse integer matrix (SMS: "rows columns M",
"row column value" from 1 on, "0 0 0"), which exact linear-algebra packages read. Columns minus rank is the number of
independent charges. FILE.legend says which string is which column ("column NUMBER WORD") and row ("row NUMBER WORD").

  holdfast matrix "XX + YY + 3 X" --range 4 --output chain.sms

${MODEL_HELP}

Matrix:
  --range K             largest range of the candidates, in cells
  --output FILE         where to write; the legend goes to FILE.legend

Exit status: 0 written, 1 a failure, 2 bad input.`,
  options: { ...MODEL_OPTIONS, range: { type: 'string' }, output: { type: 'string' } },
  async run(input) {
    const range = rangeOption(input);
    const file = input.values['output'];
    if (typeof file !== 'string' || file === '')
      throw new InputError('--output', 'a file to write to', show(file));
    const equations = new EquationMatrix(await modelFromOptions(input), range);
    let size: MatrixSize | undefined;
    for (const steps = equations.sizing(); size === undefined; ) {
      for (let i = 0; i < 4096 && size === undefined; i++) size = steps.next().value ?? undefined;
      await giveWay('matrix', input.signal);
    }
    await writeFileWhole('--output', file, equations.lines(size), input.signal);
    await writeFileWhole('--output', `${file}.legend`, equations.legend(), input.signal);
    input.out(`${size.rows} rows, ${size.columns} columns, ${size.entries} entries\n`);
    return Exit.done;
  },
};
