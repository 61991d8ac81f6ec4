import type { Recording, UniformBlock } from '../src/core/recording/recording.ts';

/** Recording made in memory from samples on a uniform grid, one run per item of `runs`; for tests that need no file. */
export function madeRecording(options: {
  readonly rateHz: number;
  readonly channels: readonly { readonly name: string; readonly unit: string }[];
  readonly runs: readonly { readonly startSeconds: number; readonly samples: readonly Float64Array[] }[];
  readonly blockSamples?: number;
  readonly file?: string;
}): Recording {
  const { rateHz, runs, blockSamples = 65_536 } = options;
  const last = runs[runs.length - 1];
  const rows = runs.reduce((sum, run) => sum + run.samples[0].length, 0);
  return {
    facts: {
      file: options.file ?? 'made.csv',
      sizeBytes: rows * 8,
      sha256: '0'.repeat(64),
      rows,
      dialect: {
        encoding: 'utf-8',
        delimiter: ',',
        decimal: '.',
        newline: '\n',
        preambleLines: 0,
        headerLine: 1,
        unitsLine: null,
      },
      timeKind: 's',
      timeName: 'time',
      rateHz,
      jitterSeconds: 0,
      stampResolutionSeconds: 0,
      resampled: false,
      durationSeconds: last.startSeconds + (last.samples[0].length - 1) / rateHz,
      longestRunSamples: Math.max(...runs.map((run) => run.samples[0].length)),
      gaps: [],
      channels: options.channels.map((channel, index) => ({ ...channel, column: index + 2 })),
      leftOut: [],
      notes: [],
    },
    async *blocks(): AsyncIterable<UniformBlock> {
      for (const [run, { startSeconds, samples }] of runs.entries()) {
        for (let first = 0; first < samples[0].length; first += blockSamples) {
          const channels = samples.map((channel) => channel.slice(first, first + blockSamples));
          const length = channels[0].length;
          yield {
            run,
            firstSample: first,
            startSeconds: startSeconds + first / rateHz,
            length,
            channels,
            rows: channels,
          };
        }
      }
    },
  };
}
