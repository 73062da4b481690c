/** What a worker thread of a scan is asked, and what it answers. */
import type { PointsPlan } from '../../scan/plan.ts';
import type { Outcome } from '../../scan/record.ts';
import type { PointResult } from '../../scan/run.ts';

/** Points count from 0. `certificate` is the file to check against the outcome recorded. */
export type Job =
  | {
      readonly kind: 'run';
      readonly point: number;
      readonly values: readonly string[];
      /** A folder for finished layers. */
      readonly checkpoint: string;
    }
  | {
      readonly kind: 'check';
      readonly point: number;
      readonly values: readonly string[];
      readonly outcome: Outcome;
      readonly certificate: string;
    };

/** Null from a check that accepts. */
export type Reply =
  | {
      readonly kind: 'run';
      readonly point: number;
      readonly result: PointResult;
      readonly milliseconds: number;
    }
  | { readonly kind: 'check'; readonly point: number; readonly reason: string | null };

/** Told on the way, now and then. */
export interface JobProgress {
  readonly kind: 'progress';
  readonly done: number;
}

export interface WorkerInput {
  readonly plan: PointsPlan;
}
