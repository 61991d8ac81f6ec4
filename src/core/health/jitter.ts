import { decibels, hertz, percent, quantity, seconds } from '../figure.ts';
import type { RecordingFacts } from '../recording/recording.ts';
import { type Finding, inRecording, type Role } from './finding.ts';

/** Ratio of signal to jitter noise, dB, below which it is worth a note and a warning. */
const NOTE_DB = 60;
const WARN_DB = 40;
/** Unevenness, in periods, that the reader lets pass; more, and not interpolated, is a clock that wanders slowly. */
const LET_PASS = 0.01;

/** The sine against which jitter is measured. */
export interface JitterProbe {
  /** Name of the channel; null where any would do. */
  readonly channel: string | null;
  readonly frequencyHz: number;
  /** Where that frequency comes from, such as 'the keep-band edge'. */
  readonly place: string;
  /** RMS of the signal, taken to lie there as a whole, and its unit; null where none is known. */
  readonly signal: { readonly rms: number; readonly unit: string } | null;
}

/**
 * RMS of the noise that jitter of `jitterSeconds` (standard deviation) puts on a sine of the given RMS: 2πf·σ·RMS, the slope's RMS times
 * the jitter (small jitter; Shinagawa, Akazawa & Wakimoto 1990, IEEE J. Solid-State Circuits 25:220).
 */
export function jitterNoiseRms(jitterSeconds: number, frequencyHz: number, signalRms: number): number {
  return 2 * Math.PI * frequencyHz * jitterSeconds * signalRms;
}

/** Jitter of the samples, seconds: that of the stamps without what their own resolution explains, q/√12. */
function samplingJitter({ jitterSeconds, stampResolutionSeconds }: RecordingFacts): number {
  return Math.sqrt(Math.max(0, jitterSeconds ** 2 - stampResolutionSeconds ** 2 / 12));
}

/** Jitter as a finding, where its noise at the probe is within 60 dB of the signal; null else. */
export function jitterFinding(facts: RecordingFacts, role: Role, probe: JitterProbe): Finding | null {
  const jitter = samplingJitter(facts);
  const ratioDb = -20 * Math.log10(jitterNoiseRms(jitter, probe.frequencyHz, 1));
  if (!(ratioDb < NOTE_DB)) return null;
  const periods = jitter * facts.rateHz;
  const wanders = !facts.resampled && periods > LET_PASS;
  const { signal } = probe;
  const noise = signal && ` (${quantity(jitterNoiseRms(jitter, probe.frequencyHz, signal.rms), signal.unit)} RMS)`;
  const below = ratioDb > 0 ? `${decibels(ratioDb)} below` : 'as large as';
  return {
    kind: 'jitter',
    severity: ratioDb < WARN_DB && !facts.resampled && !wanders ? 'warning' : 'note',
    channel: probe.channel,
    what: `The samples${inRecording(role)} jitter by ${seconds(jitter)} (${percent(periods)} of a period), which at ${hertz(probe.frequencyHz, 3)}, ${probe.place}, makes noise ${below} a signal there${noise ?? ''}.`,
    effect: facts.resampled
      ? 'As far as the stamps tell the true instants the interpolation takes this away; as far as they do not, it stays as noise.'
      : wanders
        ? 'The steps stay even, so that this is a slow wander of the clock: it broadens lines a little and adds no floor.'
        : 'It is noise that comes with the signal and that no filter removes.',
    advice: 'Let a timer rather than a loop start each sample, and stamp it then.',
  };
}
