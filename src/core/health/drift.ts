import { quantity, significant } from '../figure.ts';
import type { ActivityWindow } from '../spectrum/stationary.ts';
import { type Finding, inRecording, ofNoisePower, type Subject } from './finding.ts';

/** The straight line through a channel. */
export interface DriftFigures {
  /** Slope, unit a minute. */
  readonly perMinute: number;
  /** Change from the first sample to the last, in the channel's unit. */
  readonly change: number;
  /** Part of the scatter of the means that the line explains, 0 to 1. */
  readonly explained: number;
}

/** Part of the means' scatter that the line must explain to be called a drift. */
const EXPLAINED = 0.5;
/** Changes over the recording, in noise RMS, that are worth a note and a warning. */
const NOTE = 1;
const WARN = 5;

/**
 * Least-squares straight line over a recording, from the means of its windows (in order of time, weighted by samples); `rateHz` is
 * their rate. Zero where there are fewer than three windows.
 */
export function driftOf(windows: readonly ActivityWindow[], rateHz: number): DriftFigures {
  if (windows.length < 3) return { perMinute: 0, change: 0, explained: 0 };
  const at = ({ startSeconds, samples }: ActivityWindow) => startSeconds + (samples - 1) / 2 / rateHz;
  const total = windows.reduce((sum, window) => sum + window.samples, 0);
  const average = (value: (window: ActivityWindow) => number) =>
    windows.reduce((sum, window) => sum + window.samples * value(window), 0) / total;
  const [time, mean] = [average(at), average((window) => window.mean)];
  const spread = average((window) => (at(window) - time) ** 2);
  const together = average((window) => (at(window) - time) * (window.mean - mean));
  const scatter = average((window) => (window.mean - mean) ** 2);
  const slope = together / spread;
  const last = windows[windows.length - 1];
  const duration = last.startSeconds + (last.samples - 1) / rateHz - windows[0].startSeconds;
  return {
    perMinute: 60 * slope,
    change: slope * duration,
    explained: scatter > 0 ? (slope * together) / scatter : 0,
  };
}

/** Drift as a finding, where it is more than the noise; null else. In an active recording it may be signal, and is only noted. */
export function driftFinding({ perMinute, change, explained }: DriftFigures, subject: Subject): Finding | null {
  const { channel, role, noiseRms } = subject;
  const size = Math.abs(change);
  if (explained < EXPLAINED || size === 0 || size < NOTE * noiseRms) return null;
  const times = noiseRms > 0 ? `, ${significant(size / noiseRms, 2)} times the noise RMS` : '';
  const share = noiseRms > 0 ? size ** 2 / 12 / noiseRms ** 2 : Number.POSITIVE_INFINITY;
  return {
    kind: 'drift',
    severity: role !== 'active' && size >= WARN * noiseRms ? 'warning' : 'note',
    channel: channel.name,
    what: `The mean drifts${inRecording(role)} by ${quantity(perMinute, channel.unit)} a minute, ${quantity(change, channel.unit)} over the recording${times}.`,
    effect: `It counts as power at the very lowest frequencies${Number.isFinite(share) ? `, with ${ofNoisePower(share)}` : ''}, and no low-pass removes it.`,
    advice:
      role === 'active'
        ? 'If it is no signal, let the sensor warm up, or take the mean off before use.'
        : 'Let sensor and electronics warm up before recording; if it was no rest that was recorded, ignore this.',
  };
}
