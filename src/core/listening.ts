import { ChannelHealthFold, type Judged, judge } from './health/channel-health.ts';
import type { Role } from './health/finding.ts';
import type { Recording, UniformBlock } from './recording/recording.ts';
import { partsOf, type Stretch } from './simulation/stretches.ts';
import { lineLevel, lineSegmentSamples, segmentLengths } from './spectrum/levels.ts';
import type { LevelSpectrum } from './spectrum/spectrum.ts';
import { ActivityFold, type ActivityWindow, type StationaryPart, stationaryStretches } from './spectrum/stationary.ts';
import { WelchFold } from './spectrum/welch.ts';
import type { QuietPart } from './study-result.ts';

/** One channel of the quiet recording, as far as it is stationary. */
export interface QuietEvidence {
  readonly stretches: readonly Stretch[];
  readonly part: QuietPart;
  /** What was used, and why something was left out. */
  readonly stationary: StationaryPart;
  readonly judged: Judged;
  /** The levels that are merged to one spectrum. */
  readonly levels: readonly LevelSpectrum[];
  /** The level at which lines are looked for. */
  readonly lineLevel: LevelSpectrum;
}

/** One channel of the active recording. */
export interface ActiveEvidence {
  readonly judged: Judged;
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
  const found = activity.map(({ windows }) => stationaryStretches(windows, rateHz));
  const folds = found.map(({ stretches }) => welchOver(rateHz, stretches));
  const starts = runStarts(activity[0].windows);
  for await (const block of recording.blocks()) {
    indices.forEach((index, i) => {
      for (const part of partsOf(block, found[i].stretches))
        folds[i].push(block.channels[index].subarray(part.from, part.to), part.starts);
    });
  }
  return found.map((stationary, i) => ({
    stretches: stationary.stretches,
    stationary,
    judged: activity[i].judged,
    ...levelsOf(folds[i].result(), ladderOf(stationary.stretches)),
    part: {
      usedSeconds: stationary.usedSamples / rateHz,
      totalSeconds: stationary.totalSamples / rateHz,
      stretches: stationary.stretches.map((stretch) => {
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
  const folds = indices.map(() => ({ welch: new WelchFold(options), watch: new Watch(rateHz) }));
  for await (const block of recording.blocks()) {
    indices.forEach((index, i) => {
      folds[i].welch.push(block.channels[index], block.firstSample === 0);
      folds[i].watch.push(block, index);
    });
  }
  return folds.map(({ welch, watch }, i) => ({
    levels: welch.result(),
    ...watch.result(recording, indices[i], 'active'),
  }));
}

async function activityOf(recording: Recording, indices: readonly number[]): Promise<Watched[]> {
  const watches = indices.map(() => new Watch(recording.facts.rateHz));
  for await (const block of recording.blocks()) {
    indices.forEach((index, i) => {
      watches[i].push(block, index);
    });
  }
  return watches.map((watch, i) => watch.result(recording, indices[i], 'quiet'));
}

interface Watched {
  readonly windows: ActivityWindow[];
  readonly judged: Judged;
}

/** Activity and health of one channel, whatever the recording is for. */
class Watch {
  private readonly activity: ActivityFold;
  private readonly health: ChannelHealthFold;

  constructor(rateHz: number) {
    this.activity = new ActivityFold({ rateHz });
    this.health = new ChannelHealthFold({ rateHz });
  }

  push({ channels, rows, firstSample, startSeconds }: UniformBlock, index: number): void {
    this.activity.push(channels[index], firstSample === 0, startSeconds);
    this.health.push(channels[index], rows[index], firstSample === 0, startSeconds);
  }

  result({ facts: { channels, rateHz } }: Recording, index: number, role: Role): Watched {
    const windows = this.activity.result();
    return { windows, judged: judge(this.health.result(), windows, { channel: channels[index], role, rateHz }) };
  }
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
