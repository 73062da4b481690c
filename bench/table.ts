/** Tables for the terminal and for the pages of measurements: one text serves both. */
import { readFileSync, writeFileSync } from 'node:fs';

export interface Table {
  /** Names the place in the document. */
  readonly name: string;
  readonly title: string;
  readonly columns: readonly string[];
  readonly rows: readonly (readonly string[])[];
  readonly notes: readonly string[];
  /** The page under docs/ that has it; performance.md when absent. */
  readonly page?: string;
  /** What stands below it in place of the day and the machine. */
  readonly heading?: string;
}

/** Markdown, columns aligned, numbers to the right. */
export function markdown({ title, columns, rows, notes }: Table): string {
  const widths = columns.map((column, i) =>
    Math.max(3, ...[column, ...rows.map((row) => row[i] ?? '')].map((t) => [...t].length)),
  );
  const line = (cells: readonly string[]) =>
    `| ${cells.map((cell, i) => cell.padStart(widths[i]! + cell.length - [...cell].length)).join(' | ')} |`;
  return [
    `**${title}**`,
    '',
    line(columns),
    `| ${widths.map((w) => `${'-'.repeat(w - 1)}:`).join(' | ')} |`,
    ...rows.map(line),
    ...(notes.length > 0 ? ['', ...notes.map((note) => `- ${note}`)] : []),
  ].join('\n');
}

/**
 * Puts a table where the document has its marks, `<!-- table NAME -->` to `<!-- end NAME -->`; without marks it goes to the end.
 * What stands between marks is never written by hand.
 */
export function writeTable(table: Table, heading: string): void {
  const document = new URL(`../docs/${table.page ?? 'performance.md'}`, import.meta.url);
  const text = readFileSync(document, 'utf8');
  const begin = `<!-- table ${table.name} -->`;
  const end = `<!-- end ${table.name} -->`;
  const block = `${begin}\n\n${markdown(table)}\n\n${table.heading ?? heading}\n\n${end}`;
  const [from, to] = [text.indexOf(begin), text.indexOf(end)];
  writeFileSync(
    document,
    from >= 0 && to > from
      ? text.slice(0, from) + block + text.slice(to + end.length)
      : `${text.trimEnd()}\n\n${block}\n`,
  );
}

export function seconds(value: number): string {
  if (value < 1e-3) return `${(value * 1e6).toFixed(0)} µs`;
  if (value < 1) return `${(value * 1e3).toPrecision(3)} ms`;
  return `${value.toPrecision(3)} s`;
}

export function megabytes(bytes: number): string {
  return `${(bytes / 1e6).toFixed(0)} MB`;
}

export function ratio(value: number): string {
  return Number.isFinite(value) ? (value < 100 ? value.toPrecision(3) : value.toFixed(0)) : '';
}
