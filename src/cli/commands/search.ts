/** `holdfast search`: all charges up to a range. */
import { assertCertifiable, certificateOf } from '../../certificate/certificate.ts';
import { InputError, LimitError } from '../../errors.ts';
import { resultToJson } from '../../report/json.ts';
import { latexResult } from '../../report/latex.ts';
import {
  allWavesToJson,
  latticeResultToJson,
  printAllWaves,
  printLatticeResult,
} from '../../report/lattice.ts';
import { type PageOptions, reportPage } from '../../report/page.ts';
import { pictureOfResult } from '../../report/picture.ts';
import { printResult } from '../../report/text.ts';
import { searchAllWaves, search as searchInBackground, searchLattice } from '../../search/background.ts';
import { methodFor } from '../../search/plan.ts';
import type { SearchResult } from '../../search/result.ts';
import { checkWithProgress } from '../certificate-file.ts';
import { type Command, type CommandInput, Exit } from '../command.ts';
import { asksForLattice, LATTICE_HELP, LATTICE_OPTIONS, latticeFromOptions } from '../lattice-options.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';
import { gigabytesOption, rangeOption, wholeOption } from '../number-options.ts';
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
  holdfast search "ZZ + X + 1/2 Z" --range 4 --report chain.html --certificate chain.json
  holdfast search "XX + YY + ZZ" --range 5 --latex > heisenberg.tex

${MODEL_HELP}

Search:
  --range K             largest range, in cells
  --certificate FILE    writes the proof, for "holdfast check FILE"
  --growth              follow the strings that stay alive instead of visiting every candidate: for injective
                        nearest-neighbour interactions; taken by itself above 15 spins
  --checkpoint DIR      keeps finished layers there; the same search, started again, goes on from the last one
  --threads N           conserved sectors searched at the same time (default: the processors, from 13 spins on)
  --sectors N           cut the search into up to N sectors, 1 to 8: each needs that much less memory
  --memory GB           refuse to start above so many gigabytes (default: what is free)

${LATTICE_HELP}

Output:
  --unfold              print every string; else long charges are folded, with the count of the rest
  --json                the result for machines, every string, and nothing else, on standard output
  --latex               a LaTeX document on standard output instead
  --report FILE         an HTML page with verdict, charges typeset and drawn, proof and certificate
  --picture FILE        the charges drawn, as SVG

Exit status: 0 a complete answer, 1 a failure, 2 bad input.`,
  options: {
    ...MODEL_OPTIONS,
    ...LATTICE_OPTIONS,
    range: { type: 'string' },
    json: { type: 'boolean' },
    certificate: { type: 'string' },
    growth: { type: 'boolean' },
    checkpoint: { type: 'string' },
    threads: { type: 'string' },
    sectors: { type: 'string' },
    memory: { type: 'string' },
    unfold: { type: 'boolean' },
    latex: { type: 'boolean' },
    report: { type: 'string' },
    picture: { type: 'string' },
  },
  async run(input) {
    if (asksForLattice(input)) return runOnLattice(input);
    const range = rangeOption(input);
    const memory = gigabytesOption(input);
    if (input.values['json'] === true && input.values['latex'] === true)
      throw new InputError('command line', '--json or --latex', 'both');
    const { certificate, report, picture } = input.values as Readonly<Record<string, string | undefined>>;
    const model = await modelFromOptions(input);
    const method = methodFor(model, range, input.values['growth'] === true ? 'growth' : undefined);
    if (certificate !== undefined) assertCertifiable(model, range, method);
    const checkpoint = input.values['checkpoint'] as string | undefined;
    const threads = wholeOption(input, 'threads', 3);
    const sectors = wholeOption(input, 'sectors', 3);
    const line = progressLine(input);
    const result = await searchInBackground(model, {
      range,
      signal: input.signal,
      onProgress: line.show,
      ...(memory === undefined ? {} : { memory }),
      ...(input.values['growth'] === true ? { method: 'growth' as const } : {}),
      ...(checkpoint === undefined ? {} : { checkpoint }),
      ...(threads === undefined ? {} : { threads }),
      ...(sectors === undefined ? {} : { sectors }),
    }).finally(line.clear);
    // The answer first: a file that cannot be written then loses nothing.
    input.out(printed(result, input));
    const proof =
      certificate === undefined && report === undefined ? undefined : await proofOf(result, input);
    if (certificate !== undefined) {
      if (typeof proof !== 'string') throw proof;
      await writeFileWhole('--certificate', certificate, [proof], input.signal);
    }
    if (report !== undefined)
      await writeFileWhole(
        '--report',
        report,
        [reportPage(result, await carried(proof, input))],
        input.signal,
      );
    if (picture !== undefined)
      await writeFileWhole('--picture', picture, [pictureOfResult(result)], input.signal);
    return Exit.done;
  },
};

/** What the chain's search has and this one does not write. */
const CHAIN_ONLY = ['certificate', 'checkpoint', 'threads', 'sectors', 'latex', 'report', 'picture'] as const;

const WAVE_STAGES = ['list', 'peel', 'assemble', 'solve'];

async function runOnLattice(input: CommandInput): Promise<number> {
  for (const name of CHAIN_ONLY)
    if (input.values[name] !== undefined)
      throw new InputError(
        `--${name}`,
        'the uniform infinite chain',
        'an option for other lattices beside it',
      );
  const range = input.values['range'] === undefined ? undefined : rangeOption(input);
  const memory = gigabytesOption(input);
  const { model, options } = await latticeFromOptions(input, range);
  if (input.values['all-waves'] === true) {
    if (range === undefined || options.wave !== undefined || options.period !== undefined)
      throw new InputError('--all-waves', '--range alone', 'another window, wave or period beside it');
    const line = shareLine(input, 'all wave numbers');
    const waves = await searchAllWaves(model, range, {
      signal: input.signal,
      onProgress: (stage) => line.show(WAVE_STAGES.indexOf(stage) / WAVE_STAGES.length),
      ...(memory === undefined ? {} : { memory }),
    }).finally(line.clear);
    input.out(
      input.values['json'] === true
        ? `${JSON.stringify(allWavesToJson(waves), null, 2)}\n`
        : printAllWaves(waves),
    );
    return Exit.done;
  }
  const line = shareLine(input, 'searching');
  const result = await searchLattice(model, {
    ...options,
    signal: input.signal,
    onProgress: ({ done }) => line.show(done),
    ...(memory === undefined ? {} : { memory }),
  }).finally(line.clear);
  input.out(
    input.values['json'] === true
      ? `${JSON.stringify(latticeResultToJson(result), null, 2)}\n`
      : printLatticeResult(result, input.values['unfold'] === true ? Number.POSITIVE_INFINITY : undefined),
  );
  return Exit.done;
}

/** The certificate, or why it would be too large. */
async function proofOf(result: SearchResult, input: CommandInput): Promise<string | LimitError> {
  const line = shareLine(input, 'writing the certificate');
  try {
    return await certificateOf(result, { signal: input.signal, onProgress: line.show });
  } catch (error) {
    if (error instanceof LimitError) return error;
    throw error;
  } finally {
    line.clear();
  }
}

/** A report carries only a certificate that the checker accepts. */
async function carried(proof: string | LimitError | undefined, input: CommandInput): Promise<PageOptions> {
  if (typeof proof !== 'string') return proof === undefined ? {} : { noCertificate: proof.message };
  const verdict = await checkWithProgress(proof, input);
  return verdict.status === 'accepted'
    ? { certificate: { id: verdict.id, text: proof } }
    : { noCertificate: verdict.reason };
}

function printed(result: SearchResult, { values, colour, width }: CommandInput): string {
  if (values['json'] === true) return `${JSON.stringify(resultToJson(result), null, 2)}\n`;
  if (values['latex'] === true) return latexResult(result);
  return printResult(result, {
    colour,
    width,
    ...(values['unfold'] === true ? { fold: Number.POSITIVE_INFINITY } : {}),
  });
}
