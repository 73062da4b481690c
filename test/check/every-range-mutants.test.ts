/** Small changes of every-range certificates of all kinds: what is accepted is true, whatever was changed. */
import { describe, expect } from 'vitest';
import { checkNow } from '../../src/check/check.ts';
import { parseModel } from '../../src/model/formula.ts';
import { everyRangeCertificate } from '../../src/theory/certificate.ts';
import { everyRangeBound } from '../../src/theory/decide.ts';
import { decompose } from '../../src/theory/decompose.ts';
import { property, type Random } from '../support/random.ts';

interface Document {
  readonly model: { readonly cell: number; readonly terms: readonly (readonly [string, string])[] };
  readonly claim: { readonly from: number; readonly atMost: number };
}

/** One character for another of its kind, or two of them exchanged, or a piece of the text left out or repeated. */
function mutantOf(text: string, random: Random): string {
  const at = random.below(text.length);
  const character = text[at]!;
  const kinds = ['0123456789', 'IXYZ'].filter((kind) => kind.includes(character));
  if (kinds.length > 0) return text.slice(0, at) + random.pick(kinds[0]!) + text.slice(at + 1);
  const end = Math.min(text.length, at + random.integer(1, 12));
  const piece = text.slice(at, end);
  return random.chance(0.5)
    ? text.slice(0, at) + text.slice(end)
    : text.slice(0, end) + piece + text.slice(end);
}

/** The bound of the theory layer for what the document says, with terms put back into a formula. */
function isTrue({ model, claim }: Document): boolean {
  const formula = model.terms.map(([word, value]) => `+ ${value} ${word}`).join(' ');
  const h = parseModel(formula.replaceAll('+ -', '- ').replace(/^\+ /, ''), { cell: model.cell });
  const bound = everyRangeBound(decompose(h)!);
  if ('reason' in bound || claim.from < bound.from) return false;
  return claim.atMost >= Math.max(bound.generic, ...bound.exceptional.map((e) => e.atMost));
}

describe('no mutant is accepted and untrue', () => {
  for (const [formula, cell, runs] of [
    ['2 XX + 3 YY + 5 ZZ + Z', 1, 150],
    ['2 XX + 3 YY + 5 ZZ', 1, 100],
    ['ZZ + 2 X + 3 Z', 1, 150],
    ['ZZ + X', 1, 100],
    ['XIXI + YIYI + IXIX + IYIY + 3 ZZ + ZI', 2, 40],
  ] as const) {
    const original = everyRangeCertificate(parseModel(formula, { cell }));
    property(`${formula}, ${cell} spins a cell`, runs, (random) => {
      const mutant = mutantOf(original, random);
      const verdict = checkNow(mutant);
      if (verdict.status === 'accepted') expect(isTrue(JSON.parse(mutant) as Document), mutant).toBe(true);
    });
  }
});
