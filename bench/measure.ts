/** Honest measurement: fresh processes, median ± MAD, peak memory, the machine, and a warning where the clock is too coarse. */
import { spawn } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { cpus, totalmem } from 'node:os';

export interface Spread {
  readonly median: number;
  /** Median absolute deviation from the median. */
  readonly deviation: number;
  readonly samples: number;
}

export function spreadOf(values: readonly number[]): Spread {
  const median = medianOf(values);
  return {
    median,
    deviation: medianOf(values.map((value) => Math.abs(value - median))),
    samples: values.length,
  };
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  if (sorted.length === 0) return Number.NaN;
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle]! : (sorted[middle - 1]! + sorted[middle]!) / 2;
}

/** The smallest step of the clock that is ever seen, in seconds. */
export function clockGrain(): number {
  let grain = Number.POSITIVE_INFINITY;
  for (let i = 0; i < 1000; i++) {
    const start = process.hrtime.bigint();
    let now = start;
    while (now === start) now = process.hrtime.bigint();
    grain = Math.min(grain, Number(now - start) / 1e9);
  }
  return grain;
}

/** A time of fewer than this many grains says little. */
const GRAINS = 100;

export function grainWarning(seconds: number, grain: number): string | undefined {
  return seconds < GRAINS * grain
    ? `${(seconds * 1e6).toPrecision(2)} µs is less than ${GRAINS} grains of the clock (${(grain * 1e9).toFixed(0)} ns)`
    : undefined;
}

export function machine(): string {
  const processors = cpus();
  const memory = (totalmem() / 2 ** 30).toFixed(0);
  return `${processors[0]?.model.trim() ?? 'unknown processor'}, ${processors.length} cores, ${memory} GB; Node ${process.versions.node}, ${process.platform} ${process.arch}`;
}

/**
 * The peak memory of this process in bytes. The kernel's own high-water mark of this address space where there is one:
 * `maxRSS` of a process includes that of its parent at the time of the start.
 */
export function peakMemory(): number {
  try {
    const line = /^VmHWM:\s+(\d+) kB$/m.exec(readFileSync('/proc/self/status', 'utf8'));
    if (line !== null) return Number(line[1]) * 1024;
  } catch {
    // No /proc on this platform.
  }
  return process.resourceUsage().maxRSS * 1024;
}

export interface Outcome {
  readonly status: number | null;
  readonly stdout: string;
  readonly stderr: string;
  readonly timedOut: boolean;
}

/** Runs a program to its end or to the limit; never throws for what the program does. */
export function run(
  program: string,
  args: readonly string[],
  options: { readonly seconds: number; readonly gigabytes?: number; readonly input?: string },
): Promise<Outcome> {
  // Address space is limited by the shell's own means; not for Node, which reserves far more than it uses.
  const limited = options.gigabytes !== undefined;
  const command = limited ? 'bash' : program;
  const all = limited
    ? ['-c', `ulimit -v ${Math.round(options.gigabytes! * 2 ** 20)}; exec "$0" "$@"`, program, ...args]
    : [...args];
  return new Promise((resolve) => {
    const child = spawn(command, all, { stdio: ['pipe', 'pipe', 'pipe'] });
    let stdout = '';
    let stderr = '';
    let timedOut = false;
    const timer = setTimeout(() => {
      timedOut = true;
      child.kill('SIGKILL');
    }, options.seconds * 1000);
    child.stdout.on('data', (text: Buffer) => {
      stdout += text.toString();
    });
    child.stderr.on('data', (text: Buffer) => {
      stderr += text.toString();
    });
    child.stdin.on('error', () => {});
    child.stdin.end(options.input ?? '');
    child.on('error', (error) => {
      clearTimeout(timer);
      resolve({ status: null, stdout, stderr: error.message, timedOut: false });
    });
    child.on('close', (status) => {
      clearTimeout(timer);
      resolve({ status, stdout, stderr, timedOut });
    });
  });
}
