/** `holdfast decide`: a verdict for every range at once. */
import { textFromRational } from '../../algebra/rational.ts';
import { CancelledError, InputError, show } from '../../errors.ts';
import { printVerdict } from '../../report/every-range.ts';
import { resultToJson } from '../../report/json.ts';
import { search as searchInBackground } from '../../search/background.ts';
import { everyRangeCertificate } from '../../theory/certificate.ts';
import { decide as decideModel } from '../../theory/decide.ts';
import type { EveryRangeVerdict } from '../../theory/verdict.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';
import { writeFileWhole } from '../output-file.ts';
import { progressLine } from '../progress.ts';

export const decide: Command = {
  name: 'decide',
  summary: 'a verdict on charges of every range at once, with its reasons',
  help: `holdfast decide FORMULA

One small exact computation bounds the number of charges of range k for every k at once: for injective nearest-neighbour
interactions of any cell (longer interactions in grouped cells) and for Ising-type chains in a field. Short ranges are
searched exhaustively. The verdict is one of

  none          no charge of range ≥ k at all
  complete      the exact number of charges of every range: upper bound and existence meet
  bounded       an upper bound for every range; existence as far as the search went
  by citation   the program's own lemmas do not reach, a published theorem does; it is named
  undecided     neither; what the search found is shown

  holdfast decide "2 XX + 3 YY + 5 ZZ + Z"
  holdfast decide "ZZ + g X + h Z" --set g=3/2 --set h=0
  holdfast decide "XIXI + YIYI + IXIX + IYIY + U ZZ" --cell 2 --set U=4

${MODEL_HELP}

Decide:
  --range K             search at least up to range K for what the lemmas leave open
  --wave-numbers        quantities that are not translation invariant, too (one spin a cell, injective)
  --certificate FILE    writes the proof of the upper bound, for "holdfast check FILE" (injective chains of
                        one or two spins a cell, and Ising-type chains along an axis)
  --json                the verdict for machines, and nothing else, on standard output

Exit status: 0 a verdict of one of the first four kinds, 1 undecided or a failure, 2 bad input.`,
  options: {
    ...MODEL_OPTIONS,
    range: { type: 'string' },
    'wave-numbers': { type: 'boolean' },
    certificate: { type: 'string' },
    json: { type: 'boolean' },
  },
  async run(input) {
    const text = input.values['range'];
    if (text !== undefined && (typeof text !== 'string' || !/^[1-9]\d{0,3}$/.test(text)))
      throw new InputError('--range', 'a whole number of cells, 1 or more', show(text));
    const model = await modelFromOptions(input);
    // A long search runs in a thread of its own, where it can be interrupted; what a verdict needs by itself is short.
    const line = progressLine(input);
    const searched =
      text === undefined
        ? undefined
        : await searchInBackground(model, {
            range: Number(text),
            signal: input.signal,
            onProgress: line.show,
          }).finally(line.clear);
    const verdict = decideModel(model, {
      ...(searched === undefined ? {} : { searched, searchRange: searched.range }),
      waveNumbers: input.values['wave-numbers'] === true,
      onStage: (stage) => {
        if (input.signal.aborted) throw new CancelledError('decide');
        if (input.interactive) input.note(`\r\u001b[2Kdecide: ${stage}`);
      },
    });
    if (input.interactive) input.note('\r\u001b[2K');
    // The answer first: a certificate that cannot be had then loses nothing.
    input.out(
      input.values['json'] === true
        ? `${JSON.stringify(verdictToJson(verdict), null, 2)}\n`
        : printVerdict(verdict),
    );
    const file = input.values['certificate'];
    if (typeof file === 'string')
      await writeFileWhole('--certificate', file, [everyRangeCertificate(model)], input.signal);
    return verdict.kind === 'undecided' ? Exit.failed : Exit.done;
  },
};

/** The JSON contract of `--json`. Integers of the pencil are texts, since they may be long. */
export function verdictToJson(verdict: EveryRangeVerdict): object {
  const bound = 'bound' in verdict ? verdict.bound : null;
  const rows = (matrix: readonly (readonly bigint[])[]) => matrix.map((row) => row.map(String));
  return {
    verdict: verdict.kind,
    from: 'from' in verdict ? verdict.from : null,
    perRange: verdict.kind === 'complete' ? verdict.perRange : null,
    reason: 'reason' in verdict ? verdict.reason : null,
    bound: bound && {
      ...bound,
      pencil: {
        columns: bound.pencil.columns,
        constant: rows(bound.pencil.constant),
        linear: rows(bound.pencil.linear),
      },
    },
    existence: 'existence' in verdict ? verdict.existence : null,
    citation:
      verdict.kind === 'by citation'
        ? {
            id: verdict.citation.theorem.id,
            conclusion: verdict.citation.theorem.conclusion,
            source: verdict.citation.theorem.source,
            basis: verdict.citation.theorem.basis,
            couplings: Object.fromEntries(
              Object.entries(verdict.citation.couplings).map(([name, value]) => [
                name,
                textFromRational({ numerator: value, denominator: 1n }),
              ]),
            ),
            axes: verdict.citation.axes,
          }
        : null,
    waveNumbers: verdict.waveNumbers,
    search: resultToJson(verdict.search),
    cautions: verdict.cautions,
  };
}
