/** What each charge of a result owes to symmetries, where that is cheap enough to say beside it. */
import { type Label, labelCharges } from '../physics/symmetries.ts';
import type { SearchResult } from '../search/result.ts';

/** Products of charges are tried in pairs: beyond this, `holdfast algebra` takes its time. */
const MAX_CHARGES = 40;
const MAX_STRINGS = 20_000;

const known = new WeakMap<SearchResult, readonly (Label | null)[]>();

/** A label for every charge, or null for all where the list is too long. */
export function labelsOf(result: SearchResult): readonly (Label | null)[] {
  const found = known.get(result);
  if (found !== undefined) return found;
  const { charges } = result;
  const size = charges.reduce((sum, q) => sum + q.density.size, 0);
  const labels =
    charges.length > MAX_CHARGES || size > MAX_STRINGS ? charges.map(() => null) : labelCharges(result);
  known.set(result, labels);
  return labels;
}

/** For a sentence or a line of its own. */
export function labelText({ text, multiplet }: Label): string {
  return multiplet === null ? text : `${text}; spin ${multiplet} under SU(2)`;
}
