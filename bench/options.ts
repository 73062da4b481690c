export interface BenchOptions {
  /** Small sizes, one sample: does it run at all? */
  readonly smoke: boolean;
  /** Instead of each model's own. */
  readonly ranges: readonly number[] | undefined;
  readonly models: readonly string[] | undefined;
  readonly samples: number;
  /** Limit of one point of a library that is compared against. */
  readonly limit: number;
  progress(text: string): void;
}
