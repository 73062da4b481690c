/** Options that are numbers. */
import { InputError, show } from '../errors.ts';
import type { CommandInput } from './command.ts';

export function rangeOption({ values }: Pick<CommandInput, 'values'>): number {
  const text = values['range'];
  if (typeof text !== 'string' || !/^[1-9]\d{0,3}$/.test(text))
    throw new InputError(
      '--range',
      'a whole number of cells, 1 or more',
      text === undefined ? 'no range' : show(text),
    );
  return Number(text);
}

/** @param digits the most that the number may have */
export function wholeOption(
  { values }: Pick<CommandInput, 'values'>,
  name: string,
  digits = 6,
): number | undefined {
  const text = values[name];
  if (text === undefined) return undefined;
  if (typeof text !== 'string' || !/^[1-9]\d*$/.test(text) || text.length > digits)
    throw new InputError(`--${name}`, 'a whole number, 1 or more', show(text));
  return Number(text);
}

export function gigabytesOption({ values }: Pick<CommandInput, 'values'>): number | undefined {
  const text = values['memory'];
  if (text === undefined) return undefined;
  if (typeof text !== 'string' || !/^\d{1,6}(\.\d+)?$/.test(text) || Number(text) === 0)
    throw new InputError('--memory', 'gigabytes, a positive number', show(text));
  return Number(text) * 1e9;
}
