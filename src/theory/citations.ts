/**
 * Published theorems with hypotheses that a program can check. Used only where the program's own lemmas do not reach, and named as
 * what they are: somebody else's proof. Hypotheses are checked up to a scale, a global rotation by right angles (renaming of axes) and reflection.
 */
import { wordFromText } from '../algebra/word.ts';
import type { Source } from '../model/catalogue/entry.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { PUBLISHED } from './published/index.ts';

/** A theorem as data. */
export interface PublishedTheorem {
  readonly id: string;
  /** What it says about a model that meets its hypotheses. */
  readonly conclusion: string;
  /** Hypotheses in words, as they are checked. */
  readonly hypotheses: string;
  readonly source: Source;
  /** Was the statement read in the source, or is a condition quoted from memory? */
  readonly basis: 'seen' | 'from memory';
  /** Spins in the cell. */
  readonly cell: number;
  /**
   * The theorem speaks of `Σ coefficient · word`, with couplings by name: a model meets it when, after renaming axes, its terms are
   * among these words with equal couplings where names are equal, and `condition` holds. `factor` is the coefficient of the word in units of the coupling.
   */
  readonly terms: readonly { readonly word: string; readonly coupling: string; readonly factor?: bigint }[];
  /** Of the couplings, absent ones zero. */
  readonly condition: (couplings: Readonly<Record<string, bigint>>) => boolean;
  readonly verdict: 'none' | 'integrable';
  /** No charges of range ≥ `from`, for the verdict `none`. */
  readonly from?: number;
}

export interface Citation {
  readonly theorem: PublishedTheorem;
  /** The couplings the model was recognised with, up to a common scale, as integers. */
  readonly couplings: Readonly<Record<string, bigint>>;
  /** Axes of the model in the order X, Y, Z of the theorem. */
  readonly axes: string;
}

/** The first theorem of the registry whose hypotheses H meets. */
export function citationFor(h: Hamiltonian): Citation | undefined {
  for (const theorem of PUBLISHED) {
    const found = matches(h, theorem);
    if (found !== undefined) return found;
  }
  return undefined;
}

const RENAMINGS = ['XYZ', 'YZX', 'ZXY', 'XZY', 'ZYX', 'YXZ'];

function matches(h: Hamiltonian, theorem: PublishedTheorem): Citation | undefined {
  if (h.chain.cell !== theorem.cell) return undefined;
  for (const axes of RENAMINGS) {
    const couplings: Record<string, bigint> = {};
    const wanted = new Map<string, bigint>();
    let fits = true;
    for (const { word, coupling, factor = 1n } of theorem.terms) {
      const renamed = word.replace(/[XYZ]/g, (letter) => axes['XYZ'.indexOf(letter)]!);
      const value = h.density.numerators.get(h.chain.representative(wordFromText(renamed))) ?? 0n;
      if (
        value % factor !== 0n ||
        (couplings[coupling] !== undefined && couplings[coupling] !== value / factor)
      ) {
        fits = false;
        break;
      }
      couplings[coupling] = value / factor;
      wanted.set(renamed, value);
    }
    if (!fits) continue;
    const used = [...wanted.values()].filter((value) => value !== 0n).length;
    // Every term of H has to be one of the theorem's.
    if (used === h.density.size && theorem.condition(couplings)) return { theorem, couplings, axes };
  }
  return undefined;
}
