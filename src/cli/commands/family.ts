/** `holdfast family`: for which couplings does a charge appear? */

import { existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { certificateOf } from '../../certificate/certificate.ts';
import { checkNow } from '../../check/check.ts';
import { InputError, show, VerificationError } from '../../errors.ts';
import { type Family, familyAt } from '../../model/formula.ts';
import { familyJson, familyLatex, printEveryRange, printFamily } from '../../report/family.ts';
import { type PlotWindow, plotFamily } from '../../report/family-plot.ts';
import { searchNow } from '../../search/search.ts';
import { classify, type FamilyResult, type FamilyState } from '../../theory/family/classify.ts';
import { everyRangeOf } from '../../theory/family/every-range.ts';
import { answersOf } from '../../theory/family/loci.ts';
import { stateFromText, textFromState } from '../../theory/family/state.ts';
import { type Command, type CommandInput, Exit } from '../command.ts';
import { familyFromOptions, MODEL_HELP, MODEL_OPTIONS } from '../model-options.ts';
import { rangeOption } from '../number-options.ts';
import { writeFileWhole } from '../output-file.ts';

export const family: Command = {
  name: 'family',
  summary: 'for which couplings charges appear: every case of a family, with its charges',
  help: `holdfast family FORMULA --range K

Parameters without a value stay free. Splits the space of their real values into finitely many cases given by polynomial
conditions, and finds all charges of range up to K in each, with polynomial coefficients.

  holdfast family "ZZ + g X + h Z" --range 4
  holdfast family "Jx XX + Jy YY + Jz ZZ + hx X + hy Y + hz Z" --range 3
  holdfast family "XX + YY + Jz ZZ + hx X + hz Z" --set hx=1 --range 3 --picture map.svg

${MODEL_HELP}

Family:
  --range K             largest range, in cells
  --every-range         decides every range at a point of each set, after the table
  --json                every case for machines, and nothing else, on standard output
  --latex               the table of answers as a LaTeX tabular
  --picture FILE        two free parameters: a map of the curves and points where more charges appear, as SVG
  --certificates DIR    writes, for a rational point of each case, the certificate of the plain search there, and checks it
  --checkpoint FILE     keeps closed cases there; the same command, started again, goes on from them
  --window A:B,C:D      what the map shows of the two parameters (-3:3,-3:3)

Exit status: 0 a complete answer, 1 a failure, 2 bad input.`,
  options: {
    ...MODEL_OPTIONS,
    range: { type: 'string' },
    json: { type: 'boolean' },
    latex: { type: 'boolean' },
    picture: { type: 'string' },
    window: { type: 'string' },
    certificates: { type: 'string' },
    'every-range': { type: 'boolean' },
    checkpoint: { type: 'string' },
  },
  async run(input) {
    const range = rangeOption(input);
    const plot = input.values['picture'] as string | undefined;
    const view = windowOption(input);
    if (input.values['json'] === true && input.values['latex'] === true)
      throw new InputError('command line', '--json or --latex', 'both');
    if (
      input.values['every-range'] === true &&
      (input.values['json'] === true || input.values['latex'] === true)
    )
      throw new InputError('--every-range', 'the answer as text', '--json or --latex');
    const members = await familyFromOptions(input);
    if (plot !== undefined && members.parameters.length !== 2)
      throw new InputError(
        '--picture',
        'two free parameters (give the others a value with --set)',
        `${members.parameters.length}`,
      );
    const checkpoint = input.values['checkpoint'] as string | undefined;
    const resume = checkpoint === undefined ? undefined : stateIn(checkpoint, members, range);
    const result = await classify(members, {
      range,
      ...(resume === undefined ? {} : { resume }),
      ...(checkpoint === undefined
        ? {}
        : { onState: (state) => replaceFile(checkpoint, textFromState(members, range, state)) }),
      signal: input.signal,
      onProgress({ open, closed }) {
        if (input.interactive) input.note(`\r\u001b[2Kcases: ${closed} closed, ${open} open`);
      },
    }).finally(() => {
      if (input.interactive) input.note('\r\u001b[2K');
    });
    const certificates = input.values['certificates'] as string | undefined;
    if (certificates !== undefined) input.note(await certify(result, certificates, input.signal));
    if (plot !== undefined) await writeFileWhole('--picture', plot, [plotFamily(result, view)], input.signal);
    if (input.values['json'] === true) input.out(`${JSON.stringify(familyJson(result), null, 2)}\n`);
    else input.out(input.values['latex'] === true ? familyLatex(result) : printFamily(result));
    if (input.values['every-range'] === true)
      input.out(`\n${printEveryRange(result, [...everyRangeOf(members, answersOf(result))])}`);
    return Exit.done;
  },
};

/**
 * One certificate a case with a rational point. At a point they prove both bounds; rank at a point bounds the rank at general points
 * from below, so that of a case's point shows that general points of it have no more charges.
 */
async function certify(
  { cases, family: members, range }: FamilyResult,
  folder: string,
  signal: AbortSignal,
): Promise<string> {
  try {
    mkdirSync(folder, { recursive: true });
  } catch (error) {
    throw new InputError(
      '--certificates',
      'a folder that can be made',
      `${show(folder)}: ${(error as Error).message}`,
    );
  }
  let written = 0;
  for (const [i, { point }] of cases.entries()) {
    if (point === null || members.terms.every(([, p]) => p.evaluate(point).numerator === 0n)) continue;
    const proof = await certificateOf(searchNow(familyAt(members, point), { range }), { signal });
    const verdict = checkNow(proof);
    if (verdict.status !== 'accepted')
      throw new VerificationError(`family: the certificate of case ${i + 1} is ${verdict.status}`);
    await writeFileWhole('--certificates', join(folder, `case-${i + 1}.json`), [proof], signal);
    written++;
  }
  return `${written} certificates written and accepted; ${cases.length - written} cases have no rational point at hand, or no Hamiltonian.\n`;
}

function stateIn(path: string, members: Family, range: number): FamilyState | undefined {
  return existsSync(path) ? stateFromText(members, range, readFileSync(path, 'utf8')) : undefined;
}

/** Old text or new at any moment, whenever the run is killed. */
function replaceFile(path: string, text: string): void {
  try {
    writeFileSync(`${path}.part`, text);
    renameSync(`${path}.part`, path);
  } catch (error) {
    throw new InputError(
      '--checkpoint',
      'a file that can be written',
      `${show(path)}: ${(error as Error).message}`,
    );
  }
}

function windowOption({ values }: Pick<CommandInput, 'values'>): PlotWindow {
  const text = (values['window'] ?? '-3:3,-3:3') as string;
  const number = String.raw`(-?\d{1,6}(?:\.\d{1,6})?)`;
  const match = new RegExp(`^${number}:${number},${number}:${number}$`).exec(text);
  const [left, right, bottom, top] = (match ?? []).slice(1).map(Number) as [number, number, number, number];
  if (match === null || left >= right || bottom >= top)
    throw new InputError('--window', 'A:B,C:D with A < B and C < D', show(text));
  return { left, right, bottom, top };
}
