import { openRecording } from '../../../src/core/recording/open.ts';
import type { ReadingOptions, Recording, RecordingFacts } from '../../../src/core/recording/recording.ts';
import { memorySource } from '../../memory-source.ts';

/** One run as it was delivered, blocks put together. */
export interface WholeRun {
  readonly startSeconds: number;
  readonly channels: readonly (readonly number[])[];
}

/** Reads text or bytes as a recording named made.csv. */
export async function read(
  content: string | Uint8Array,
  options: ReadingOptions & { readonly chunkBytes?: number } = {},
): Promise<{ facts: RecordingFacts; runs: WholeRun[] }> {
  const { chunkBytes, ...reading } = options;
  const recording = await openRecording(memorySource(content, chunkBytes), reading);
  return { facts: recording.facts, runs: await wholeRuns(recording) };
}

/** Plays a recording once and puts its blocks together; throws where blocks do not follow on each other. */
export async function wholeRuns({ facts, blocks }: Recording): Promise<WholeRun[]> {
  const runs: { startSeconds: number; channels: number[][] }[] = [];
  for await (const block of blocks()) {
    if (block.firstSample === 0)
      runs.push({ startSeconds: block.startSeconds, channels: block.channels.map(() => []) });
    const run = runs[block.run];
    if (runs.length !== block.run + 1 || run.channels[0].length !== block.firstSample)
      throw new Error(`Block at ${block.run}/${block.firstSample} does not follow.`);
    if (Math.abs(block.startSeconds - run.startSeconds - block.firstSample / facts.rateHz) > 1e-9)
      throw new Error(`Block at ${block.run}/${block.firstSample} tells the wrong time.`);
    block.channels.forEach((channel, c) => {
      if (channel.length !== block.length) throw new Error('A channel is not as long as its block.');
      run.channels[c].push(...channel);
    });
  }
  return runs;
}

/** Rows of a table, each made by `row`, with a line end behind each. */
export function lines(count: number, row: (i: number) => string, newline = '\n'): string {
  return Array.from({ length: count }, (_, i) => row(i) + newline).join('');
}

/** A signal without a constant stretch, to four decimals. */
export function wave(i: number): number {
  return Number((Math.sin(i / 3) + Math.cos(i * 7.1)).toFixed(4)) + 0;
}
