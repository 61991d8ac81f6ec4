import { corner } from '../figure.ts';
import type { Filter } from './filter.ts';

/** Families as people call them. */
export const FAMILY_NAMES: Readonly<Record<Filter['family'], string>> = {
  rc: 'RC',
  butterworth: 'Butterworth',
  bessel: 'Bessel',
};

/** A filter as people say it: `one-pole RC low-pass, corner 3.0 Hz` or `Butterworth low-pass, order 3, corner 4.1 Hz`. */
export function filterName({ shape, family, order, cornerHz }: Filter): string {
  const at = `corner ${corner(cornerHz)}`;
  if (family === 'rc') return `one-pole ${FAMILY_NAMES.rc} ${shape}, ${at}`;
  return `${FAMILY_NAMES[family]} ${shape}, order ${order}, ${at}`;
}
