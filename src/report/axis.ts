import type { ScaleOptions } from 'chart.js';
import { significant } from '../core/figure.ts';
import { COLOURS } from './colours.ts';

/** Size of text in pictures, pixels. */
export const TEXT_PX = 13;
export const FONT_FAMILY = 'Quietcorner Sans';

type Place = 'bottom' | 'left' | 'right';

/** A linear axis with its quantity and unit. */
export function linearAxis(
  place: Place,
  title: string,
  range: { readonly min?: number; readonly max?: number; readonly grid?: boolean } = {},
): ScaleOptions<'linear'> {
  const { min, max, grid = true } = range;
  return {
    type: 'linear',
    position: place,
    ...(min === undefined ? {} : { min }),
    ...(max === undefined ? {} : { max }),
    title: titleOf(title),
    grid: { color: COLOURS.grid, drawOnChartArea: grid },
    border: { color: COLOURS.faint },
    ticks: {
      color: COLOURS.faint,
      font: { size: TEXT_PX, family: FONT_FAMILY },
      maxTicksLimit: place === 'bottom' ? 11 : 7,
      maxRotation: 0,
      includeBounds: false,
      callback: (value) => plain(Number(value)),
    },
  } as ScaleOptions<'linear'>;
}

/** A logarithmic axis that labels the decades, and 2 and 5 where there are few of them. */
export function logarithmicAxis(
  place: Place,
  title: string,
  range: { readonly min: number; readonly max: number },
): ScaleOptions<'logarithmic'> {
  const decades = Math.log10(range.max / range.min);
  const leading = decades < 2.2 ? [1, 2, 5] : [1];
  return {
    type: 'logarithmic',
    position: place,
    min: range.min,
    max: range.max,
    title: titleOf(title),
    grid: { color: COLOURS.grid },
    border: { color: COLOURS.faint },
    ticks: {
      color: COLOURS.faint,
      font: { size: TEXT_PX, family: FONT_FAMILY },
      autoSkip: false,
      maxRotation: 0,
      callback: (value) => {
        const number = Number(value);
        const digit = number / 10 ** Math.floor(Math.log10(number) + 1e-9);
        return leading.some((lead) => Math.abs(digit - lead) < 1e-6) ? plain(number) : null;
      },
    },
  } as ScaleOptions<'logarithmic'>;
}

/** A round number as short as it can be said. */
function plain(value: number): string {
  const rounded = Number(value.toPrecision(10));
  const size = Math.abs(rounded);
  if (rounded === 0 || (size >= 1e-4 && size < 1e6)) return String(rounded).replace('-', '−');
  return significant(rounded, 1);
}

function titleOf(text: string) {
  return { display: true, text, color: COLOURS.ink, font: { size: TEXT_PX, family: FONT_FAMILY } };
}
