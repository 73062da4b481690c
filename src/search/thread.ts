/** What threads need of the machine: their file, from the sources as well as from the built package, and memory. */
import { createRequire } from 'node:module';
import { freemem } from 'node:os';
import { pathToFileURL } from 'node:url';
import type { Worker } from 'node:worker_threads';

/**
 * What `new Worker` takes for the file. From source its thread needs a TypeScript loader of its own, whatever the host uses: the loader
 * of the development set-up is registered there first.
 *
 * @param file its URL, ending in `.js`
 * @param caller the `import.meta.url` of the caller, which tells the sources from the package
 */
export function threadSource(
  file: URL,
  caller: string,
  workerData: unknown,
): ConstructorParameters<typeof Worker> {
  if (!caller.endsWith('.ts')) return [file, { workerData }];
  const loader = createRequire(caller)
    .resolve('tsx/esm/api')
    .replace(/\.cjs$/, '.mjs');
  const source = file.href.replace(/\.js$/, '.ts');
  const script = `import(${JSON.stringify(pathToFileURL(loader).href)}).then(({ tsImport }) => tsImport(${JSON.stringify(source)}, ${JSON.stringify(source)}));`;
  return [script, { eval: true, workerData, execArgv: [] }];
}

/** Bytes that this process may still take, the limits of its container included. */
export function freeMemory(): number {
  const { availableMemory } = process as { availableMemory?: () => number };
  return availableMemory?.call(process) ?? freemem();
}
