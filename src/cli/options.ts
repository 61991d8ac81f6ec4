import type { Band } from '../core/spectrum/spectrum.ts';
import { UserError } from '../core/user-error.ts';

/** A number above zero; throws UserError('usage') that names the option. */
export function positive(option: string): (text: string) => number {
  return (text) => {
    const value = Number(text);
    if (text.trim() !== '' && Number.isFinite(value) && value > 0) return value;
    throw new UserError('usage', `${option} needs a number above zero, not "${text}".`);
  };
}

/** `LOW-HIGH` in Hz, such as `0-1` or `0.2-3.5`; throws UserError('usage'). */
export function band(option: string): (text: string) => Band {
  return (text) => {
    const match = /^\s*([\d.]+(?:e[+-]?\d+)?)\s*-\s*([\d.]+(?:e[+-]?\d+)?)\s*$/i.exec(text);
    const lowHz = Number(match?.[1]);
    const highHz = Number(match?.[2]);
    if (Number.isFinite(lowHz) && Number.isFinite(highHz) && highHz > lowHz) return { lowHz, highHz };
    throw new UserError(
      'usage',
      `${option} needs two frequencies in Hz, the lower one first, such as 0-1.5, not "${text}".`,
    );
  };
}

/** Collects an option that may be given several times. */
export function collect(text: string, before: readonly string[] | undefined): readonly string[] {
  return [...(before ?? []), text];
}
