/** `holdfast residual`: is this one conserved? */
import { type Rational, textFromRational } from '../../algebra/rational.ts';
import { correctionSteps, nearestCharge, residual as residualOf } from '../../physics/residual.ts';
import { decimalText } from '../../report/decimal.ts';
import { printDensity } from '../../report/text.ts';
import { modelAndFormula, searchWithProgress, steps } from '../charge-options.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS } from '../model-options.ts';
import { rangeOption } from '../number-options.ts';

export const residual: Command = {
  name: 'residual',
  summary: 'is this quantity conserved? its commutator, expansion, or smallest correction',
  help: `holdfast residual FORMULA CANDIDATE --range K

The exact commutator i[H, Q] of the sum of translates of CANDIDATE. If it vanishes: Q in the basis of all charges of range up to K.
If not: the correction of smallest range, up to K, that makes it conserved, or the proof that there is none; strings of Q
of its full range are kept as they are. And the charge nearest to Q in the infinite-temperature norm.

  holdfast residual "XX + YY + ZZ" "XYZ - ZYX + YZX - XZY + ZXY - YXZ" --range 3
  holdfast residual "ZZ + 2 X" "ZZ" --range 3

${MODEL_HELP}
  CANDIDATE             a formula with numbers as coefficients, after the model

Options:
  --range K             largest range of charges and corrections, in cells
  --json                for machines

Exit status: 0 answered (conserved or not), 1 a failure, 2 bad input.`,
  options: { ...MODEL_OPTIONS, range: { type: 'string' }, json: { type: 'boolean' } },
  async run(input) {
    const range = rangeOption(input);
    const { model, density } = await modelAndFormula(input, 'a candidate');
    const found = await searchWithProgress(input, model, range);
    const { conserved, commutator, expansion } = residualOf(model, density, found);
    const correction = conserved
      ? null
      : await steps(
          input,
          'looking for a correction',
          correctionSteps(model, density, { range }),
          (k) => k / (range + 1),
        );
    const nearest = nearestCharge(found, density);
    if (input.values['json'] === true) {
      const answer = {
        conserved,
        commutator,
        charges: found.charges.map((q) => q.density),
        expansion: expansion?.map(textFromRational) ?? null,
        correction: correction === null ? null : { range: correction.range, density: correction.density },
        nearest: { density: nearest.density, squaredDistance: textFromRational(nearest.distance) },
        range,
      };
      input.out(`${JSON.stringify(answer, null, 2)}\n`);
      return Exit.done;
    }
    const lines: string[] = [];
    if (conserved) {
      lines.push('Conserved: [H, Q] = 0, exactly.');
      if (expansion === null) lines.push(`Its range is above ${range}: search further to expand it.`);
      else {
        lines.push(`Q = ${combination(expansion)}`);
        expansion.forEach((c, i) => {
          if (c.numerator !== 0n)
            lines.push(`  Q${i + 1} = Σ ${printDensity(model, found.charges[i]!.density)}`);
        });
      }
    } else {
      lines.push('Not conserved.', `i[H, Q] = Σ ${printDensity(model, commutator)}`);
      lines.push(
        correction === null
          ? `No correction of range ≤ ${range} makes it conserved (strings of Q of its full range kept).`
          : `Add Σ ${printDensity(model, correction.density)}  (range ${correction.range}, the smallest) and it is conserved.`,
      );
      lines.push(
        nearest.density.isZero()
          ? `Orthogonal to all charges of range ≤ ${range} at infinite temperature.`
          : `Nearest charge of range ≤ ${range} at infinite temperature: Σ ${printDensity(model, nearest.density)}; squared distance ${textFromRational(nearest.distance)} ≈ ${decimalText(nearest.distance, 6)} a cell.`,
      );
    }
    lines.push('On the infinite chain; translation-invariant sums of local terms only.');
    input.out(`${lines.join('\n')}\n`);
    return Exit.done;
  },
};

/** `1/2 Q1 - Q3`. */
export function combination(coefficients: readonly Rational[]): string {
  let text = '';
  coefficients.forEach((c, i) => {
    if (c.numerator === 0n) return;
    const negative = c.numerator < 0n;
    const size = { ...c, numerator: negative ? -c.numerator : c.numerator };
    const factor = size.numerator === 1n && size.denominator === 1n ? '' : `${textFromRational(size)} `;
    text += `${text === '' ? (negative ? '-' : '') : negative ? ' - ' : ' + '}${factor}Q${i + 1}`;
  });
  return text === '' ? '0' : text;
}
