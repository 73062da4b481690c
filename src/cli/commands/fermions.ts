/** `holdfast fermions`: is the chain one of free fermions, and which? */
import { textFromRational } from '../../algebra/rational.ts';
import { InputError, show } from '../../errors.ts';
import { bilinearCharges, freeFermions } from '../../physics/free-fermions.ts';
import { printDensity } from '../../report/text.ts';
import { type Command, Exit } from '../command.ts';
import { MODEL_HELP, MODEL_OPTIONS, modelFromOptions } from '../model-options.ts';

export const fermions: Command = {
  name: 'fermions',
  summary: 'free-fermion chains: block, dispersion and all bilinear charges',
  help: `holdfast fermions FORMULA

Says whether the chain is bilinear under the Jordan-Wigner transformation along the spins, after a renaming of axes that may differ
from spin to spin of the cell, or after one rotation of all spins with rational entries. If so: the Bogoliubov-de Gennes block h(q) in
the basis c_q, c†_{-q} with H = sum over q of Ψ†hΨ, its eigenvalues λ(q) in closed form (a mode costs 2λ), and the bilinear charges.
Rotations with irrational entries and other orders of the spins are not tried, so "no" is no proof.

  holdfast fermions "XX + YY"
  holdfast fermions "ZZ + 2 X" --range 6
  holdfast fermions "XZX + YY + 1/2 Z" --latex

${MODEL_HELP}

Options:
  --range K             bilinear charges up to this range, in cells (4); ranges far beyond an exhaustive search are quick
  --latex               block and dispersion as LaTeX
  --json                for machines

Exit status: 0 answered (free or not), 1 a failure, 2 bad input.`,
  options: {
    ...MODEL_OPTIONS,
    range: { type: 'string' },
    latex: { type: 'boolean' },
    json: { type: 'boolean' },
  },
  async run(input) {
    const text = input.values['range'] ?? '4';
    if (typeof text !== 'string' || !/^[1-9]\d{0,2}$/.test(text))
      throw new InputError('--range', 'a whole number of cells, 1 to 999', show(text));
    const range = Number(text);
    const model = await modelFromOptions(input);
    const found = freeFermions(model);
    const json = input.values['json'] === true;
    if (found === null) {
      input.out(
        json
          ? '{"bilinear": false}\n'
          : 'Not bilinear in Jordan-Wigner fermions along the spins, whatever axis is called Z, nor after a rotation with rational entries. Other rotations and other transformations are not tried.\n',
      );
      return Exit.done;
    }
    const { axes, rotation, rotated, block, conservesNumber, dispersion } = found;
    const charges = bilinearCharges(found, range);
    const latex = input.values['latex'] === true;
    if (json) {
      const answer = {
        bilinear: true,
        rotation: rotation?.map((row) => row.map(textFromRational)) ?? null,
        axes,
        rotated: rotated.density,
        conservesNumber,
        block: block.map((row) => row.map((entry) => entry.toText())),
        blockLatex: block.map((row) => row.map((entry) => entry.toText(true))),
        dispersion: { kind: dispersion.kind, text: dispersion.text, latex: dispersion.latex },
        range,
        charges,
      };
      input.out(`${JSON.stringify(answer, null, 2)}\n`);
      return Exit.done;
    }
    if (latex) {
      const rows = block.map((row) => row.map((entry) => entry.toText(true)).join(' & ')).join(' \\\\\n');
      const lines =
        dispersion.kind === 'closed' ? dispersion.latex.map((l) => `\\lambda(q) = ${l}`) : dispersion.latex;
      input.out(
        `\\[ h(q) = \\begin{pmatrix}\n${rows}\n\\end{pmatrix} \\]\n${lines.map((l) => `\\[ ${l} \\]\n`).join('')}`,
      );
      return Exit.done;
    }
    const lines = ['Free fermions: bilinear under the Jordan-Wigner transformation.'];
    if (rotation !== null)
      lines.push(
        `All spins rotated: the direction (${rotation[2]!.map(textFromRational).join(', ')}) becomes Z; H = Σ ${printDensity(rotated, rotated.density)}`,
      );
    if (axes.some((axis) => axis !== 'Z'))
      lines.push(
        `Axes renamed, spin by spin of the cell: ${axes.map((a) => `${a} is called Z`).join(', ')}; H = Σ ${printDensity(rotated, rotated.density)}`,
      );
    lines.push('', 'H = Σ_q Ψ† h(q) Ψ,  Ψ = (c_q, c†_{-q}), over all q:');
    block.forEach((row, i) => {
      row.forEach((entry, j) => {
        if (!entry.isZero()) lines.push(`  h${i + 1}${j + 1}(q) = ${entry.toText()}`);
      });
    });
    lines.push('', conservesNumber ? 'The number of fermions is conserved; bands of c:' : 'Bands:');
    for (const l of dispersion.text) lines.push(dispersion.kind === 'closed' ? `  λ(q) = ${l}` : `  ${l}`);
    lines.push('A mode costs 2λ. On rings, q is odd multiples of π/L where ∏Z = 1, even ones where ∏Z = -1.');
    lines.push('', `Bilinear charges of range ≤ ${range}: ${charges.length}, all there are among bilinears:`);
    for (const q of charges) lines.push(`  Σ ${printDensity(model, q)}`);
    input.out(`${lines.join('\n')}\n`);
    return Exit.done;
  },
};
