/** `holdfast bound`: Mazur's lower bound on the long-time autocorrelation of an observable. */
import { rationalFromText, textFromRational } from '../../algebra/rational.ts';
import { InputError, show } from '../../errors.ts';
import { mazurBounds } from '../../physics/overlaps.ts';
import { boundPicture } from '../../report/bound-picture.ts';
import { decimalText } from '../../report/decimal.ts';
import { modelAndFormula, searchWithProgress } from '../charge-options.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS } from '../model-options.ts';
import { rangeOption } from '../number-options.ts';
import { writeFileWhole } from '../output-file.ts';

export const bound: Command = {
  name: 'bound',
  summary: 'how much of an observable the charges keep for ever (Mazur bound)',
  help: `holdfast bound FORMULA OBSERVABLE --range K

A lower bound on the long-time average of the autocorrelation (A(t)|A) of A, the sum of translates of OBSERVABLE, per cell at infinite
temperature; exact, for the charges of range 1, 2, … K. For one local observable on a ring of L cells divide by L.

  holdfast bound "XX + YY + ZZ" "XY - YX" --range 4
  holdfast bound "XX + YY + 1/2 ZZ" "XY - YX" --range 3 --magnetisation 1/2
  holdfast bound "ZZ + X + 1/2 Z" "X" --range 4 --digits 20 --picture bound.svg

${MODEL_HELP}
  OBSERVABLE            a formula with numbers as coefficients, after the model

Options:
  --range K             largest range of the charges, in cells
  --digits N            decimals beside the exact value (10)
  --magnetisation M     <Z> of every spin, between -1 and 1: connected correlations in that state; H must conserve the sum of Z
  --picture FILE        the curve, as SVG
  --json                for machines

Exit status: 0 answered, 1 a failure, 2 bad input.`,
  options: {
    ...MODEL_OPTIONS,
    range: { type: 'string' },
    digits: { type: 'string' },
    magnetisation: { type: 'string' },
    picture: { type: 'string' },
    json: { type: 'boolean' },
  },
  async run(input) {
    const range = rangeOption(input);
    const digits = digitsOption(input.values['digits']);
    const { model, formula, density } = await modelAndFormula(input, 'an observable');
    const mean = input.values['magnetisation'] as string | undefined;
    const options = mean === undefined ? {} : { magnetisation: rationalFromText(mean) };
    const found = await searchWithProgress(input, model, range);
    const bounds = mazurBounds(found, density, options);
    const picture = input.values['picture'] as string | undefined;
    if (picture !== undefined)
      await writeFileWhole(
        '--picture',
        picture,
        [boundPicture(bounds, `Share of ${formula} that never decays, at least`)],
        input.signal,
      );
    if (input.values['json'] === true) {
      const rows = bounds.map((b) => ({
        range: b.range,
        charges: b.charges,
        bound: textFromRational(b.bound),
        share: textFromRational(b.share),
        decimal: decimalText(b.bound, digits),
      }));
      input.out(
        `${JSON.stringify({ observable: density, magnetisation: mean ?? '0', bounds: rows }, null, 2)}\n`,
      );
      return Exit.done;
    }
    const lines = [`Lower bound on the long-time average of (A(t)|A) per cell, A = Σ ${formula}`, ''];
    lines.push('range  charges  bound');
    for (const b of bounds)
      lines.push(
        `${String(b.range).padStart(5)}  ${String(b.charges).padStart(7)}  ${textFromRational(b.bound)} ≈ ${decimalText(b.bound, digits)}   (${decimalText({ numerator: 100n * b.share.numerator, denominator: b.share.denominator }, 2)} % of (A|A))`,
      );
    lines.push(
      '',
      mean === undefined ? 'Infinite temperature.' : `Infinite temperature at <Z> = ${mean}, connected.`,
      'Exact for the charges listed; charges of longer range, quasilocal or staggered ones can only raise it.',
      'For one local observable on a ring of L cells: divide by L.',
    );
    input.out(`${lines.join('\n')}\n`);
    return Exit.done;
  },
};

function digitsOption(text: unknown): number {
  if (text === undefined) return 10;
  if (typeof text !== 'string' || !/^\d{1,4}$/.test(text))
    throw new InputError('--digits', 'a whole number up to 9999', show(text));
  return Number(text);
}
