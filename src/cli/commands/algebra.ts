/** `holdfast algebra`: how the charges of a model relate. */
import { textFromRational } from '../../algebra/rational.ts';
import type { Hamiltonian } from '../../model/hamiltonian.ts';
import { chargeAlgebraSteps, type Sign } from '../../physics/charge-algebra.ts';
import { labelCharges, type NamedSymmetries, namedSymmetries } from '../../physics/symmetries.ts';
import { printDensity } from '../../report/text.ts';
import { searchWithProgress, steps } from '../charge-options.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';
import { rangeOption } from '../number-options.ts';
import { combination } from './residual.ts';

export const algebra: Command = {
  name: 'algebra',
  summary: 'the charges named, their commutators, inner products, parities and ladder',
  help: `holdfast algebra FORMULA --range K

For all charges of range up to K: what each owes to symmetries; which do not commute and what their commutator is; the Gram
matrix under the infinite-temperature inner product per cell (for Pauli strings the sum of products of coefficients) and
orthogonal combinations; signs under reflection of all spins, under flips of all spins by X, Y, Z and under
transposition (Y to -Y); and the ladder: i[B, Q] with the boost B.

  holdfast algebra "XX + YY + ZZ" --range 4

${MODEL_HELP}

Options:
  --range K             largest range of the charges, in cells
  --json                for machines

Exit status: 0 answered, 1 a failure, 2 bad input.`,
  options: { ...MODEL_OPTIONS, range: { type: 'string' }, json: { type: 'boolean' } },
  async run(input) {
    const range = rangeOption(input);
    const model = await modelFromOptions(input);
    const found = await searchWithProgress(input, model, range);
    const { commutators, gram, orthogonal, norms, parities, derivatives } = await steps(
      input,
      'relating the charges',
      chargeAlgebraSteps(found),
      (done) => done,
    );
    const labels = labelCharges(found);
    const symmetries = namedSymmetries(model);
    if (input.values['json'] === true) {
      const answer = {
        range,
        charges: found.charges.map((q, i) => ({ density: q.density, label: labels[i] })),
        symmetries,
        commutators: commutators.map((c) => ({
          a: c.a + 1,
          b: c.b + 1,
          density: c.density,
          expansion: c.expansion?.map(textFromRational) ?? null,
        })),
        gram: gram.map((row) => row.map(textFromRational)),
        orthogonal,
        squaredNorms: norms.map(textFromRational),
        parities,
        derivatives: derivatives.map((d) => ({
          from: d.from + 1,
          density: d.density,
          expansion: d.expansion?.map(textFromRational) ?? null,
          conserved: d.conserved,
        })),
      };
      input.out(`${JSON.stringify(answer, null, 2)}\n`);
      return Exit.done;
    }
    const lines = found.charges.flatMap((q, i) => [
      `Q${i + 1} = Σ ${printDensity(model, q.density)}`,
      `     ${labels[i]!.text}${labels[i]!.multiplet === null ? '' : `; spin ${labels[i]!.multiplet} under SU(2)`}`,
    ]);
    lines.push('', ...symmetryLines(symmetries, model));
    lines.push(
      '',
      commutators.length === 0 ? 'All charges commute with each other.' : 'Commutators that do not vanish:',
    );
    for (const { a, b, density, expansion } of commutators)
      lines.push(
        `  i[Q${a + 1}, Q${b + 1}] = ${expansion === null ? `Σ ${printDensity(model, density)}  (conserved, beyond the list)` : combination(expansion)}`,
      );
    lines.push(
      '',
      'Gram matrix at infinite temperature, per cell:',
      ...table(gram.map((row) => row.map(textFromRational))),
    );
    const mixed = orthogonal.flatMap((q, i) =>
      q.equals(found.charges[i]!.density) ? [] : [`  P${i + 1} = Σ ${printDensity(model, q)}`],
    );
    lines.push(
      ...(mixed.length === 0
        ? ['The charges are orthogonal as they stand.']
        : ['Orthogonal combinations, P = Q where not listed:', ...mixed]),
    );
    lines.push('', 'Signs (+ even, - odd, . neither):  reflection  flip X  flip Y  flip Z  transposition');
    parities.forEach((p, i) => {
      const cells = [p.reflection, p.flipX, p.flipY, p.flipZ, p.transposition].map(signText);
      lines.push(
        `  ${`Q${i + 1}`.padEnd(33)}${cells[0]!.padEnd(12)}${cells
          .slice(1, 4)
          .map((c) => c.padEnd(8))
          .join('')}${cells[4]}`,
      );
    });
    lines.push('', 'Ladder, i[B, Q] with B = Σ j h_j:');
    for (const { from, density, expansion, conserved } of derivatives) {
      const image = density.isZero()
        ? '0'
        : expansion !== null
          ? combination(expansion)
          : `range ${model.chain.rangeOf(density)}, ${conserved ? 'conserved, beyond the list' : 'not conserved'}`;
      lines.push(`  Q${from + 1} -> ${image}`);
    }
    lines.push('A ladder that fails proves nothing: it depends on the density chosen for H.');
    input.out(`${lines.join('\n')}\n`);
    return Exit.done;
  },
};

function symmetryLines(
  { su2, parities, staggered, staggeredRange }: NamedSymmetries,
  model: Hamiltonian,
): string[] {
  const lines: string[] = [];
  for (const spins of su2)
    lines.push(
      spins.length === model.chain.cell
        ? 'SU(2) of the total spin.'
        : `SU(2) of spin ${spins.join(', ')} of every cell.`,
    );
  lines.push(
    parities.length === 0
      ? 'No parity: H is even under no product of one word over all cells.'
      : `Parities: H is even under the product over all cells of ${parities.join(', ')}.`,
    staggered.length === 0
      ? `No staggered charge (alternating sign from cell to cell) of range ≤ ${staggeredRange}.`
      : `Staggered charges of range ≤ ${staggeredRange}: ${staggered.map((q) => `Σ (-1)^j (${printDensity(model, q)})`).join(', ')}`,
  );
  return lines;
}

function signText(sign: Sign): string {
  return sign === null ? '.' : sign === 1 ? '+' : '-';
}

function table(rows: readonly (readonly string[])[]): string[] {
  const width = Math.max(1, ...rows.flat().map((t) => t.length));
  return rows.map((row) => `  ${row.map((t) => t.padStart(width)).join('  ')}`);
}
