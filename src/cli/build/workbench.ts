/** Builds `dist/workbench.html`: page, style, program and thread in one file that opens from the file system. */
import { mkdir, writeFile } from 'node:fs/promises';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';
import { workbenchPage } from '../../report/workbench/frame.ts';

const FOLDER = join(dirname(fileURLToPath(import.meta.url)), '../../report/workbench');

async function bundle(entry: string, define: Record<string, string>): Promise<string> {
  const { outputFiles } = await build({
    entryPoints: [join(FOLDER, entry)],
    bundle: true,
    write: false,
    minify: true,
    format: 'iife',
    platform: 'browser',
    target: 'es2022',
    charset: 'ascii',
    define,
    logLevel: 'warning',
  });
  return outputFiles[0]!.text;
}

/** The document, whole. */
export async function buildWorkbench(): Promise<string> {
  const thread = await bundle('thread.ts', {});
  return workbenchPage(await bundle('page.ts', { THREAD: JSON.stringify(thread) }));
}

const [, program, target] = process.argv;
if (program === fileURLToPath(import.meta.url) && target !== undefined) {
  await mkdir(dirname(target), { recursive: true });
  await writeFile(target, await buildWorkbench());
}
