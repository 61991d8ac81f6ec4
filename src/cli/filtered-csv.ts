import type { Channel } from '../core/recording/recording.ts';
import type { FilteredSink } from '../core/simulation/on-active.ts';
import { NumberWriter } from './number-writer.ts';
import { GrowingFile } from './output-files.ts';

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
  const writer = new NumberWriter();
  let first = true;
  const sink: FilteredSink = async (block, before, after) => {
    if (first) await file.write(`${header.map(field).join(',')}\n`);
    first = false;
    for (let i = 0; i < block.length; i++) {
      writer.seconds(block.startSeconds + i / rateHz);
      for (let c = 0; c < before.length; c++) {
        writer.value(before[c][i]);
        writer.value(after[c][i]);
      }
      writer.endLine();
    }
    await file.write(writer.take());
  };
  return { file, sink };
}

function title({ name, unit }: Channel, suffix: string): string {
  return `${name}${suffix}${unit === '' ? '' : ` [${unit}]`}`;
}

/** A field by RFC 4180; a name that a spreadsheet would take for a formula gets an apostrophe in front. */
function field(text: string): string {
  const safe = /^[=+\-@\t\r]/.test(text) ? `'${text}` : text;
  return /[",\r\n]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}
