/** The answer to "for which couplings?" as text for a terminal, as a LaTeX table, and as JSON. */
import type { Polynomial } from '../algebra/polynomial.ts';
import { textFromRational } from '../algebra/rational.ts';
import { textFromWord } from '../algebra/word.ts';
import type { FamilyCase, FamilyCharge, FamilyResult } from '../theory/family/classify.ts';
import type { LocusVerdict } from '../theory/family/every-range.ts';
import { type Answer, answersOf, type Locus } from '../theory/family/loci.ts';
import type { EveryRangeVerdict } from '../theory/verdict.ts';
import type { TextOptions } from './text.ts';
import { CAUTIONS } from './verdict.ts';

/** What a table of cases rests on. */
export const FAMILY_CAUTIONS = [
  'Parameters are real. Dimensions count charges up to a range, the Hamiltonian among them.',
  ...CAUTIONS,
];

/** The lines of `holdfast family --every-range`: one set after another. */
export function printEveryRange({ family }: FamilyResult, verdicts: readonly LocusVerdict[]): string {
  const names = family.parameters;
  const lines = ['Every range, decided at one point of each set:', ''];
  for (const { locus, point, verdict } of verdicts) {
    const at = names.map((name, v) => `${name} = ${textFromRational(point[v]!)}`).join(', ');
    lines.push(`  ${conditionText(locus, names)}`, `    ${everyRangeLine(verdict)}`, `    (at ${at})`);
  }
  return `${[
    ...lines,
    '',
    'What a point excludes is excluded, range by range, at general points of its set: smaller sets, which may differ from range to range, are',
    'not covered. Charges that exist at the point need not exist at others. Above the ranges of the table this is no theorem about all points.',
  ].join('\n')}\n`;
}

function everyRangeLine(verdict: EveryRangeVerdict): string {
  switch (verdict.kind) {
    case 'none':
      return `no charge of any range from ${verdict.from} on`;
    case 'complete':
      return `exactly ${count(verdict.perRange, 'charge')} of every range from ${verdict.from} on`;
    case 'bounded':
      return `at most ${count(verdict.bound.generic, 'charge')} of every range from ${verdict.bound.from} on, but for exceptions; existence is open`;
    case 'by citation':
      return `a published theorem applies: ${verdict.citation.theorem.source.reference}`;
    case 'undecided':
      return `undecided by this method: ${verdict.reason}`;
  }
}

/** The table of answers, the charges at a general point of each set, what it all rests on, and the cautions. */
export function printFamily(result: FamilyResult, { fold = 12 }: TextOptions = {}): string {
  const { family, range, cases, minimumCells } = result;
  const answers = answersOf(result);
  const names = family.parameters;
  const width = Math.max(...answers.map((a) => `${a.dimensionByRange.join(', ')}`.length));
  const lines = [
    `${names.length} parameter${names.length === 1 ? '' : 's'} (${names.join(', ')}), ranges up to ${range}: ${count(cases.length, 'case')}, ${count(answers.length, 'answer')}.`,
    '',
    `Dimension up to range 1 … ${range}, and the couplings. Of the lines that apply to a point, the last one counts.`,
    '',
  ];
  for (const answer of answers) {
    answer.loci.forEach((locus, i) => {
      const head = i === 0 ? answer.dimensionByRange.join(', ') : '';
      lines.push(`  ${head.padEnd(width)}   ${conditionText(locus, names)}${likeIt(locus)}`);
    });
  }
  for (const answer of answers) {
    const locus = answer.loci[0]!;
    lines.push('', `Charges at a general point of: ${conditionText(locus, names)}`);
    if (locus.general.charges.length === 0) lines.push(`  ${withoutCharges(locus.general)}`);
    for (const charge of locus.general.charges) lines.push(`  ${chargeText(charge, names, fold)}`);
  }
  lines.push(
    '',
    ...evidence(result),
    `Holds on the infinite chain and on rings of ${minimumCells} cells or more.`,
  );
  lines.push(...FAMILY_CAUTIONS);
  return `${lines.join('\n')}\n`;
}

function count(n: number, what: string): string {
  return `${n} ${what}${n === 1 ? '' : 's'}`;
}

function likeIt({ equivalent }: Locus): string {
  return equivalent.length === 0 ? '' : `   (and ${equivalent.length} more by symmetry)`;
}

function withoutCharges({ equations, dimensionByRange }: FamilyCase): string {
  return `${dimensionByRange.at(-1)} of them, not written out: ${equations.length === 0 ? '' : 'there '}no two cells interact, or H is zero.`;
}

/** The lines that say what was proved, and how. */
function evidence({ cases }: FamilyResult): string[] {
  const confirmed = cases.filter((c) => c.point !== null).length;
  const lines = [
    'Every case has pivots that vanish nowhere on it (no more charges) and charges re-multiplied exactly (no fewer).',
    `A plain search at a rational point of the case agrees in ${confirmed} of ${cases.length} cases.`,
  ];
  if (confirmed < cases.length)
    lines.push('In the others no rational point was found; such a case may be empty over the reals.');
  return lines;
}

function signed(p: Polynomial, names: readonly string[]): string {
  const text = p.toString(names);
  return text.startsWith('-') ? p.scale({ numerator: -1n, denominator: 1n }).toString(names) : text;
}

/** `Jx - Jy = 0, hz = 0`, or `general couplings`. */
export function conditionText(
  { equations, except }: Pick<Locus, 'equations' | 'except'>,
  names: readonly string[],
): string {
  const parts = [
    ...equations.map((p) => `${signed(p, names)} = 0`),
    ...except.map((p) => `${signed(p, names)} ≠ 0`),
  ];
  return parts.length === 0 ? 'general couplings' : parts.join(', ');
}

function chargeText({ range, density }: FamilyCharge, names: readonly string[], fold: number): string {
  const shown = density.slice(0, fold).map(([word, p]) => termText(p.toString(names), textFromWord(word)));
  const rest = density.length > fold ? ` + … (${density.length} terms)` : '';
  return `range ${range}: ${shown.join(' + ').replaceAll('+ -', '- ')}${rest}`;
}

function termText(coefficient: string, word: string): string {
  if (coefficient === '1') return word;
  if (coefficient === '-1') return `-${word}`;
  return `${/[+]|.-/.test(coefficient) ? `(${coefficient})` : coefficient} ${word}`;
}

/** A `tabular` with one line a set. Needs no package. */
export function familyLatex(result: FamilyResult): string {
  const names = result.family.parameters;
  const rows = answersOf(result).flatMap((answer) =>
    answer.loci.map((locus, i) => {
      const dimensions = i === 0 ? `$${answer.dimensionByRange.join(',\\,')}$` : '';
      const all = [locus, ...locus.equivalent].map((l) => latexCondition(l, names));
      return `${dimensions} & ${all.join('; ')} \\\\`;
    }),
  );
  return [
    `% Dimension of the space of charges up to range 1 ... ${result.range}; the last line that applies to a point counts.`,
    '\\begin{tabular}{ll}',
    'dimensions & couplings \\\\ \\hline',
    ...rows,
    '\\end{tabular}',
    '',
  ].join('\n');
}

function latexCondition({ equations, except }: Locus, names: readonly string[]): string {
  const parts = [
    ...equations.map((p) => `$${latexPolynomial(p, names)} = 0$`),
    ...except.map((p) => `$${latexPolynomial(p, names)} \\neq 0$`),
  ];
  return parts.length === 0 ? 'general couplings' : parts.join(', ');
}

/** `Jx^2*hz` → `J_{x}^{2} h_{z}`: the first letter, the rest below. */
function latexPolynomial(p: Polynomial, names: readonly string[]): string {
  const symbols = new Map(names.map((name) => [name, latexName(name)]));
  return signed(p, names)
    .replaceAll(/[A-Za-z_][\w']*/g, (name) => symbols.get(name) ?? name)
    .replaceAll(/\^(\d+)/g, '^{$1}')
    .replaceAll(/(\d+)\/(\d+)/g, '\\tfrac{$1}{$2}')
    .replaceAll('*', ' ');
}

function latexName(name: string): string {
  const [, head, rest] = /^([A-Za-z])_?(.*)$/.exec(name) ?? [null, name, ''];
  return rest === '' ? head! : `${head}_{${rest!.replaceAll('_', '')}}`;
}

/** The JSON contract of `holdfast family --json`: polynomials as text in the parameters, exact. */
export function familyJson(result: FamilyResult): unknown {
  const { family, range, cases, minimumCells } = result;
  const names = family.parameters;
  const text = (p: Polynomial) => p.toString(names);
  const set = (l: Locus): unknown => ({
    equations: l.equations.map(text),
    ...(l.except.length === 0 ? {} : { nonZero: l.except.map(text) }),
  });
  return {
    holdfast: 'family',
    version: 1,
    cell: family.chain.cell,
    parameters: names,
    terms: Object.fromEntries(family.terms.map(([word, p]) => [textFromWord(word), text(p)])),
    range,
    minimumCells,
    answers: answersOf(result).map((a: Answer) => ({
      dimensionByRange: a.dimensionByRange,
      sets: a.loci.map((l) => ({ ...(set(l) as object), equivalent: l.equivalent.map(set) })),
    })),
    cases: cases.map((c) => ({
      equations: c.equations.map(text),
      nonZero: c.nonZero.map(text),
      dimensionByRange: c.dimensionByRange,
      charges: c.charges.map((q) => ({
        range: q.range,
        terms: Object.fromEntries(q.density.map(([word, p]) => [textFromWord(word), text(p)])),
      })),
      point:
        c.point === null
          ? null
          : Object.fromEntries(names.map((name, v) => [name, textFromRational(c.point![v]!)])),
    })),
    cautions: FAMILY_CAUTIONS,
  };
}
