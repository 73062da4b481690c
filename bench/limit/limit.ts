/** Builds and runs the compiled pass (`pass.cpp`), where there is a compiler. */
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { textFromWord } from '../../src/algebra/word.ts';
import type { Hamiltonian } from '../../src/model/hamiltonian.ts';
import { run } from '../measure.ts';

/** The step of its clock, in seconds. */
export const PASS_GRAIN = 1e-6;

export interface Pass {
  /** Of the processor. */
  readonly seconds: number;
  readonly nonzeros: number;
  readonly checksum: string;
}

/** Returns the path of the program, or why there is none. */
export async function buildPass(): Promise<{ readonly program: string } | { readonly missing: string }> {
  const program = join(mkdtempSync(join(tmpdir(), 'holdfast-limit-')), 'pass');
  const source = new URL('pass.cpp', import.meta.url).pathname;
  const built = await run('g++', ['-O2', '-std=c++20', '-o', program, source], { seconds: 60 });
  return built.status === 0 ? { program } : { missing: `no compiled pass: g++: ${built.stderr.trim()}` };
}

export async function runPass(
  program: string,
  h: Hamiltonian,
  range: number,
  seconds = 600,
): Promise<Pass | undefined> {
  const words = [...h.density.numerators.keys()].map((word) => textFromWord(word));
  const { status, stdout } = await run(program, [`${h.chain.cell}`, `${range}`, ...words], { seconds });
  return status === 0 ? (JSON.parse(stdout) as Pass) : undefined;
}
