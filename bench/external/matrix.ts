/**
 * The equations of [H, Q] = 0 as a plain sparse matrix, letter by letter from the definition. Shares no code with the
 * library, so that a comparison of ranks compares two independent things.
 *
 * Rows are the strings that occur in i[H, Q]/2, columns all representatives of range ≤ k. Cost: about a microsecond a non-zero
 * and letter; memory: all of it.
 */

/** A term: coefficient and a word over I X Y Z whose first letter stands on spin 0 of its first cell. */
export type PlainTerm = readonly [coefficient: number, word: string];

export interface PlainMatrix {
  readonly rows: number;
  readonly columns: number;
  /** Row, column, value; a pair of row and column may not occur twice. */
  readonly entries: readonly (readonly [row: number, column: number, value: number])[];
  /** The string of each column. */
  readonly words: readonly string[];
}

const LETTERS = ['I', 'X', 'Y', 'Z'] as const;

/** σ_a σ_b = i^power σ_c, from σ_x σ_y = iσ_z and its cyclic turns. */
function multiplyLetters(a: number, b: number): readonly [letter: number, power: number] {
  if (a === 0) return [b, 0];
  if (b === 0) return [a, 0];
  if (a === b) return [0, 0];
  return [6 - a - b, (b - a + 3) % 3 === 1 ? 1 : 3];
}

export function plainMatrix(terms: readonly PlainTerm[], cell: number, range: number): PlainMatrix {
  const digits = terms.map(([coefficient, word]) => {
    const letters = [...word].map((letter) => LETTERS.indexOf(letter as 'I'));
    while (letters.length % cell !== 0) letters.push(0);
    return { coefficient, letters };
  });
  const rows = new Map<string, number>();
  const entries: [number, number, number][] = [];
  const words: string[] = [];
  for (const candidate of representatives(cell, range)) {
    const column = words.length;
    words.push(candidate.map((letter) => LETTERS[letter]).join(''));
    const sums = new Map<number, number>();
    for (const { coefficient, letters } of digits)
      for (let at = -letters.length + cell; at < candidate.length; at += cell) {
        const start = Math.min(0, at);
        const length = Math.max(candidate.length, at + letters.length) - start;
        const output: number[] = [];
        let power = 0;
        for (let spin = 0; spin < length; spin++) {
          const [letter, turn] = multiplyLetters(
            letters[spin + start - at] ?? 0,
            candidate[spin + start] ?? 0,
          );
          output.push(letter);
          power += turn;
        }
        // T·A = ±A·T: only an odd power of i is left in the commutator, and i·i = −1, i·(−i) = 1.
        if (power % 2 === 0) continue;
        const key = trim(output, cell);
        const row = rows.get(key) ?? rows.size;
        rows.set(key, row);
        sums.set(row, (sums.get(row) ?? 0) + (power % 4 === 1 ? -coefficient : coefficient));
      }
    for (const [row, value] of sums) if (value !== 0) entries.push([row, column, value]);
  }
  return { rows: rows.size, columns: words.length, entries, words };
}

/** All strings whose first cell is not the identity, of range ≤ `range`, shortest first. */
function* representatives(cell: number, range: number): Generator<number[]> {
  for (let cells = 1; cells <= range; cells++) {
    const spins = cells * cell;
    for (let number = 0; number < 4 ** spins; number++) {
      const letters = Array.from({ length: spins }, (_, spin) => Math.floor(number / 4 ** spin) % 4);
      if (letters.slice(0, cell).some((l) => l !== 0) && letters.slice(-cell).some((l) => l !== 0))
        yield letters;
    }
  }
}

/** Drops whole identity cells at both ends. */
function trim(letters: readonly number[], cell: number): string {
  let [from, to] = [0, letters.length];
  const empty = (start: number) => letters.slice(start, start + cell).every((letter) => letter === 0);
  while (from < to && empty(from)) from += cell;
  while (to > from && empty(to - cell)) to -= cell;
  return letters.slice(from, to).join('');
}

/** The sparse format of LinBox and others: a head line, `row column value` from 1 on, an end line of zeros. */
export function sparseText({ rows, columns, entries }: PlainMatrix): string {
  const lines = [`${rows} ${columns} M`];
  for (const [row, column, value] of entries) lines.push(`${row + 1} ${column + 1} ${value}`);
  lines.push('0 0 0\n');
  return lines.join('\n');
}
