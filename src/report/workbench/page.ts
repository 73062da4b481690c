/** The workbench: one page, one thread. All text that comes from outside is set as text, never as markup. */

import { HoldfastError, InputError, show } from '../../errors.ts';
import { CATALOGUE } from '../../model/catalogue/index.ts';
import { parseModel } from '../../model/formula.ts';
import { estimate } from '../../search/estimate.ts';
import { methodFor } from '../../search/plan.ts';
import { grouped } from '../verdict.ts';
import type { Files, Reply, Request, SearchRequest } from './messages.ts';

/** The thread's program, put in by the build. */
declare const THREAD: string;

/** As in the checker: a longer file is no certificate. */
const MAX_CERTIFICATE = 2 ** 26;
/** What a tab may use where the browser does not say how much memory there is. */
const MEMORY = 2e9;

function element<T extends HTMLElement>(id: string, type: new () => T): T {
  const found = document.getElementById(id);
  if (!(found instanceof type)) throw new Error(`the page has no #${id}`);
  return found;
}

const form = element('model', HTMLFormElement);
const formula = element('formula', HTMLTextAreaElement);
const parameters = element('parameters', HTMLInputElement);
const cell = element('cell', HTMLInputElement);
const range = element('range', HTMLInputElement);
const examples = element('examples', HTMLSelectElement);
const needs = element('needs', HTMLElement);
const start = element('start', HTMLButtonElement);
const cancel = element('cancel', HTMLButtonElement);
const bar = element('bar', HTMLProgressElement);
const status = element('status', HTMLElement);
const problem = element('problem', HTMLElement);
const saves = element('saves', HTMLElement);
const certificateButton = element('save-certificate', HTMLButtonElement);
const report = element('report', HTMLElement);
const file = element('file', HTMLInputElement);
const verdict = element('verdict', HTMLElement);

let thread = startThread();
let busy: Request['kind'] | undefined;
let files: Partial<Files & { certificate: string }> = {};
let certificateId = '';

function startThread(): Worker {
  const url = URL.createObjectURL(new Blob([THREAD], { type: 'text/javascript' }));
  const worker = new Worker(url);
  URL.revokeObjectURL(url);
  worker.addEventListener('message', ({ data }: MessageEvent<Reply>) => receive(data));
  worker.addEventListener('error', (event) => {
    event.preventDefault();
    finish();
    complain(`The search stopped: ${event.message}. A smaller range needs less memory.`);
    thread = startThread();
  });
  return worker;
}

function send(request: Request): void {
  busy = request.kind;
  problem.textContent = '';
  problem.hidden = true;
  start.disabled = true;
  file.disabled = true;
  cancel.disabled = false;
  bar.hidden = false;
  bar.removeAttribute('value');
  thread.postMessage(request);
}

function finish(): void {
  busy = undefined;
  start.disabled = false;
  file.disabled = false;
  cancel.disabled = true;
  bar.hidden = true;
}

function complain(text: string): void {
  problem.textContent = text;
  problem.hidden = false;
  status.textContent = '';
}

function receive(reply: Reply): void {
  if (busy === undefined) return;
  switch (reply.kind) {
    case 'progress':
      bar.value = reply.done;
      status.textContent = `${reply.what}: ${Math.floor(100 * reply.done)} %`;
      return;
    case 'found':
      finish();
      files = reply.files;
      report.innerHTML = reply.body;
      report.hidden = false;
      saves.hidden = false;
      certificateButton.hidden = false;
      status.textContent = reply.verdict;
      return;
    case 'certified':
      finish();
      files = { ...files, ...reply.files, certificate: reply.text };
      certificateId = reply.id;
      status.textContent = `Certificate written and accepted: sha256:${reply.id}`;
      save('certificate');
      return;
    case 'checked':
      finish();
      tellVerdict(reply.status, reply.text);
      return;
    case 'failed':
      finish();
      complain(reply.text);
  }
}

const VERDICTS = { accepted: 'Accepted', rejected: 'Rejected', malformed: 'Not a certificate' } as const;

function tellVerdict(kind: keyof typeof VERDICTS, text: string): void {
  verdict.hidden = false;
  verdict.dataset['verdict'] = kind;
  const word = document.createElement('strong');
  word.textContent = `${VERDICTS[kind]}. `;
  verdict.replaceChildren(word, text);
  status.textContent = `Certificate checked: ${VERDICTS[kind].toLowerCase()}.`;
}

/** @throws InputError for a setting that is none, or a number that is no whole number */
function requestFromForm(): SearchRequest {
  const values: Record<string, string> = {};
  for (const part of parameters.value.split(/[,;]/).filter((p) => p.trim() !== '')) {
    const [name, value, more] = part.split('=');
    if (value === undefined || more !== undefined)
      throw new InputError('parameters', 'name=value', show(part.trim()));
    values[name!.trim()] = value.trim();
  }
  const whole = (input: HTMLInputElement, who: string): number => {
    if (!/^[1-9]\d{0,2}$/.test(input.value))
      throw new InputError(who, 'a whole number, 1 or more', show(input.value));
    return Number(input.value);
  };
  const { deviceMemory } = navigator as { deviceMemory?: number };
  return {
    kind: 'search',
    formula: formula.value,
    parameters: values,
    cell: whole(cell, 'spins a cell'),
    range: whole(range, 'range'),
    memory: deviceMemory === undefined ? MEMORY : Math.max(5e8, deviceMemory * 4e8),
  };
}

/** Says what the search will need, or what is wrong with the formula; typing is never interrupted. */
function predict(): void {
  try {
    const request = requestFromForm();
    const model = parseModel(request.formula, request);
    if (methodFor(model, request.range) === 'growth') {
      needs.textContent = 'Longer than an exhaustive search: needs what the answer needs.';
      return;
    }
    const need = estimate(model, request.range);
    const time = need.seconds < 1 ? 'less than a second' : `about ${need.seconds.toPrecision(1)} s`;
    needs.textContent = `${grouped(need.candidates)} candidates, about ${Math.ceil(need.bytes / 1e6)} MB, ${time}`;
  } catch (error) {
    if (!(error instanceof HoldfastError)) throw error;
    needs.textContent = error.message.split('\n')[0]!;
  }
}

function search(): void {
  if (busy !== undefined) return;
  try {
    const request = requestFromForm();
    // The formula is read here too: a mistake is told at once, and the last result stays.
    parseModel(request.formula, request);
    status.textContent = 'Searching';
    send(request);
  } catch (error) {
    if (!(error instanceof HoldfastError)) throw error;
    complain(error.message);
    (error instanceof InputError && error.who === 'range' ? range : formula).focus();
  }
}

function stop(): void {
  if (busy === undefined) return;
  if (busy !== 'search') {
    thread.postMessage({ kind: 'cancel' } satisfies Request);
    return;
  }
  thread.terminate();
  thread = startThread();
  finish();
  complain('Cancelled. Nothing was kept of it.');
  // The thread that could have proved the last result is gone; what is shown of it stays.
  certificateButton.hidden = files.certificate === undefined;
  start.focus();
}

const NAMES: Readonly<Record<keyof Files | 'certificate', readonly [name: string, type: string]>> = {
  report: ['report.html', 'text/html'],
  json: ['result.json', 'application/json'],
  latex: ['charges.tex', 'application/x-tex'],
  picture: ['charges.svg', 'image/svg+xml'],
  certificate: ['certificate.json', 'application/json'],
};

function save(kind: keyof typeof NAMES): void {
  const text = files[kind];
  if (text === undefined) return;
  const [name, type] = NAMES[kind];
  const link = document.createElement('a');
  link.href = URL.createObjectURL(new Blob([text], { type }));
  link.download = kind === 'certificate' ? `certificate-${certificateId.slice(0, 12)}.json` : name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(link.href), 10_000);
}

async function checkFile(chosen: File | undefined): Promise<void> {
  if (chosen === undefined || busy !== undefined) return;
  if (chosen.size > MAX_CERTIFICATE) {
    tellVerdict('malformed', `${chosen.name} has more than ${MAX_CERTIFICATE} bytes.`);
    return;
  }
  // A byte a character: the checker refuses what is not ASCII.
  const text = new TextDecoder('latin1').decode(await chosen.arrayBuffer());
  status.textContent = `Checking ${chosen.name}`;
  send({ kind: 'check', text });
}

for (const entry of CATALOGUE) {
  const option = document.createElement('option');
  option.value = entry.id;
  option.textContent = entry.name;
  examples.append(option);
}
examples.addEventListener('change', () => {
  const entry = CATALOGUE.find((e) => e.id === examples.value);
  if (entry === undefined) return;
  formula.value = entry.formula;
  cell.value = String(entry.cell);
  parameters.value = Object.entries(entry.parameters)
    .map(([name, value]) => `${name}=${value}`)
    .join(', ');
  range.value = String(entry.cell === 1 ? 5 : 3);
  predict();
});
form.addEventListener('submit', (event) => {
  event.preventDefault();
  search();
});
form.addEventListener('input', predict);
cancel.addEventListener('click', stop);
saves.addEventListener('click', ({ target }) => {
  const kind = target instanceof HTMLElement ? target.dataset['save'] : undefined;
  if (kind === undefined || !(kind in NAMES)) return;
  if (kind !== 'certificate' || files.certificate !== undefined) save(kind as keyof typeof NAMES);
  else if (busy === undefined) {
    status.textContent = 'Writing the certificate';
    send({ kind: 'certify' });
  }
});
file.addEventListener('change', () => {
  void checkFile(file.files?.[0]);
  // The same file may be chosen again.
  file.value = '';
});
addEventListener('dragover', (event) => {
  event.preventDefault();
  document.body.classList.add('dragging');
});
addEventListener('dragleave', () => document.body.classList.remove('dragging'));
addEventListener('drop', (event) => {
  event.preventDefault();
  document.body.classList.remove('dragging');
  void checkFile(event.dataTransfer?.files[0]);
});
addEventListener('keydown', (event) => {
  if (event.key === 'Enter' && (event.ctrlKey || event.metaKey)) search();
  else if (event.key === 'Escape') stop();
});
predict();
