/** From the result of a search to a certificate: a text from which anyone can check the result without trusting the search. */
import { CancelledError, LimitError, VerificationError } from '../errors.ts';
import { type Field, PRIME_BOUND, primeField, primesBelow } from '../linear/field.ts';
import type { Hamiltonian } from '../model/hamiltonian.ts';
import type { Method, SearchResult } from '../search/result.ts';
import { independentRows, tooLarge } from './core.ts';
import { documentText, type Evidence } from './document.ts';
import { growthBound, isByGrowth } from './growth.ts';
import { Replay } from './replay.ts';

export interface CertificateOptions {
  /** Called about every 50 milliseconds with the share of the work done, 0 … 1. */
  readonly onProgress?: (done: number) => void;
  readonly signal?: AbortSignal;
}

/** Primes tried before giving up. Two in a row have never been seen to fail. */
const MAX_ATTEMPTS = 12;

/** Outputs between two reports of progress. */
const CHUNK = 2 ** 16;

/** Sweeps of one layer in a row, passes over all layers, and sweeps in all (a checker bounds them). */
const MAX_VISITS = 8;
const MAX_PASSES = 24;
const MAX_SWEEPS = 120;

/** Outputs that all sweeps together may visit before none is repeated: half of what the checker allows. */
const MAX_VISITED = 2 ** 30;

/** Longest candidate, and longest string that a row touches, in spins: the checker takes no longer ones. */
const MAX_SPINS = 13;
const MAX_PACKED = 16;

/**
 * A layer is swept again while at least one output in so many is open. A sweep costs a checker every output of the layer; it saves
 * the elimination rows, whose cost grows with their square and more (mixed-field Ising, range 10: 6,697 classes left after two
 * passes over everything, 274 by this rule, for the same number of visits).
 */
const WORTH_A_SWEEP = 256;

/** Rows that may be left open at any time: each is a number in memory, and three rows to one are listed in the end. */
const MAX_OPEN = 2 ** 23;

/**
 * Known before a search starts. A core that turns out too large is known only afterwards.
 *
 * @throws LimitError where no certificate can be written, or none that the checker takes
 */
export function assertCertifiable(h: Hamiltonian, range: number, method: Method = 'exhaustive'): void {
  if (isByGrowth(h, range, method)) return;
  const spins = h.chain.cell * range;
  if (spins > MAX_SPINS)
    throw new LimitError(
      `certificate: candidates of ${spins} spins; the checker takes up to ${MAX_SPINS}, so a smaller range is needed`,
    );
  if (h.chain.cell * (range + 2 * h.range - 2) > MAX_PACKED)
    throw new LimitError(
      `certificate: range ${range} with cells of ${h.chain.cell} spins and an interaction of ${h.range} cells needs strings of more than ${MAX_PACKED} spins`,
    );
}

/** Bytes that the writing of a certificate, and its check, will need at the peak: two 32-bit words a packed string. */
export function certificateBytes({
  hamiltonian,
  range,
  method,
}: Pick<SearchResult, 'hamiltonian' | 'range'> & Partial<Pick<SearchResult, 'method'>>): number {
  if (isByGrowth(hamiltonian, range, method)) return 200e6;
  return 90e6 + 8 * 4 ** (hamiltonian.chain.cell * range);
}

/**
 * The certificate of a search, as canonical text; docs/certificate.md describes it. The same result gives the same bytes.
 *
 * Gives way to other work of the program about every 50 milliseconds. Cost: about that of the search; memory: 8 bytes a packed
 * candidate.
 *
 * @throws LimitError where the evidence would be too large or the strings do not fit; CancelledError when `signal` fires
 */
export async function certificateOf(
  result: SearchResult,
  { onProgress, signal }: CertificateOptions = {},
): Promise<string> {
  const steps = certifying(result);
  let last = Date.now();
  for (;;) {
    if (signal?.aborted) throw new CancelledError('certificate');
    const step = steps.next();
    if (step.done) return step.value;
    if (Date.now() - last < 50) continue;
    onProgress?.(step.value);
    await new Promise((resolve) => setTimeout(resolve, 0));
    last = Date.now();
  }
}

/** As `certificateOf`, in one go. */
export function certificateNow(result: SearchResult): string {
  const steps = certifying(result);
  for (;;) {
    const step = steps.next();
    if (step.done) return step.value;
  }
}

/** Yields the share of the work done. */
function* certifying(result: SearchResult): Generator<number, string> {
  const { hamiltonian, range, charges, method } = result;
  assertCertifiable(hamiltonian, range, method);
  if (isByGrowth(hamiltonian, range, method)) {
    const field = primeField(result.primes[0]!);
    if ((yield* growthBound(hamiltonian, range, field)) === charges.length)
      return documentText(result, { prime: field.p });
    // The bound by growth alone is too weak here: only a visit of every candidate will do.
    assertCertifiable(hamiltonian, range);
  }
  let attempts = 0;
  for (const p of primesBelow(result.primes[0]! + 1)) {
    if (attempts++ === MAX_ATTEMPTS) break;
    const evidence = yield* evidenceModulo(result, primeField(p));
    if (evidence !== undefined) return documentText(result, evidence);
  }
  throw new VerificationError(
    `certificate: no prime below ${PRIME_BOUND} proved the dimension ${result.charges.length}`,
  );
}

/** Undefined when the prime is unlucky: the rank, or that of the charges' leading parts, is smaller than over the rationals. */
function* evidenceModulo(result: SearchResult, field: Field): Generator<number, Evidence | undefined> {
  const { hamiltonian, range, charges, candidates } = result;
  const unit = 4 ** hamiltonian.chain.cell;
  const layers = range + hamiltonian.range - 1;
  const replay = new Replay(hamiltonian, range, field);
  const sweeps: [number, number][] = [];
  const wanted = candidates - charges.length;
  /** By range of the outputs: rows that still tie three classes or more. */
  const open = new Map<number, readonly number[]>();
  let openCount = 0;
  let visited = 0;
  for (let pass = 0; pass < MAX_PASSES; pass++) {
    const atStart = replay.uses;
    for (let cells = layers; cells >= 1; cells--)
      for (let visit = 0; visit < MAX_VISITS; visit++) {
        const before = replay.uses;
        const known = open.get(cells);
        if (
          known !== undefined &&
          (known.length * WORTH_A_SWEEP < unit ** cells ||
            sweeps.length >= MAX_SWEEPS ||
            visited + unit ** cells > MAX_VISITED)
        )
          break;
        visited += unit ** cells;
        const left: number[] = [];
        const first = known === undefined ? unit ** (cells - 1) : 0;
        const end = known === undefined ? unit ** cells : known.length;
        for (let from = first; from < end; from += CHUNK) {
          const to = Math.min(end, from + CHUNK);
          const chunk =
            known === undefined
              ? replay.sweep(cells, from, to)
              : replay.sweepAgain(cells, known.slice(from, to));
          for (const output of chunk) left.push(output);
          if (openCount + left.length > MAX_OPEN) throw tooLarge(MAX_OPEN);
          yield pass > 0 || visit > 0 ? 0.8 : 0.8 * (1 - unit ** (cells - layers) * (1 - from / end));
        }
        openCount += left.length - (known?.length ?? 0);
        open.set(cells, left);
        if (replay.uses > before) sweeps.push([cells, replay.uses - before]);
        if (replay.uses === before || left.length === 0) break;
      }
    if (replay.uses === atStart) break;
  }
  const core = replay.core(open);
  const steps = independentRows(core.rows, core.columns, wanted - replay.uses, field);
  for (;;) {
    const step = steps.next();
    if (!step.done) {
      yield 0.8 + 0.2 * step.value;
      continue;
    }
    if (replay.uses + step.value.length !== wanted) return undefined;
    return { prime: field.p, sweeps, pivots: step.value.map((i) => core.outputs[i]!) };
  }
}
