import type { Channel, Recording, RecordingFacts } from '../recording/recording.ts';
import { lineLevel, lineSegmentSamples } from '../spectrum/levels.ts';
import { findLines } from '../spectrum/lines.ts';
import { ActivityFold, stationaryStretches } from '../spectrum/stationary.ts';
import { WelchFold } from '../spectrum/welch.ts';
import { UserError } from '../user-error.ts';
import { ChannelHealthFold, judge, sampleFindings } from './channel-health.ts';
import type { Finding } from './finding.ts';
import { missingFinding } from './gaps.ts';
import { jitterFinding } from './jitter.ts';
import { mainsFindings } from './mains.ts';
import { effectiveBits } from './quantisation.ts';
import { stationarityFinding } from './stationarity.ts';

/** Health of one channel: its figures, and what is wrong with it. */
export interface ChannelHealth {
  readonly channel: Channel;
  readonly lowest: number;
  readonly highest: number;
  /** See `noiseRms`: what changes within 64 samples, signal included where there is one. */
  readonly noiseRms: number;
  /** Quantisation step; null where none shows. */
  readonly step: number | null;
  /** Of an ideal converter over the range seen with the same noise. */
  readonly effectiveBits: number;
  readonly driftPerMinute: number;
  readonly findings: readonly Finding[];
}

/** Health of a recording of which nobody said what it is for. */
export interface RecordingHealth {
  readonly facts: RecordingFacts;
  readonly channels: readonly ChannelHealth[];
  /** About the recording as a whole. */
  readonly findings: readonly Finding[];
}

/**
 * Examines a recording in one pass over its samples. `names` are the channels wanted, case ignored; null for all.
 * Throws UserError('usage') where the recording has no channel of a name.
 */
export async function examine(recording: Recording, names: readonly string[] | null): Promise<RecordingHealth> {
  const { facts } = recording;
  const { rateHz, longestRunSamples, durationSeconds } = facts;
  const indices = names === null ? facts.channels.map((_, i) => i) : names.map((name) => placeOf(facts, name));
  const spectra = {
    rateHz,
    segmentSamples: [Math.min(lineSegmentSamples(longestRunSamples), powerOfTwoWithin(longestRunSamples))],
    expectedSamples: Math.round(durationSeconds * rateHz),
  };
  const folds = indices.map(() => ({
    health: new ChannelHealthFold({ rateHz }),
    activity: new ActivityFold({ rateHz }),
    welch: new WelchFold(spectra),
  }));
  for await (const { channels, rows, firstSample, startSeconds } of recording.blocks()) {
    indices.forEach((index, i) => {
      const { health, activity, welch } = folds[i];
      health.push(channels[index], rows[index], firstSample === 0, startSeconds);
      activity.push(channels[index], firstSample === 0, startSeconds);
      welch.push(channels[index], firstSample === 0);
    });
  }
  return {
    facts,
    channels: indices.map((index, i) => channelHealth(facts.channels[index], rateHz, folds[i])),
    findings: [
      missingFinding(facts, null),
      jitterFinding(facts, null, {
        channel: null,
        frequencyHz: rateHz / 10,
        place: 'a tenth of the rate',
        signal: null,
      }),
    ].filter((finding) => finding !== null),
  };
}

interface Folds {
  readonly health: ChannelHealthFold;
  readonly activity: ActivityFold;
  readonly welch: WelchFold;
}

function channelHealth(channel: Channel, rateHz: number, { health, activity, welch }: Folds): ChannelHealth {
  const windows = activity.result();
  const figures = health.result();
  const judged = judge(figures, windows, { channel, role: null, rateHz });
  const { subject } = judged;
  const { step, clipping } = figures;
  const [lowest, highest] = [clipping.low.value, clipping.high.value];
  const lines = findLines(lineLevel(welch.result()));
  const stationarity = stationarityFinding(stationaryStretches(windows, rateHz), subject);
  return {
    channel,
    lowest,
    highest,
    noiseRms: subject.noiseRms,
    step,
    effectiveBits: effectiveBits(highest - lowest, subject.noiseRms),
    driftPerMinute: judged.drift.perMinute,
    findings: [
      ...sampleFindings(judged),
      ...mainsFindings(lines, 0, subject),
      ...(stationarity === null ? [] : [stationarity]),
    ],
  };
}

function placeOf({ file, channels }: RecordingFacts, name: string): number {
  const place = channels.findIndex((channel) => channel.name.toLowerCase() === name.toLowerCase());
  if (place >= 0) return place;
  const known = channels.map((channel) => `"${channel.name}"`).join(', ');
  throw new UserError('usage', `There is no channel "${name}" in ${file}; choose from ${known}.`);
}

function powerOfTwoWithin(samples: number): number {
  return 2 ** Math.floor(Math.log2(samples));
}
