/** Mutants of certificates: changes of what a document says, and of its text. */
import { statement } from '../../src/check/exhaustive.ts';
import type { Random } from './random.ts';

export type Term = [word: string, coefficient: string];

/** The form of docs/certificate.md, fields in order. */
export interface Document {
  certificate: string;
  version: number;
  kind: string;
  tool: string;
  model: { cell: number; range: number; terms: Term[] };
  claim: { range: number; dimensions: number[]; rings: number; statement: string; assumes: string[] };
  charges: { range: number; terms: Term[] }[];
  evidence: { prime: number; sweeps: [number, number][]; pivots: string[] };
}

const text = (document: unknown) => `${JSON.stringify(document)}\n`;

const OTHER_PRIMES = [3, 5, 67108837, 67108819];
const COMPOSITES = [4, 9, 561, 67108861, 8191 * 8191];

/** Keeps the sentence in step with the numbers, so that a lie is not caught by its wording. */
function reword(d: Document): void {
  d.claim.statement = statement({ cell: d.model.cell, ...d.claim });
}

function recount(d: Document): void {
  d.claim.dimensions = d.claim.dimensions.map((_, j) => d.charges.filter((q) => q.range <= j + 1).length);
  reword(d);
}

const randomWord = (random: Random, length: number) => random.wordText(Math.max(1, length));

/** Changes of the document; each may leave it as it was, which the caller looks after. */
const CHANGES: readonly ((d: Document, random: Random) => void)[] = [
  (d, r) => {
    r.pick(d.model.terms)[1] = String(r.nonZero(9));
  },
  (d, r) => {
    r.pick(d.model.terms)[0] = randomWord(r, d.model.cell * d.model.range);
  },
  (d, r) => void d.model.terms.splice(r.below(d.model.terms.length), 1),
  (d, r) => {
    d.model.terms.push([randomWord(r, d.model.cell * r.integer(1, d.model.range)), '1']);
    d.model.terms.sort();
  },
  (d, r) => {
    d.model.cell += r.nonZero(1);
  },
  (d, r) => {
    d.model.range += r.nonZero(1);
  },
  (d, r) => {
    d.claim.dimensions[r.below(d.claim.dimensions.length)]! += r.nonZero(2);
    reword(d);
  },
  (d) => {
    d.claim.range++;
    d.claim.rings += 2;
    d.claim.dimensions.push(d.claim.dimensions.at(-1)!);
    reword(d);
  },
  (d) => {
    d.claim.range--;
    d.claim.rings -= 2;
    d.claim.dimensions.pop();
    if (d.claim.range > 0) reword(d);
  },
  (d, r) => {
    d.claim.rings += r.nonZero(3);
    reword(d);
  },
  (d, r) => {
    d.claim.statement = d.claim.statement.replace(/\d+/, String(r.integer(2, 99)));
  },
  (d, r) => void d.claim.assumes.splice(r.below(3), 1),
  (d, r) => {
    d.charges.splice(r.below(Math.max(1, d.charges.length)), 1);
    recount(d);
  },
  (d, r) => {
    if (d.charges.length > 0) d.charges.splice(r.below(d.charges.length), 0, r.pick(d.charges));
    recount(d);
  },
  (d, r) => {
    // A charge that is none: the bounds then meet one too early.
    const range = r.integer(1, d.claim.range);
    const word = randomWord(r, d.model.cell * range);
    d.charges.push({ range, terms: [[word, '1']] });
    d.charges.sort((a, b) => a.range - b.range);
    if (r.chance(0.5)) d.evidence.pivots.pop();
    recount(d);
  },
  (d, r) => {
    if (d.charges.length > 0)
      r.pick(r.pick(d.charges).terms)[1] = r.pick(['0', '2', '-1', '1/3', '7', '-5/2']);
  },
  (d, r) => {
    if (d.charges.length > 0) r.pick(d.charges).terms.pop();
  },
  (d, r) => {
    if (d.charges.length > 0) r.pick(d.charges).range += r.nonZero(1);
    if (r.chance(0.5)) recount(d);
  },
  (d, r) => {
    // The same charge times a number: still a basis.
    if (d.charges.length === 0) return;
    const charge = r.pick(d.charges);
    charge.terms = charge.terms.map(([word, c]) => [word, String(3n * BigInt(c))]);
  },
  (d, r) => {
    d.evidence.prime = r.pick([...OTHER_PRIMES, ...COMPOSITES]);
  },
  (d, r) => void d.evidence.sweeps.splice(r.below(Math.max(1, d.evidence.sweeps.length)), 1),
  (d) => void d.evidence.sweeps.pop(),
  (d, r) => {
    if (d.evidence.sweeps.length > 0) r.pick(d.evidence.sweeps)[r.below(2)]! += r.nonZero(1);
  },
  (d, r) => {
    d.evidence.sweeps = r.shuffle(d.evidence.sweeps);
  },
  (d, r) => {
    if (d.evidence.sweeps.length > 0) d.evidence.sweeps.push(r.pick(d.evidence.sweeps));
  },
  (d, r) => {
    d.evidence.pivots = r.shuffle(d.evidence.pivots);
  },
  (d) => void d.evidence.pivots.pop(),
  (d, r) => {
    if (d.evidence.pivots.length > 0) d.evidence.pivots.push(r.pick(d.evidence.pivots));
  },
  (d, r) => {
    // One charge less, and one more equation that would prove it.
    d.charges.splice(r.below(Math.max(1, d.charges.length)), 1);
    d.evidence.pivots.push(randomWord(r, d.model.cell * r.integer(1, d.claim.range)));
    recount(d);
  },
  (d, r) => {
    if (d.evidence.pivots.length > 0)
      d.evidence.pivots[r.below(d.evidence.pivots.length)] = randomWord(r, d.model.cell * d.claim.range);
  },
  (d, r) => {
    d.version += r.nonZero(1);
  },
  (d, r) => {
    d.kind += r.wordText(1);
  },
];

/** Changes of the text. */
const EDITS: readonly ((s: string, random: Random) => string)[] = [
  (s, r) => s.slice(0, r.below(s.length)),
  (s, r) => s + r.wordText(3),
  (s, r) => replaceAt(s, r.below(s.length), String.fromCharCode(r.integer(32, 126))),
  (s, r) => replaceAt(s, r.below(s.length), ''),
  (s, r) => {
    const at = r.below(s.length);
    return (
      s.slice(0, at) +
      r.pick(['0', '1', '-', ',', '"', '{', '[', ' ', '\n', 'é', '\\u0041', '__proto__']) +
      s.slice(at)
    );
  },
  (s, r) => {
    const digits = [...s.matchAll(/\d/g)];
    return replaceAt(s, r.pick(digits).index, String(r.below(10)));
  },
  (s, r) => {
    const [from, to] = [r.below(s.length), r.below(s.length)].sort((a, b) => a - b) as [number, number];
    return s.slice(0, to) + s.slice(from);
  },
];

function replaceAt(s: string, at: number, by: string): string {
  return s.slice(0, at) + by + s.slice(at + 1);
}

/** A text other than the original: three in four with one or two changes of the document, the others with an edited text. */
export function mutantOf(original: string, random: Random): string {
  let mutant: string;
  do {
    if (random.chance(0.75)) {
      const document = JSON.parse(original) as Document;
      for (let i = random.integer(1, 2); i > 0; i--) random.pick(CHANGES)(document, random);
      mutant = text(document);
    } else mutant = random.pick(EDITS)(original, random);
  } while (mutant === original);
  return mutant;
}
