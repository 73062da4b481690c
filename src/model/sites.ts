/** Where the letters of a site-resolved formula stand. */
import { show } from '../errors.ts';
import type { Chain } from '../lattice/chain.ts';
import { MAX_WORD_LENGTH } from './limits.ts';
import type { Site, Syntax } from './syntax.ts';
import { refuse } from './tokens.ts';

/**
 * Subscripts to spins on a chain. One number counts spins along the chain, as words do; two count cells, then spins of the cell,
 * which may be letters (a = 0). The whole formula moves by cells so that its first site lies in cell 0.
 */
export function placeOnChain({ text, sites }: Syntax, chain: Chain): (site: Site) => number {
  const absolute = (site: Site): number => {
    const { at, coordinates, leg } = site;
    const [first, second] = coordinates;
    if (coordinates.length > 2 || (coordinates.length === 2 && leg !== null))
      refuse(text, at, 'on a chain, a cell and a spin of the cell', `${coordinates.length} numbers`);
    if (second?.index != null) refuse(text, at, 'a running index in the first place', show(second.index));
    const inCell = leg ?? second?.value ?? null;
    if (inCell === null) {
      if (first!.index !== null && chain.cell > 1)
        refuse(text, at, `a spin of the cell after the index: X_{${first!.index},a}`, 'the index alone');
      return first!.value;
    }
    if (!(inCell >= 0 && inCell < chain.cell))
      refuse(text, at, `a spin of a cell of ${chain.cell}, counted from 0 or a`, `spin ${inCell}`);
    return first!.value * chain.cell + inCell;
  };
  let base = Infinity;
  const index = sites[0]?.coordinates[0]?.index ?? null;
  for (const site of sites) {
    if (site.coordinates[0]!.index !== index)
      refuse(
        text,
        site.at,
        'the same running index, or none, at all sites',
        `${site.coordinates[0]!.index ?? 'none'}`,
      );
    base = Math.min(base, Math.floor(absolute(site) / chain.cell));
  }
  for (const site of sites)
    if (absolute(site) - base * chain.cell >= MAX_WORD_LENGTH)
      refuse(text, site.at, `sites within ${MAX_WORD_LENGTH} spins of one another`, 'a farther one');
  return (site) => absolute(site) - base * chain.cell;
}
