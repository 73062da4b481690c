/**
 * The proof of a small search told step by step: which outputs force which coefficients, range by range, each with its exact sources.
 *
 * The equations are generated anew from H and solved over the rationals, so the story shares nothing with the modular search but the
 * bracket, and is compared with its answer at the end. Meant for ranges that a person would follow: cost grows with the cube of
 * what single outputs do not settle.
 */
import { Operator } from '../algebra/operator.ts';
import { add, multiply, type Rational, rational, textFromRational, ZERO } from '../algebra/rational.ts';
import { compareWords, type Word } from '../algebra/word.ts';
import { VerificationError } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { SearchResult } from '../search/result.ts';
import { wordText } from './grouping.ts';

/** A string whose coefficient appears in an equation, with what it contributes. */
export interface Contribution {
  readonly word: Word;
  readonly factor: Rational;
}

export interface StoryStep {
  readonly output: Word;
  /** Strings whose brackets with H contain the output. */
  readonly sources: readonly Contribution[];
  /** What is left of them once earlier steps are used: Σ factor · coefficient = 0. */
  readonly left: readonly Contribution[];
  /** The coefficient that the step settles: `Σ value` of it is zero (`left` has one entry) or is tied to the others. */
  readonly settled: Word;
}

export interface StoryLayer {
  /** Range of the outputs, in cells. */
  readonly range: number;
  /** Equations of this range, and how many say nothing beyond what is known. */
  readonly equations: number;
  readonly steps: readonly StoryStep[];
}

export interface Story {
  readonly candidates: number;
  readonly layers: readonly StoryLayer[];
  /** Strings whose coefficients stay free, one a charge. */
  readonly free: readonly Word[];
}

/** Candidates up to which a story is told. */
export const STORY_LIMIT = 800;

/**
 * The story of a result, or null where there are more candidates than `STORY_LIMIT`.
 *
 * @throws VerificationError when the exact elimination leaves another number of charges than the search found
 */
export function storyOf(result: SearchResult): Story | null {
  const { hamiltonian: h, range, candidates } = result;
  if (candidates > STORY_LIMIT) return null;
  const equations = equationsOf(h, range);
  const solved = new Map<Word, Map<Word, Rational>>();
  /** Replaces settled coefficients until only free ones are left. */
  const reduce = (row: ReadonlyMap<Word, Rational>): Map<Word, Rational> => {
    const reduced = new Map<Word, Rational>();
    const put = (word: Word, factor: Rational): void => {
      const known = solved.get(word);
      if (known === undefined) accumulate(reduced, word, factor);
      else for (const [w, f] of known) put(w, multiply(factor, f));
    };
    for (const [word, factor] of row) put(word, factor);
    return reduced;
  };
  const ranges = [...new Set([...equations.keys()].map((o) => h.chain.range(o)))].sort((a, b) => b - a);
  const layers = ranges.map((outputs): StoryLayer => {
    const waiting = new Map([...equations].filter(([o]) => h.chain.range(o) === outputs));
    const total = waiting.size;
    const steps: StoryStep[] = [];
    // Outputs with one source left first, then two, then the shortest: each step is as plain as it can be when its turn comes.
    for (let allowed = 1; waiting.size > 0; ) {
      let progress = false;
      let shortest = Number.POSITIVE_INFINITY;
      for (const [output, row] of waiting) {
        const left = reduce(row);
        if (left.size === 0) {
          waiting.delete(output);
          continue;
        }
        if (left.size > allowed) {
          shortest = Math.min(shortest, left.size);
          continue;
        }
        waiting.delete(output);
        progress = true;
        const settled = lastWord(h, left.keys());
        const pivot = left.get(settled)!;
        const inverse = rational(-pivot.denominator, pivot.numerator);
        solved.set(
          settled,
          new Map([...left].filter(([w]) => w !== settled).map(([w, f]) => [w, multiply(f, inverse)])),
        );
        steps.push({ output, sources: contributions(row), left: contributions(left), settled });
      }
      allowed = progress ? 1 : shortest;
    }
    return { range: outputs, equations: total, steps };
  });
  const free = candidateWords(h, range).filter((word) => !solved.has(word));
  if (free.length !== result.charges.length)
    throw new VerificationError(
      `story: elimination over the rationals leaves ${free.length} charges, the search found ${result.charges.length}`,
    );
  return { candidates, layers, free };
}

/** One step in words: why the coefficient vanishes, or what it is tied to. */
export function tellStep(h: Hamiltonian, { output, sources, left, settled }: StoryStep): string {
  const name = (word: Word) => wordText(h.chain, word);
  const others = sources.filter((s) => !left.some((l) => l.word === s.word)).map((s) => name(s.word));
  const once =
    others.length === 0 ? '' : ` once ${list(others)} ${others.length === 1 ? 'is' : 'are'} settled`;
  if (left.length === 1) {
    return `The coefficient of ${name(settled)} vanishes, because the output ${name(output)} has no other source${once}.`;
  }
  const pivot = left.find((l) => l.word === settled)!.factor;
  const rest = left
    .filter((l) => l.word !== settled)
    .map((l) => ({
      word: l.word,
      factor: multiply(l.factor, rational(-pivot.denominator, pivot.numerator)),
    }));
  const value = rest
    .map(({ word, factor }, i) => {
      const negative = factor.numerator < 0n;
      const size = {
        numerator: negative ? -factor.numerator : factor.numerator,
        denominator: factor.denominator,
      };
      const times = size.numerator === 1n && size.denominator === 1n ? '' : `${textFromRational(size)} `;
      return `${negative ? (i === 0 ? '−' : ' − ') : i === 0 ? '' : ' + '}${times}c(${name(word)})`;
    })
    .join('');
  return `The output ${name(output)} ties c(${name(settled)}) = ${value}${once}.`;
}

/** What the layer says as a whole. */
export function tellLayer({ range, equations, steps }: StoryLayer): string {
  const vanish = steps.filter((s) => s.left.length === 1).length;
  const tied = steps.length - vanish;
  return `Outputs of range ${range}: ${equations} equations; ${vanish} make a coefficient vanish, ${tied} tie one to others, ${equations - steps.length} follow from what is known.`;
}

function equationsOf(h: Hamiltonian, range: number): Map<Word, Map<Word, Rational>> {
  const equations = new Map<Word, Map<Word, Rational>>();
  for (const word of candidateWords(h, range)) {
    const image = h.chain.bracket(h.density, Operator.fromIntegers([[word, 1n]]));
    for (const [output, factor] of image.terms()) {
      const row = equations.get(output);
      if (row === undefined) equations.set(output, new Map([[word, factor]]));
      else row.set(word, factor);
    }
  }
  return equations;
}

/** All representatives of range ≤ k in the order of the alphabet, shorter ranges first. */
function candidateWords({ chain }: Hamiltonian, range: number): Word[] {
  const words: Word[] = [];
  const first = (1n << BigInt(2 * chain.cell)) - 1n;
  const end = 1n << BigInt(2 * chain.cell * range);
  for (let word = 1n; word < end; word++) if ((word & first) !== 0n) words.push(word);
  return words.sort((a, b) => chain.range(a) - chain.range(b) || compareWords(a, b));
}

function contributions(row: ReadonlyMap<Word, Rational>): Contribution[] {
  return [...row].map(([word, factor]) => ({ word, factor }));
}

function accumulate(row: Map<Word, Rational>, word: Word, factor: Rational): void {
  const sum = add(row.get(word) ?? ZERO, factor);
  if (sum.numerator === 0n) row.delete(word);
  else row.set(word, sum);
}

/** The longest, then the last: what stays free leads the canonical charges where it can. */
function lastWord({ chain }: Hamiltonian, words: Iterable<Word>): Word {
  return [...words].reduce((a, b) => ((chain.range(b) - chain.range(a) || compareWords(b, a)) > 0 ? b : a));
}

function list(words: readonly string[]): string {
  return words.length < 2 ? words.join('') : `${words.slice(0, -1).join(', ')} and ${words.at(-1)}`;
}
