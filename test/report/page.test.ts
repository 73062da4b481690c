import { describe, expect, it } from 'vitest';
import {
  CAUTIONS,
  certificateNow,
  checkNow,
  parseModel,
  pictureOfCharge,
  pictureOfResult,
  reportPage,
  resultToJson,
  searchNow,
  verdictOf,
} from '../../src/index.ts';
import { escapeMarkup } from '../../src/report/markup.ts';
import { mathmlEquation } from '../../src/report/mathml.ts';

const xyz = searchNow(parseModel('2 XX + 3 YY + 5 ZZ'), { range: 5 });
const small = searchNow(parseModel('ZZ + X + 1/2 Z'), { range: 3 });
const none = searchNow(parseModel('ZXZ + YY + X + Z'), { range: 1 });

/** Tags nest and close. */
function wellFormed(markup: string): boolean {
  const open: string[] = [];
  for (const [, close, name, rest] of markup.matchAll(/<(\/?)([a-z][\w-]*)([^>]*)>/gi)) {
    if (['meta', '!doctype'].includes(name!) || rest!.endsWith('/')) continue;
    if (close === '') open.push(name!);
    else if (open.pop() !== name) return false;
  }
  return open.length === 0;
}

describe('pictures', () => {
  it('draw every string with its letters, coefficient and a name for those who cannot see it', () => {
    for (const [i, charge] of xyz.charges.entries()) {
      const svg = pictureOfCharge(charge, xyz, `Q${i + 1}`);
      expect(wellFormed(svg)).toBe(true);
      expect(svg.match(/<g transform/g)).toHaveLength(charge.density.size);
      for (const [word, c] of charge.density.toFractions())
        expect(svg).toContain(`<title>${c.s < 0n ? '−' : '+'}${c.n} ${word}</title>`);
      const letters = [...charge.density.toFractions().keys()].join('').length;
      expect(svg.match(/<use /g)).toHaveLength(letters);
    }
  });

  it('count what they leave out', () => {
    const charge = xyz.charges.at(-1)!;
    const svg = pictureOfCharge(charge, xyz, 'Q4', 10);
    const drawn = svg.match(/<g transform/g)!.length;
    expect(svg).toContain(`and ${charge.density.size - drawn} strings more`);
  });

  it('stand alone, also without a charge', () => {
    for (const result of [xyz, none]) {
      const svg = pictureOfResult(result);
      expect(wellFormed(svg)).toBe(true);
      expect(svg).toMatch(/^<svg xmlns="http:\/\/www.w3.org\/2000\/svg"/);
      for (const [, id] of svg.matchAll(/href="#([^"]+)"/g)) expect(svg).toContain(`id="${id}"`);
    }
  });
});

describe('MathML', () => {
  it('holds every word once', () => {
    const { hamiltonian, charges } = xyz;
    for (const { density } of charges) {
      const math = mathmlEquation('Q2', hamiltonian, density);
      expect(wellFormed(math)).toBe(true);
      expect(math.match(/<mi mathvariant="normal">/g)).toHaveLength(density.size);
    }
  });
});

describe('the report', () => {
  it.each([
    ['many charges', xyz],
    ['absence', small],
    ['no charge at all', none],
  ] as const)('of %s is whole, well formed and needs no network', (_, result) => {
    const page = reportPage(result);
    expect(wellFormed(page)).toBe(true);
    expect(page).toContain(escapeMarkup(verdictOf(result)));
    expect(page).toContain(`rings of ${result.minimumCells} cells or more`);
    for (const caution of CAUTIONS) expect(page).toContain(escapeMarkup(caution));
    expect(page).not.toMatch(/<script|<link|@import|(?:src|href)="(?!#|data:application\/json)/);
    expect(page.replaceAll('http://www.w3.org/2000/svg', '')).not.toContain('http');
    const ids = [...page.matchAll(/ id="([^"]+)"/g)].map((m) => m[1]);
    expect(new Set(ids).size).toBe(ids.length);
  });

  it('carries result and certificate in full', () => {
    const text = certificateNow(small);
    const verdict = checkNow(text);
    if (verdict.status !== 'accepted') throw new Error(verdict.reason);
    const page = reportPage(small, { certificate: { id: verdict.id, text } });
    const carried = [...page.matchAll(/href="data:application\/json;charset=utf-8,([^"]*)"/g)].map((m) =>
      decodeURIComponent(m[1]!),
    );
    expect(carried).toEqual([text, JSON.stringify(resultToJson(small))]);
    expect(page).toContain(`sha256:${verdict.id}`);
    expect(page).toContain('@misc{holdfast-');
  });

  it('takes a title as text, whatever is in it', () => {
    const page = reportPage(small, { title: '</title><script>alert(1)</script>"\'&' });
    expect(page).not.toContain('<script');
    expect(wellFormed(page)).toBe(true);
  });
});
