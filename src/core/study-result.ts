import type { Advice, KeepBand, Limits, Rival } from './advice/advice.ts';
import type { DiscreteFilter } from './filter/filter.ts';
import type { Finding } from './health/finding.ts';
import type { Channel, RecordingFacts } from './recording/recording.ts';
import type { Band, NoiseLine, Spectrum } from './spectrum/spectrum.ts';

/** What a user may set for the main job; every value as used, defaults filled in. */
export interface StudySettings extends Limits {
  /** Keep band given by the user, Hz; null where it is measured. */
  readonly keepHz: Band | null;
  /** First frequency to reject given by the user, Hz; null where it is measured. */
  readonly rejectHz: number | null;
  /** Channel names to study; null for all common ones. */
  readonly channels: readonly string[] | null;
  /** Sampling rate given by the user, Hz. */
  readonly rateHz: number | null;
}

/** Recording thinned for drawing: per column of pixels the smallest and largest value, so that no peak is lost. */
export interface ThinnedTrace {
  /** Middle of each column, seconds from the first sample of the recording; increasing. */
  readonly seconds: Float64Array;
  /** NaN where a column falls into a gap. */
  readonly low: Float64Array;
  readonly high: Float64Array;
}

/** A few seconds at full resolution, before and after. */
export interface Inset {
  /** What the stretch shows, such as 'quiet stretch' or 'strongest manoeuvre'. */
  readonly title: string;
  readonly seconds: Float64Array;
  readonly before: Float64Array;
  readonly after: Float64Array;
}

/** The simulator's product for one channel of the active recording. */
export interface Simulation {
  readonly before: ThinnedTrace;
  readonly after: ThinnedTrace;
  readonly insets: readonly Inset[];
}

/** Which part of the quiet recording carried the noise figures. */
export interface QuietPart {
  readonly usedSeconds: number;
  readonly totalSeconds: number;
  /** Used stretches, seconds from the first sample. */
  readonly stretches: readonly { readonly fromSeconds: number; readonly toSeconds: number }[];
}

/** How finely a channel can be told. */
export interface Resolution {
  /** Step in which the quiet recording is written, in the channel's unit; null where none shows. */
  readonly step: number | null;
  /** Bits of an ideal converter over the range in use whose rounding makes the quiet noise. */
  readonly effectiveBits: number;
}

/** Gain at a noise line, computed for the discrete filter and measured on the quiet recording. */
export interface LineGain {
  readonly frequencyHz: number;
  /** dB, negative for loss. */
  readonly computedDb: number;
  /** dB, negative for loss; null where the filtered line is lost in the floor. */
  readonly measuredDb: number | null;
}

/** Everything found for one channel. */
export interface ChannelStudy {
  readonly channel: Channel;
  readonly quietPart: QuietPart;
  /** Quiet spectrum and its floor, and the active spectrum, on frequencies of their own. */
  readonly quietSpectrum: Spectrum;
  readonly floorDensity: Float64Array;
  readonly activeSpectrum: Spectrum;
  /** Spectrum of the active recording behind the simulated filter. */
  readonly filteredSpectrum: Spectrum;
  /** Noise in use over noise when quiet, as a ratio of amplitudes, read above the keep band. */
  readonly noiseGain: number;
  readonly lines: readonly NoiseLine[];
  readonly lineGains: readonly LineGain[];
  readonly keep: KeepBand;
  /** Bands present only in use, treated as noise. */
  readonly inUse: readonly Band[];
  readonly advice: Advice;
  /** All rivals, the advised one first among equals: sorted as the advice ranks them. */
  readonly rivals: readonly Rival[];
  readonly discrete: DiscreteFilter;
  readonly simulation: Simulation;
  readonly resolution: Resolution;
  /** What is wrong or odd about the channel in either recording, the worst first. */
  readonly findings: readonly Finding[];
}

/** The whole result of the main job: plain data, from which report, JSON, plan and terminal text are made. */
export interface Study {
  readonly version: string;
  readonly settings: StudySettings;
  readonly quiet: RecordingFacts;
  readonly active: RecordingFacts;
  readonly channels: readonly ChannelStudy[];
  /** About the pair as a whole: different rates and units, channels without a partner, missing samples. */
  readonly findings: readonly Finding[];
}
