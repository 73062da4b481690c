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
}
