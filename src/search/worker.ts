/** The thread that searches: takes one task, tells its progress, answers once. */
import { parentPort, workerData } from 'node:worker_threads';
import { HoldfastError, InputError } from '../errors.ts';
import { checkpointIn } from './checkpoint.ts';
import type { Method } from './result.ts';
import { searchNow } from './search.ts';
import type { Progress } from './sweep.ts';
import { modelOf, type PlainModel, type PlainResult, plainResult } from './transfer.ts';

export interface Task {
  readonly model: PlainModel;
  readonly range: number;
  readonly method: Method;
  readonly primesBelow?: number;
  /** Folder that keeps finished layers. */
  readonly checkpoint?: string;
}

export type Answer =
  | { readonly kind: 'progress'; readonly progress: Progress }
  | { readonly kind: 'result'; readonly result: PlainResult }
  | { readonly kind: 'error'; readonly name: string; readonly message: string; readonly input?: InputFault };

interface InputFault {
  readonly who: string;
  readonly expected: string;
  readonly got: string;
}

/** Milliseconds between two messages: often enough for a progress line, seldom enough to cost nothing. */
const INTERVAL = 100;

const port = parentPort;
if (port !== null) {
  const { model, checkpoint, ...options } = workerData as Task;
  let last = performance.now();
  const answer = (message: Answer) => port.postMessage(message);
  try {
    const result = searchNow(modelOf(model), {
      ...options,
      ...(checkpoint === undefined ? {} : { store: checkpointIn(checkpoint, model, options.range) }),
      onProgress(progress) {
        const now = performance.now();
        if (now - last < INTERVAL) return;
        last = now;
        answer({ kind: 'progress', progress });
      },
    });
    answer({ kind: 'result', result: plainResult(result) });
  } catch (error) {
    if (!(error instanceof HoldfastError) && !(error instanceof RangeError)) throw error;
    const input =
      error instanceof InputError
        ? { input: { who: error.who, expected: error.expected, got: error.got } }
        : {};
    answer({ kind: 'error', name: error.name, message: error.message, ...input });
  }
}
