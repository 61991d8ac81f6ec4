import type { Channel } from '../core/recording/recording.ts';
import type { FilteredSink } from '../core/simulation/on-active.ts';
import { GrowingFile } from './output-files.ts';

/** Digits of a filtered value: beyond any converter, short of the noise of the last bits. */
const DIGITS = 9;

/**
 * CSV of the filtered recording: time in seconds from the first sample, then raw and filtered values of every channel.
 * Give `sink` to the study, then `file.keep()` or `file.drop()`.
 */
export function filteredCsv(
  path: string,
  channels: readonly Channel[],
  rateHz: number,
): { file: GrowingFile; sink: FilteredSink } {
  const file = new GrowingFile(path);
  const header = ['time [s]', ...channels.flatMap((channel) => [title(channel, ''), title(channel, ' filtered')])];
  let first = true;
  const sink: FilteredSink = async (block, before, after) => {
    const lines = Array.from({ length: block.length }, (_, i) => {
      const seconds = Number((block.startSeconds + i / rateHz).toFixed(9));
      const values = before.map((raw, c) => `,${rounded(raw[i])},${rounded(after[c][i])}`);
      return `${seconds}${values.join('')}\n`;
    });
    if (first) lines.unshift(`${header.map(field).join(',')}\n`);
    first = false;
    await file.write(lines.join(''));
  };
  return { file, sink };
}

function rounded(value: number): number {
  return Number(value.toPrecision(DIGITS));
}

function title({ name, unit }: Channel, suffix: string): string {
  return `${name}${suffix}${unit === '' ? '' : ` [${unit}]`}`;
}

/** A field by RFC 4180; a name that a spreadsheet would take for a formula gets an apostrophe in front. */
function field(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
