/** One point of a grid in a process of its own: `point.ts '{"formula": …, "cell": …, "range": …}'` prints one JSON line. */
import { parseModel } from '../src/model/formula.ts';
import type { Method } from '../src/search/result.ts';
import { searchNow } from '../src/search/search.ts';
import { peakMemory } from './measure.ts';

export interface PointRequest {
  readonly formula: string;
  readonly cell: number;
  readonly range: number;
  readonly method?: Method;
}

export interface PointAnswer {
  /**
   * Of the one call, nothing warmed up: wall time, or processor time of all threads where that is less, since then the call had to
   * wait for the processor. On a quiet machine the search is one busy thread, and wall time is the lesser.
   */
  readonly seconds: number;
  readonly dimension: number;
  readonly candidates: number;
  /** Peak of the whole process, and what the process had before the search began; bytes. */
  readonly peak: number;
  readonly before: number;
}

const request = JSON.parse(process.argv[2]!) as PointRequest;
const hamiltonian = parseModel(request.formula, { cell: request.cell });
const before = peakMemory();
const processor = process.cpuUsage();
const start = process.hrtime.bigint();
const result = searchNow(hamiltonian, {
  range: request.range,
  ...(request.method === undefined ? {} : { method: request.method }),
});
const wall = Number(process.hrtime.bigint() - start) / 1e9;
const used = process.cpuUsage(processor);
const answer: PointAnswer = {
  seconds: Math.min(wall, (used.user + used.system) / 1e6),
  dimension: result.charges.length,
  candidates: result.candidates,
  peak: peakMemory(),
  before,
};
console.log(JSON.stringify(answer));
