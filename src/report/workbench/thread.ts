/** The thread of the workbench: searches, writes certificates and checks them, so that the page stays alive. */
import { certificateOf } from '../../certificate/certificate.ts';
import { check } from '../../check/check.ts';
import { HoldfastError, LimitError } from '../../errors.ts';
import { parseModel } from '../../model/formula.ts';
import { estimate } from '../../search/estimate.ts';
import { methodFor } from '../../search/plan.ts';
import type { SearchResult } from '../../search/result.ts';
import { searchNow } from '../../search/search.ts';
import { resultToJson } from '../json.ts';
import { latexResult } from '../latex.ts';
import { reportBody, reportPage } from '../page.ts';
import { pictureOfResult } from '../picture.ts';
import { grouped, verdictOf } from '../verdict.ts';
import type { Reply, Request, SearchRequest } from './messages.ts';

/** Milliseconds between two reports of progress. */
const INTERVAL = 100;

let last: SearchResult | undefined;
let running = new AbortController();

function reply(message: Reply): void {
  postMessage(message);
}

function progress(what: string): (done: number) => void {
  let told = 0;
  return (done) => {
    const now = performance.now();
    if (now - told < INTERVAL) return;
    told = now;
    reply({ kind: 'progress', what, done });
  };
}

function runSearch({ formula, cell, parameters, range, memory }: SearchRequest): void {
  last = undefined;
  const model = parseModel(formula, { cell, parameters });
  // Growth needs what the answer needs, which nobody knows beforehand.
  const need = methodFor(model, range) === 'growth' ? undefined : estimate(model, range);
  if (need !== undefined && need.bytes > memory)
    throw new LimitError(
      `search: range ${range} needs about ${(need.bytes / 1e9).toPrecision(2)} GB, and this page may use ${(memory / 1e9).toPrecision(2)} GB. The command takes longer ranges`,
    );
  const tell = progress(
    need === undefined ? 'Searching' : `Searching ${grouped(need.candidates)} candidates`,
  );
  const result = searchNow(model, { range, onProgress: ({ done }) => tell(done) });
  last = result;
  reply({
    kind: 'found',
    verdict: verdictOf(result),
    body: reportBody(result),
    files: {
      report: reportPage(result),
      json: `${JSON.stringify(resultToJson(result), null, 2)}\n`,
      latex: latexResult(result),
      picture: pictureOfResult(result),
    },
  });
}

async function certify(signal: AbortSignal): Promise<void> {
  if (last === undefined) throw new LimitError('certificate: search first');
  const result = last;
  const text = await certificateOf(result, { signal, onProgress: progress('writing the certificate') });
  const verdict = await check(text, { signal, onProgress: progress('checking the certificate') });
  if (verdict.status !== 'accepted') throw new LimitError(`certificate: ${verdict.reason}`);
  const { id } = verdict;
  reply({
    kind: 'certified',
    id,
    text,
    files: { report: reportPage(result, { certificate: { id, text } }) },
  });
}

async function checkText(text: string, signal: AbortSignal): Promise<void> {
  const verdict = await check(text, { signal, onProgress: progress('checking the certificate') });
  const { status } = verdict;
  reply({
    kind: 'checked',
    status,
    text: verdict.status === 'accepted' ? `sha256:${verdict.id}\n${verdict.statement}` : verdict.reason,
  });
}

addEventListener('message', async ({ data }: MessageEvent<Request>) => {
  if (data.kind === 'cancel') {
    running.abort();
    return;
  }
  running = new AbortController();
  const { signal } = running;
  try {
    if (data.kind === 'search') runSearch(data);
    else if (data.kind === 'certify') await certify(signal);
    else await checkText(data.text, signal);
  } catch (error) {
    if (signal.aborted) reply({ kind: 'failed', text: 'Cancelled. Nothing was kept of it.' });
    else if (error instanceof HoldfastError) reply({ kind: 'failed', text: error.message });
    else if (error instanceof RangeError) reply({ kind: 'failed', text: `out of memory: ${error.message}` });
    else throw error;
  }
});
