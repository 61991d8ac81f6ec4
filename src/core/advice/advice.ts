import type { Filter, StepFigures } from '../filter/filter.ts';
import type { Band } from '../spectrum/spectrum.ts';

/** The limits an engineer sets. */
export interface Limits {
  /** Most loss of gain at the keep-band edge, dB, positive. */
  readonly droopDb: number;
  /** Least attenuation at the first noise line outside the keep band, dB, positive. */
  readonly rejectionDb: number;
}

/** The frequencies that must survive. */
export interface KeepBand extends Band {
  readonly source: 'measured' | 'given';
}

export type LimitName = 'droop' | 'rejection';

/** One filter that was considered, with what it would do. */
export interface Rival extends Filter, StepFigures {
  readonly droopDb: number;
  /** null where there is no noise line outside the keep band. */
  readonly rejectionDb: number | null;
  /** Noise in use behind the filter as the noise model has it, RMS in the channel's unit. */
  readonly noiseAfterRms: number;
  /** Expected mean-square error against the delayed signal, unit². */
  readonly errorPower: number;
  /** Error power over the Wiener bound; 1 is the best any linear filter could do, given all the future. */
  readonly wienerRatio: number;
  /** Corners the limits leave, Hz; low > high where they contradict each other. */
  readonly allowedHz: Band;
  readonly meets: readonly LimitName[];
  readonly fails: readonly LimitName[];
}

export type Verdict = 'clear' | 'compromise' | 'inseparable';

/** The chosen filter with every figure that supports it. */
export interface Advice extends Filter, StepFigures {
  readonly verdict: Verdict;
  /** 90 % interval of the corner from resampled segments, Hz. */
  readonly cornerRangeHz: readonly [number, number];
  readonly droopDb: number;
  readonly rejectionDb: number | null;
  /** Noise line that sets the rejection, Hz; null where there is none. */
  readonly firstLineHz: number | null;
  /** first line over keep-band edge; null where there is no line. */
  readonly room: number | null;
  /** Measured: quiet recording before and behind the simulated filter, RMS in the channel's unit. */
  readonly noiseBeforeRms: number;
  readonly noiseAfterRms: number;
  /** Share of the signal's power within the keep band that passes, 0 to 1. */
  readonly signalKept: number;
  readonly wienerRatio: number;
  /** Plain sentences with figures: why this one, what it costs, what it cannot do. */
  readonly reasons: readonly string[];
}
