/** An every-range verdict as text for a terminal. */
import type { EveryRangeBound, EveryRangeVerdict, Existence } from '../theory/verdict.ts';
import type { WaveNumberVerdict } from '../theory/wave-numbers.ts';

export function printVerdict(verdict: EveryRangeVerdict): string {
  const { search, cautions } = verdict;
  const counts = search.dimensionByRange.map((d, j) => d - (search.dimensionByRange[j - 1] ?? 0));
  const lines = [headline(verdict), ''];
  lines.push(...reasons(verdict));
  lines.push(`Searched exhaustively: charges of range exactly 1 … ${search.range}: ${counts.join(', ')}.`);
  if (verdict.waveNumbers !== null) lines.push(...waveNumberLines(verdict.waveNumbers));
  lines.push('', ...cautions);
  return `${lines.join('\n')}\n`;
}

function headline(verdict: EveryRangeVerdict): string {
  switch (verdict.kind) {
    case 'none':
      return `No charge of any range ≥ ${verdict.from}.`;
    case 'complete':
      return `Exactly ${verdict.perRange} charge${verdict.perRange === 1 ? '' : 's'} of every range ≥ ${verdict.from}: the list is complete for all ranges.`;
    case 'bounded':
      return `At most ${verdict.bound.generic} charge${verdict.bound.generic === 1 ? '' : 's'} of every range ≥ ${verdict.bound.from}${unit(verdict.bound)}${except(verdict.bound)}.`;
    case 'by citation':
      return `By citation, not by this program's own proof: ${verdict.citation.theorem.conclusion}`;
    case 'undecided':
      return 'Undecided by this method.';
  }
}

function unit({ group }: EveryRangeBound): string {
  return group === 1 ? '' : `, counted in groups of ${group} cells`;
}

function except({ exceptional }: EveryRangeBound): string {
  return exceptional.length === 0
    ? ''
    : `, except range ${exceptional.map((e) => `${e.range} (at most ${e.atMost})`).join(', ')}`;
}

function reasons(verdict: EveryRangeVerdict): string[] {
  switch (verdict.kind) {
    case 'none':
      return [upper(verdict.bound)];
    case 'complete':
      return [upper(verdict.bound), exist(verdict.existence)];
    case 'bounded':
      return [
        upper(verdict.bound),
        verdict.existence === null
          ? `Existence: established by the search, up to range ${verdict.search.range}; no ladder was found, which proves nothing.`
          : exist(verdict.existence),
      ];
    case 'by citation': {
      const { theorem, couplings, axes } = verdict.citation;
      const values = Object.entries(couplings).filter(([, v]) => v !== 0n);
      return [
        `Own lemmas: they do not reach; ${verdict.reason}.`,
        `Theorem: ${theorem.hypotheses}`,
        `Here: ${values.map(([name, v]) => `${name} = ${v}`).join(', ')}${axes === 'XYZ' ? '' : `, axes X, Y, Z renamed ${[...axes].join(', ')}`} (one common scale).`,
        `Source: ${theorem.source.title === undefined ? '' : `"${theorem.source.title}", `}${theorem.source.reference} (${theorem.source.year}), ${theorem.basis === 'seen' ? 'statement read in the source' : 'conditions quoted from memory'}.`,
      ];
    }
    case 'undecided':
      return [
        `Because ${verdict.reason}.`,
        ...(verdict.existence === null ? [] : [exist(verdict.existence)]),
      ];
  }
}

function upper(bound: EveryRangeBound): string {
  const way =
    bound.method === 'cells' ? 'the interaction is injective' : 'Ising-type bond, growth by half steps';
  return `Upper bound: ${way}; ${bound.topParts} possible top part${bound.topParts === 1 ? '' : 's'}, a pencil of ${bound.pencil.constant.length} × ${bound.pencil.columns} leaves ${bound.generic === 0 ? 'none' : bound.generic} of every range ≥ ${bound.from}${unit(bound)}${except(bound)}.`;
}

function exist(existence: Existence): string {
  return existence.kind === 'ladder'
    ? 'Existence: [[B, H], H] = 0 for a boost operator B, so there is a ladder with a charge of every range (arXiv:2508.20713, cited).'
    : 'Existence: bilinear in Majorana operators, two charges of every range ≥ 2.';
}

function waveNumberLines(found: WaveNumberVerdict): string[] {
  if (found.kind === 'open') return [`Other wave numbers: open; ${found.reason}.`];
  const [, staggered] = found.at;
  const { generic, exceptional } = staggered.bounds;
  return [
    `Staggered charges (wave number π): ${staggered.short.join(' and ')} of range exactly 1 and 2, ${generic === 0 && exceptional.length === 0 ? 'none' : `at most ${Math.max(generic, ...exceptional.map((e) => e.dimension))}`} of every range ≥ 3.`,
    found.noneOfRange3
      ? 'No charge of range ≥ 3 at any wave number.'
      : 'At wave numbers other than 0 and π there is no charge of any range.',
  ];
}
