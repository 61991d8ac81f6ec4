import type { Recording } from './recording/recording.ts';
import { partsOf, type Stretch } from './simulation/stretches.ts';
import { lineLevel, lineSegmentSamples, segmentLengths } from './spectrum/levels.ts';
import type { LevelSpectrum } from './spectrum/spectrum.ts';
import { ActivityFold, type ActivityWindow, stationaryStretches } from './spectrum/stationary.ts';
import { WelchFold } from './spectrum/welch.ts';
import type { QuietPart } from './study-result.ts';

/** One channel of the quiet recording, as far as it is stationary. */
export interface QuietEvidence {
  readonly stretches: readonly Stretch[];
  readonly part: QuietPart;
  /** Why something was left out; null where all was used. */
  readonly reason: string | null;
  /** The levels that are merged to one spectrum. */
  readonly levels: readonly LevelSpectrum[];
  /** The level at which lines are looked for. */
  readonly lineLevel: LevelSpectrum;
}

/** One channel of the active recording. */
export interface ActiveEvidence {
  readonly windows: readonly ActivityWindow[];
  readonly levels: readonly LevelSpectrum[];
}

/**
 * Measures the quiet recording in two passes: where each channel is stationary, then its spectra over those stretches.
 * `indices` are places among the recording's channels; the result follows their order.
 */
export async function listenQuiet(recording: Recording, indices: readonly number[]): Promise<QuietEvidence[]> {
  const { rateHz } = recording.facts;
  const activity = await activityOf(recording, indices);
  const found = activity.map((windows) => stationaryStretches(windows, rateHz));
  const folds = found.map(({ stretches }) => welchOver(rateHz, stretches));
  const starts = runStarts(activity[0]);
  for await (const block of recording.blocks()) {
    indices.forEach((index, i) => {
      for (const part of partsOf(block, found[i].stretches))
        folds[i].push(block.channels[index].subarray(part.from, part.to), part.starts);
    });
  }
  return found.map(({ stretches, usedSamples, totalSamples, reason }, i) => ({
    stretches,
    reason,
    ...levelsOf(folds[i].result(), ladderOf(stretches)),
    part: {
      usedSeconds: usedSamples / rateHz,
      totalSeconds: totalSamples / rateHz,
      stretches: stretches.map((stretch) => {
        const fromSeconds = (starts.get(stretch.run) ?? 0) + stretch.firstSample / rateHz;
        return { fromSeconds, toSeconds: fromSeconds + stretch.samples / rateHz };
      }),
    },
  }));
}

/** Measures the active recording in one pass: spectra and activity of each channel, in the order of `indices`. */
export async function listenActive(recording: Recording, indices: readonly number[]): Promise<ActiveEvidence[]> {
  const { rateHz, longestRunSamples, durationSeconds } = recording.facts;
  const options = {
    rateHz,
    segmentSamples: segmentLengths(longestRunSamples),
    expectedSamples: Math.round(durationSeconds * rateHz),
  };
  const folds = indices.map(() => ({ welch: new WelchFold(options), activity: new ActivityFold({ rateHz }) }));
  for await (const block of recording.blocks()) {
    indices.forEach((index, i) => {
      folds[i].welch.push(block.channels[index], block.firstSample === 0);
      folds[i].activity.push(block.channels[index], block.firstSample === 0, block.startSeconds);
    });
  }
  return folds.map(({ welch, activity }) => ({ levels: welch.result(), windows: activity.result() }));
}

async function activityOf(recording: Recording, indices: readonly number[]): Promise<ActivityWindow[][]> {
  const folds = indices.map(() => new ActivityFold({ rateHz: recording.facts.rateHz }));
  for await (const block of recording.blocks()) {
    indices.forEach((index, i) => {
      folds[i].push(block.channels[index], block.firstSample === 0, block.startSeconds);
    });
  }
  return folds.map((fold) => fold.result());
}

function longestOf(stretches: readonly Stretch[]): number {
  return Math.max(...stretches.map((stretch) => stretch.samples));
}

function ladderOf(stretches: readonly Stretch[]): number[] {
  return segmentLengths(longestOf(stretches));
}

function levelsOf(all: readonly LevelSpectrum[], ladder: readonly number[]) {
  return { levels: all.filter((level) => ladder.includes(level.segmentSamples)), lineLevel: lineLevel(all) };
}

function welchOver(rateHz: number, stretches: readonly Stretch[]): WelchFold {
  const lengths = new Set([...ladderOf(stretches), lineSegmentSamples(longestOf(stretches))]);
  return new WelchFold({
    rateHz,
    segmentSamples: [...lengths].sort((a, b) => b - a),
    expectedSamples: stretches.reduce((sum, stretch) => sum + stretch.samples, 0),
  });
}

/** Time at which each run starts, seconds from the recording's first sample. */
function runStarts(windows: readonly ActivityWindow[]): Map<number, number> {
  const starts = new Map<number, number>();
  for (const window of windows) if (!starts.has(window.run)) starts.set(window.run, window.startSeconds);
  return starts;
}
