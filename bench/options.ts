import type { Table } from './table.ts';

export interface BenchOptions {
  /** Small sizes, one sample: does it run at all? */
  readonly smoke: boolean;
  /** The largest sizes too: half an hour, and up to ten gigabytes. */
  readonly large: boolean;
  /** Instead of each model's own. */
  readonly ranges: readonly number[] | undefined;
  readonly models: readonly string[] | undefined;
  readonly samples: number;
  /** Limit of one point of a library that is compared against. */
  readonly limit: number;
  progress(text: string): void;
  /** A table is printed as soon as it is done. */
  table(table: Table): void;
  /** A run that went wrong: reported at once, and in the exit status in the end. */
  failure(text: string): void;
}
