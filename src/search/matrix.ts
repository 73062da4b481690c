/**
 * The equations of a search in the plain sparse SMS text format, with a legend: for people who trust other tools with the rank.
 *
 * A line `rows columns M`, one `row column value` an entry (from 1 on, row by row), a line `0 0 0`; the format that exact
 * linear-algebra libraries read. Rows are the outputs that occur in i[H, Q]/2, columns all representatives of range ≤ k, values
 * the integers of H times its common denominator. Dimension of the space of charges = columns − rank.
 *
 * Everything streams: memory does not grow with the matrix. Each row is made twice, since the first line holds their number.
 */
import { textFromWord } from '../algebra/word.ts';
import { InputError, LimitError, show } from '../errors.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import { Neighbourhood, windowTable } from './windows.ts';

export interface MatrixSize {
  readonly rows: number;
  readonly columns: number;
  readonly entries: number;
}

export class EquationMatrix {
  readonly #near: Neighbourhood;
  readonly #cellBits: number;
  /** One past the largest packed candidate. */
  readonly #limit: number;

  /** @throws InputError for a range that is no positive integer; LimitError where strings do not fit the packed form */
  constructor(
    readonly h: Hamiltonian,
    readonly range: number,
  ) {
    if (!(Number.isInteger(range) && range >= 1))
      throw new InputError('matrix', 'a range of one cell or more, a whole number', show(range));
    const table = windowTable(h);
    this.#cellBits = table.cellBits;
    if (table.cellBits * (range + h.range) > 52)
      throw new LimitError(`matrix: range ${range} makes strings too long to pack`);
    this.#near = new Neighbourhood(table, range + h.range - 1);
    this.#limit = 2 ** (table.cellBits * range);
  }

  /** Number of the column of a packed candidate, from 1 on: candidates in rising packed order. */
  columnOf(string: number): number {
    // Of the packed numbers from 1 to `string`, those with an empty first cell are no candidates.
    return string - Math.floor(string / 2 ** this.#cellBits);
  }

  /** Rows that are not empty: the output, and its columns rising with values. Yields once an output, empty ones as undefined. */
  *#rows(): Generator<{ output: number; cells: number; entries: [number, bigint][] } | undefined> {
    const { backward, values } = this.#near.table;
    const cell = 2 ** this.#cellBits;
    for (let cells = 1; cells <= this.range + this.h.range - 1; cells++)
      for (let output = cell ** (cells - 1); output < cell ** cells; output++) {
        if (output % cell === 0) continue;
        this.#near.visit(output, cells);
        const sums = new Map<number, bigint>();
        for (let i = 0; i < this.#near.count; i++) {
          const parent = this.#near.images[i]!;
          if (parent >= this.#limit) continue;
          const column = this.columnOf(parent);
          sums.set(column, (sums.get(column) ?? 0n) + values[backward[this.#near.entries[i]!]!]!);
        }
        const entries = [...sums].filter(([, value]) => value !== 0n).sort((a, b) => a[0] - b[0]);
        yield entries.length === 0 ? undefined : { output, cells, entries };
      }
  }

  size(): MatrixSize {
    const steps = this.sizing();
    for (;;) {
      const step = steps.next();
      if (step.done) return step.value;
    }
  }

  /** As `size`, step by step, for callers that give way. */
  *sizing(): Generator<undefined, MatrixSize> {
    let rows = 0;
    let entries = 0;
    for (const row of this.#rows()) {
      if (row !== undefined) {
        rows++;
        entries += row.entries.length;
      }
      yield;
    }
    return { rows, columns: this.#limit - this.#limit / 2 ** this.#cellBits, entries };
  }

  /** The matrix line by line, each with its line feed; an empty text now and then, for callers that give way. */
  *lines({ rows, columns }: MatrixSize = this.size()): Generator<string> {
    yield `${rows} ${columns} M\n`;
    let number = 0;
    for (const row of this.#rows()) {
      if (row === undefined) {
        yield '';
        continue;
      }
      number++;
      let text = '';
      for (const [column, value] of row.entries) text += `${number} ${column} ${value}\n`;
      yield text;
    }
    yield '0 0 0\n';
  }

  /** The legend line by line: `row NUMBER WORD` and `column NUMBER WORD`. */
  *legend(): Generator<string> {
    const cell = 2 ** this.#cellBits;
    const print = (string: number, cells: number) => textFromWord(BigInt(string), cells * this.h.chain.cell);
    for (let cells = 1; cells <= this.range; cells++)
      for (let string = cell ** (cells - 1); string < cell ** cells; string++)
        if (string % cell !== 0) yield `column ${this.columnOf(string)} ${print(string, cells)}\n`;
    let number = 0;
    for (const row of this.#rows())
      yield row === undefined ? '' : `row ${++number} ${print(row.output, row.cells)}\n`;
  }
}
