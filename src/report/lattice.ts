/** Results on lattices, as text and for machines. */
import { type Cyclotomic, CyclotomicField } from '../algebra/cyclotomic.ts';
import type { Interval } from '../algebra/univariate.ts';
import { LETTERS, letterAt, spanOf, type Word } from '../algebra/word.ts';
import type { Box } from '../lattice/lattice.ts';
import type { AllWaves } from '../search/lattice/all-waves.ts';
import { realForms } from '../search/lattice/real-form.ts';
import type { LatticeResult } from '../search/lattice/result.ts';

/** Letters with the cell of each, and the spin where a cell has several: `X_{0,0} X_{1,0}`. */
export function sitesText(word: Word, box: Box): string {
  const letters: string[] = [];
  for (let spin = 0; spin < spanOf(word); spin++) {
    const letter = letterAt(word, spin);
    if (letter === 0) continue;
    const site = box.siteAt(spin);
    const numbers = [...site.cell, ...(box.cell > 1 ? [String.fromCharCode(97 + site.spin)] : [])];
    letters.push(`${LETTERS[letter]}_${numbers.length === 1 ? numbers[0] : `{${numbers.join(',')}}`}`);
  }
  return letters.join(' ');
}

/** What was asked, as data: the lattice, the translations and their character, the window. */
function question({ model, window, translations }: LatticeResult): object {
  const { steps, exponents, order } = translations;
  return {
    lattice: { cell: model.lattice.cell, extents: model.lattice.extents },
    window,
    period: steps,
    wave: exponents.map((e) => `${e}/${order}`),
  };
}

/** Coefficients as `p/q`, or as polynomials in w = e^{2πi/n}, n the order. */
export function latticeResultToJson(result: LatticeResult): object {
  const field = new CyclotomicField(result.translations.order);
  const terms = (list: readonly (readonly [Word, Cyclotomic])[], box: Box) =>
    list.map(([word, c]) => ({ coefficient: field.text(c), sites: sitesText(word, box) }));
  return {
    ...question(result),
    order: result.translations.order,
    dimension: result.charges.length,
    charges: result.charges.map((charge) => ({
      extent: charge.extent,
      terms: terms(charge.terms, result.box),
      ...(result.translations.order <= 2
        ? {}
        : {
            real: realForms(result, charge).map((form) => ({
              period: form.period,
              rational: form.rational !== null,
              terms: terms(form.terms, form.box),
            })),
          }),
    })),
    primes: result.primes,
    candidates: result.candidates,
    leftAfterPeeling: result.left,
    milliseconds: Math.round(result.milliseconds),
  };
}

/** Longest list of terms that is printed in full. */
const FOLD = 24;

export function printLatticeResult(result: LatticeResult, fold = FOLD): string {
  const { charges, window, translations, box } = result;
  const { order, steps, exponents } = translations;
  const field = new CyclotomicField(order);
  const lines = [
    `Exactly ${charges.length} independent charge${charges.length === 1 ? '' : 's'} of strings within ${window.join(' × ')} cells; the list is complete.`,
    ...(steps.some((s) => s > 0)
      ? [
          `Sums over translations by ${steps.map((s) => (s > 0 ? s : 'none')).join(', ')} cells${
            order > 1
              ? `, each with the phase e^(2πi·${exponents.map((e) => `${e}/${order}`).join(', ')})`
              : ''
          }.`,
        ]
      : ['No translation invariance is assumed; every place has coefficients of its own.']),
    ...(order > 2 ? [`w = e^(2πi/${order}).`] : []),
    '',
  ];
  charges.forEach(({ extent, terms }, i) => {
    const text = terms.map(([word, c]) => {
      const factor = field.text(c);
      return `${factor === '1' ? '' : factor === '-1' ? '-' : factor.includes(' ') ? `(${factor}) ` : `${factor} `}${sitesText(word, box)}`;
    });
    lines.push(
      `  Q${i + 1}  ${extent.join(' × ')} cells: ${terms.length > fold ? `${terms.length} terms` : text.join(' + ').replaceAll('+ -', '- ')}`,
    );
  });
  lines.push(
    '',
    'Covers strings within the window and this kind of sum only: says nothing about wider, quasilocal or non-local quantities.',
    'Absence of local charges supports thermalisation or chaos; by itself it proves neither.',
  );
  return `${lines.join('\n')}\n`;
}

/** Which wave numbers have charges, for machines; polynomials lowest power first. */
export function allWavesToJson({ range, dimension, exceptions, candidates }: AllWaves): object {
  return {
    range,
    dimensionElsewhere: dimension,
    exceptions: exceptions.map(({ order, polynomial, points, dimension: own, cosines }) => ({
      order,
      polynomial: polynomial.map(String),
      points,
      dimension: own,
      twoCosine: cosines.map(({ low, high, denominator }) => [
        `${low}/${denominator}`,
        `${high}/${denominator}`,
      ]),
    })),
    candidates,
  };
}

export function printAllWaves({ range, dimension, exceptions }: AllWaves): string {
  const lines = [
    `Sums Σ_j ω^j τ_j(q), q of range ≤ ${range}, that commute with H, at every ω on the unit circle:`,
    '',
    ...exceptions.map(({ order, polynomial, points, dimension: own, cosines }) =>
      order === null
        ? `  ${own} at ${points} points that are no roots of unity: roots of ${polynomialText(polynomial)}, 2 cos θ near ${cosines.map(decimal).join(', ')}`
        : `  ${own} at ${order === 1 ? 'wave number 0' : order === 2 ? 'wave number π' : `the ${points} primitive roots of unity of order ${order}`}`,
    ),
    `  ${dimension} at every ${exceptions.length > 0 ? 'other ' : ''}point`,
    '',
    'Exact at every ω: no step is numerical or modular. Wider, quasilocal and non-local quantities are not covered.',
    'Absence of local charges supports thermalisation or chaos; by itself it proves neither.',
  ];
  return `${lines.join('\n')}\n`;
}

function polynomialText(coefficients: readonly bigint[]): string {
  return coefficients
    .map((c, i) => (c === 0n ? '' : `${c}${i === 0 ? '' : i === 1 ? ' w' : ` w^${i}`}`))
    .filter((term) => term !== '')
    .join(' + ')
    .replaceAll('+ -', '- ');
}

/** Six digits of the middle of an interval, for reading. */
function decimal({ low, high, denominator }: Interval): string {
  return (Number(low + high) / 2 / Number(denominator)).toFixed(6);
}
