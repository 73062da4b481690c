/**
 * A verdict for every range at once: upper bounds from the pencil of an injective chain or of half steps, existence from a ladder or
 * from free fermions, short ranges from the exhaustive search.
 */
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { candidateCount } from '../search/estimate.ts';
import type { SearchResult } from '../search/result.ts';
import { searchNow } from '../search/search.ts';
import { citationFor } from './citations.ts';
import { type BondsAndFields, decompose, MAX_GROUPED_SPINS } from './decompose.ts';
import { isFreeFermionic } from './free-fermions.ts';
import { CellGrowth, injectivity } from './growth.ts';
import { CORE_LENGTH, HALF_STEP_RANGE, HalfStepGrowth, halfSteps } from './half-steps.ts';
import { ladderBase } from './ladder.ts';
import { boundsOf } from './pencil.ts';
import {
  ALL_WAVE_NUMBERS_CAUTION,
  EVERY_RANGE_CAUTIONS,
  type EveryRangeBound,
  type EveryRangeVerdict,
  type Existence,
} from './verdict.ts';
import { decideWaveNumbers, type WaveNumberVerdict } from './wave-numbers.ts';

export interface DecideOptions {
  /** The exhaustive search goes at least so far, in cells; by default as far as the verdict needs, and a little further where it is open. */
  readonly searchRange?: number;
  /** A search that was made already: taken instead of a new one where it goes far enough. */
  readonly searched?: SearchResult;
  /** Look at quantities that are not translation invariant too. */
  readonly waveNumbers?: boolean;
  /** Called with the stage that begins; throwing from it stops the decision. */
  readonly onStage?: (stage: 'lemmas' | 'search' | 'ladder') => void;
}

/**
 * Candidates times terms up to which an open verdict searches unasked: well under a second. Less where no lemma reaches, since
 * classical and decoupled models are among these, and their many charges make a search dear.
 */
const OPEN_SEARCH = { bounded: 40_000, undecided: 3_000 };
/** Widest cell whose half steps are counted: strings of half-length 6 on cells of two spins are 12,544 and more. */
const MAX_HALF_STEP_SPINS = 2;

/**
 * Decides what charges H has at every range. Exact; modular work is a rank bound or re-checked.
 *
 * Cost: milliseconds for one spin a cell, under a second for two, seconds for three.
 *
 * @throws InputError as `searchNow` does
 */
export function decide(
  h: Hamiltonian,
  { searchRange = 1, searched, waveNumbers: wanted = false, onStage = () => {} }: DecideOptions = {},
): EveryRangeVerdict {
  onStage('lemmas');
  const model = decompose(h);
  const bound = model === undefined ? tooWide(h) : everyRangeBound(model);
  const needed = 'reason' in bound ? 2 : shortRanges(bound);
  const isOpen = 'reason' in bound || bound.generic > 0 || bound.exceptional.length > 0;
  onStage('ladder');
  const existence = isOpen && h.range >= 2 ? existenceOf(h, model) : null;
  const closed =
    !('reason' in bound) &&
    bound.exceptional.length === 0 &&
    (bound.generic === 0 || (bound.group === 1 && existence?.perRange === bound.generic));
  onStage('search');
  const range = Math.max(
    searchRange,
    closed ? needed : openRange(h, needed, 'reason' in bound ? 'undecided' : 'bounded'),
  );
  const search = searched !== undefined && searched.range >= range ? searched : searchNow(h, { range });
  const waveNumbers = !wanted ? null : waveNumbersOf(h, model);
  const cautions =
    waveNumbers?.kind === 'covered'
      ? EVERY_RANGE_CAUTIONS.map((caution, i) => (i === 1 ? ALL_WAVE_NUMBERS_CAUTION : caution))
      : EVERY_RANGE_CAUTIONS;
  const common = { hamiltonian: h, search, waveNumbers, cautions };
  if ('reason' in bound) {
    const citation = citationFor(h);
    return citation === undefined
      ? { kind: 'undecided', reason: bound.reason, existence, ...common }
      : { kind: 'by citation', citation, reason: bound.reason, ...common };
  }
  const from = firstRange(search, bound.generic);
  if (closed && bound.generic === 0) return { kind: 'none', from, bound, ...common };
  if (closed && existence !== null)
    return { kind: 'complete', from, perRange: bound.generic, bound, existence, ...common };
  return { kind: 'bounded', bound, existence, ...common };
}

/** The range from which on every range has so many charges, those of the search included. */
function firstRange({ dimensionByRange }: SearchResult, perRange: number): number {
  let range = dimensionByRange.length;
  while (range > 0 && dimensionByRange[range - 1]! - (dimensionByRange[range - 2] ?? 0) === perRange) range--;
  return range + 1;
}

function waveNumbersOf(h: Hamiltonian, model: BondsAndFields | undefined): WaveNumberVerdict {
  return model === undefined ? { kind: 'open', ...tooWide(h) } : decideWaveNumbers(model);
}

/** Largest range, in cells of the model, that a charge below the bound's first range can have. */
function shortRanges({ from, group }: EveryRangeBound): number {
  return (from - 1) * group;
}

function openRange(h: Hamiltonian, needed: number, kind: keyof typeof OPEN_SEARCH): number {
  let range = needed;
  while (candidateCount(h.chain.cell, range + 1) * h.density.size <= OPEN_SEARCH[kind]) range++;
  return range;
}

function tooWide(h: Hamiltonian): { reason: string } {
  const spins = h.chain.cell * Math.max(1, h.range - 1);
  return {
    reason: `the interaction needs cells of ${spins} spins, and the lemmas are evaluated up to ${MAX_GROUPED_SPINS}`,
  };
}

/** The bound of the program's own lemmas, or the reason why they do not reach. */
export function everyRangeBound(model: BondsAndFields): EveryRangeBound | { reason: string } {
  if (model.bond.isZero()) return { reason: 'the cells do not interact' };
  const kernel = injectivity(model);
  if (kernel.left.length === 0 && kernel.right.length === 0) {
    const { topParts, pencil } = new CellGrowth(model).pencil();
    const { generic, exceptional } = boundsOf(pencil, 0);
    return {
      method: 'cells',
      group: model.group,
      from: 3,
      generic,
      exceptional: exceptional.map(({ t, dimension }) => ({ range: t + 3, atMost: dimension })),
      topParts: topParts.length,
      pencil,
    };
  }
  const [seen] = [...kernel.left, ...kernel.right];
  const notInjective = `the interaction is not injective: ${seen} commutes with it`;
  if (model.spins > MAX_HALF_STEP_SPINS) return { reason: notInjective };
  const steps = halfSteps(model);
  if (!steps.ok) return { reason: `${notInjective}; no half steps either, since ${steps.reason}` };
  const { topParts, pencil } = new HalfStepGrowth(steps.letters).pencil();
  const bounds = boundsOf(pencil, 1);
  return {
    method: 'half steps',
    group: model.group,
    from: HALF_STEP_RANGE,
    ...byRange(bounds.generic, bounds.exceptional),
    topParts: topParts.length,
    pencil,
  };
}

/** Half-lengths 2k − 2 and 2k − 1 make range k. */
function byRange(
  generic: number,
  exceptional: readonly { readonly t: number; readonly dimension: number }[],
): Pick<EveryRangeBound, 'generic' | 'exceptional'> {
  const extra = new Map<number, number>();
  for (const { t, dimension } of exceptional) {
    const range = Math.floor((t + CORE_LENGTH) / 2) + 1;
    if (range >= HALF_STEP_RANGE) extra.set(range, (extra.get(range) ?? 2 * generic) + dimension - generic);
  }
  return { generic: 2 * generic, exceptional: [...extra].map(([range, atMost]) => ({ range, atMost })) };
}

/**
 * Charges of every range, for a reason that covers all of them. A ladder counts only where every rung is longer by one cell, which
 * injectivity guarantees.
 */
function existenceOf(h: Hamiltonian, model: BondsAndFields | undefined): Existence | null {
  if (model !== undefined && isFreeFermionic(model)) return { kind: 'free fermions', perRange: 2 };
  if (model === undefined || model.group !== 1) return null;
  const kernel = injectivity(model);
  if (kernel.left.length > 0 || kernel.right.length > 0) return null;
  return ladderBase(h) === undefined ? null : { kind: 'ladder', perRange: 1 };
}
