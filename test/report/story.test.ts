import { describe, expect, it } from 'vitest';
import { commute } from '../../src/algebra/word.ts';
import { parseModel, searchNow, storyOf, tellLayer, tellStep } from '../../src/index.ts';
import { STORY_LIMIT } from '../../src/report/story.ts';
import { property } from '../support/random.ts';

describe('the story of a search', () => {
  property('is true of the charges, and its sources are those of the commutator', 25, (random) => {
    const h = random.hamiltonian({ range: random.integer(1, 3), terms: random.integer(1, 5) });
    const range = random.integer(1, 3);
    const result = searchNow(h, { range });
    const story = storyOf(result)!;
    expect(story.free).toHaveLength(result.charges.length);
    for (const { output, sources, left } of story.layers.flatMap((l) => l.steps)) {
      // Sources are found backwards here: the words that a translate of a term of H turns into the output.
      const parents = new Set<bigint>();
      const room = BigInt(2 * (h.range - 1));
      for (let at = 0; at < h.range - 1 + h.chain.range(output); at++)
        for (const term of h.density.numerators.keys()) {
          const moved = term << BigInt(2 * at);
          const shifted = output << room;
          if (commute(moved, shifted)) continue;
          const parent = h.chain.representative(moved ^ shifted);
          if (h.chain.range(parent) <= range) parents.add(parent);
        }
      for (const { word } of sources) expect(parents.has(word)).toBe(true);
      // What a step leaves holds for every charge, exactly.
      for (const { density } of result.charges) {
        let sum = 0n;
        const scale = left.reduce((s, l) => s * l.factor.denominator, 1n);
        for (const { word, factor } of left)
          sum += ((factor.numerator * scale) / factor.denominator) * (density.numerators.get(word) ?? 0n);
        expect(sum).toBe(0n);
      }
    }
  });

  it('tells an elimination as a referee would', () => {
    const h = parseModel('2 XX + 3 YY + 5 ZZ + X + Z');
    const story = storyOf(searchNow(h, { range: 4 }))!;
    const told = story.layers.flatMap((l) => l.steps.map((s) => tellStep(h, s)));
    expect(told).toContain('The coefficient of XXXX vanishes, because the output XXXYZ has no other source.');
    expect(told.some((t) => /^The output \w+ ties c\(\w+\) = −?(\d+(\/\d+)? )?c\(\w+\)/.test(t))).toBe(true);
    expect(tellLayer(story.layers[0]!)).toMatch(
      /^Outputs of range 5: \d+ equations; \d+ make a coefficient vanish/,
    );
    expect(story.free).toHaveLength(1);
  });

  it('is left out where nobody would read it', () => {
    const result = searchNow(parseModel('XX + Z'), { range: 6 });
    expect(result.candidates).toBeGreaterThan(STORY_LIMIT);
    expect(storyOf(result)).toBeNull();
  });

  it('refuses a result that is not right', () => {
    const result = searchNow(parseModel('XX + YY + ZZ'), { range: 3 });
    expect(() => storyOf({ ...result, charges: result.charges.slice(1) })).toThrow(/leaves 5 charges/);
  });
});
