/** The thread that searches: takes one task, tells its progress, answers once. */
import { parentPort, workerData } from 'node:worker_threads';
import { HoldfastError, InputError } from '../errors.ts';
import { type Extent, Lattice } from '../lattice/lattice.ts';
import type { LatticeModel } from '../model/lattice-model.ts';
import { checkpointIn } from './checkpoint.ts';
import { type AllWaves, allWaves, type WavesProgress } from './lattice/all-waves.ts';
import type { LatticeResult } from './lattice/result.ts';
import { type LatticeOptions, type LatticeProgress, searchLatticeNow } from './lattice/search.ts';
import type { Method } from './result.ts';
import { searchSector } from './search.ts';
import type { Sector } from './sectors.ts';
import type { Progress } from './sweep.ts';
import { modelOf, type PlainModel, type PlainPart, plainPart } from './transfer.ts';

/** One sector of a search. */
export interface Task {
  readonly model: PlainModel;
  readonly sector: Sector;
  readonly range: number;
  readonly method: Method;
  readonly primesBelow?: number;
  /** Folder that keeps finished layers. */
  readonly checkpoint?: string;
}

/** The same for a model on a lattice. */
export interface LatticeTask {
  readonly lattice: Omit<LatticeModel, 'lattice'> & {
    readonly lattice: { readonly cell: number; readonly extents: readonly Extent[] };
  };
  readonly options: Omit<LatticeOptions, 'onProgress'>;
}

/** All wave numbers of a chain at once. */
export interface WavesTask extends Pick<LatticeTask, 'lattice'> {
  readonly wavesOfRange: number;
}

export type Answer<P, R> =
  | { readonly kind: 'progress'; readonly progress: P }
  | { readonly kind: 'result'; readonly result: R }
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
  const task = workerData as Task | LatticeTask | WavesTask;
  let last = performance.now();
  const answer = (
    message: Answer<Progress | LatticeProgress | WavesProgress, PlainPart | LatticeResult | AllWaves>,
  ) => port.postMessage(message);
  const onProgress = (progress: Progress | LatticeProgress | WavesProgress) => {
    const now = performance.now();
    if (now - last < INTERVAL) return;
    last = now;
    answer({ kind: 'progress', progress });
  };
  try {
    if ('lattice' in task) {
      const { cell, extents } = task.lattice.lattice;
      const model = { ...task.lattice, lattice: new Lattice(cell, extents) };
      const result =
        'wavesOfRange' in task
          ? allWaves(model, task.wavesOfRange, onProgress)
          : searchLatticeNow(model, { ...task.options, onProgress });
      answer({ kind: 'result', result });
    } else {
      const { model, checkpoint, sector, ...options } = task;
      const part = searchSector(modelOf(model), sector, {
        ...options,
        ...(checkpoint === undefined
          ? {}
          : { store: (s: Sector) => checkpointIn(checkpoint, model, options.range, s) }),
        onProgress,
      });
      answer({ kind: 'result', result: plainPart(part) });
    }
  } catch (error) {
    if (!(error instanceof HoldfastError) && !(error instanceof RangeError)) throw error;
    const input =
      error instanceof InputError
        ? { input: { who: error.who, expected: error.expected, got: error.got } }
        : {};
    answer({ kind: 'error', name: error.name, message: error.message, ...input });
  }
}
