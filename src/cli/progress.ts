/** The progress line of a long run: on a terminal only, overwritten in place, gone when the run is over. */
import type { Progress } from '../search/sweep.ts';
import type { CommandInput } from './command.ts';

export interface ProgressLine {
  readonly show: (progress: Progress) => void;
  readonly clear: () => void;
}

export function progressLine({
  interactive,
  note,
}: Pick<CommandInput, 'interactive' | 'note'>): ProgressLine {
  if (!interactive) return { show: () => {}, clear: () => {} };
  const started = performance.now();
  return {
    show({ stage, layer, done, candidates }) {
      const seconds = (performance.now() - started) / 1000;
      const left = done > 0.01 ? `, about ${(seconds * (1 / done - 1)).toFixed(0)} s left` : '';
      const where =
        stage === 'sweep'
          ? `outputs of range ${layer}, ${(100 * done).toFixed(0)} %${left}`
          : 'solving what is left';
      note(`\r\u001b[2Ksearching ${candidates.toLocaleString('en')} candidates: ${where}`);
    },
    clear: () => note('\r\u001b[2K'),
  };
}

/** The same for work that knows only its share done. */
export function shareLine(
  { interactive, note }: Pick<CommandInput, 'interactive' | 'note'>,
  what: string,
): { readonly show: (done: number) => void; readonly clear: () => void } {
  if (!interactive) return { show: () => {}, clear: () => {} };
  const started = performance.now();
  return {
    show(done) {
      const seconds = (performance.now() - started) / 1000;
      const left = done > 0.01 ? `, about ${(seconds * (1 / done - 1)).toFixed(0)} s left` : '';
      note(`\r\u001b[2K${what}: ${(100 * done).toFixed(0)} %${left}`);
    },
    clear: () => note('\r\u001b[2K'),
  };
}
