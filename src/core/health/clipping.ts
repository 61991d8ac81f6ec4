import { count, percent, quantity, seconds } from '../figure.ts';
import { type Finding, inRecording, type Subject } from './finding.ts';

/** How often a recording stays at one of its ends. */
export interface FlatEnd {
  readonly value: number;
  /** Samples exactly there, and at the value next to it. */
  readonly samples: number;
  readonly nextSamples: number;
  /** Runs of three or more of them, the longest, and when the first sample stood there, seconds. */
  readonly flats: number;
  readonly longest: number;
  readonly firstSeconds: number;
}

/** Both ends of a channel. */
export interface ClippingFigures {
  readonly low: FlatEnd;
  readonly high: FlatEnd;
}

/** Equal samples in a row that make a flat top. */
const FLAT = 3;
/**
 * A rounded sine stays at its top up to 1/(√2 − 1) = 2.4 times as long as at the value next to it, noise less than once;
 * from this multiple on something holds the signal there.
 */
const PILED_UP = 5;
/** Fewest samples at an end that tell anything, scattered, or in a row. */
const FEWEST = 10;
const FEWEST_IN_A_ROW = 5;
/** Quantisation steps between the ends up to which they say nothing. */
const FEWEST_STEPS = 3;
/** Parts of all samples from which it is worth a warning, or too much. */
const WARN = 1e-4;
const REFUSE = 0.1;

/** One end: the outermost value and the one next to it, with their counts, which stay exact as neither ever moves inwards. */
class End {
  outermost = Number.NEGATIVE_INFINITY;
  next = Number.NEGATIVE_INFINITY;
  private samples = 0;
  private nextSamples = 0;
  private flats = 0;
  private longest = 0;
  private inRow = 0;
  private lastPlace = -2;
  private firstSeconds = 0;

  /** `value` is at or beyond `next`; high values count as outer ones. */
  take(value: number, place: number, atSeconds: number): void {
    if (value < this.outermost) {
      if (value === this.next) this.nextSamples++;
      else {
        this.next = value;
        this.nextSamples = 1;
      }
      return;
    }
    if (value > this.outermost) {
      [this.next, this.nextSamples] = [this.outermost, this.samples];
      this.outermost = value;
      this.samples = this.flats = this.longest = this.inRow = 0;
      this.firstSeconds = atSeconds;
    }
    this.samples++;
    this.inRow = this.lastPlace === place - 1 && this.samples > 1 ? this.inRow + 1 : 1;
    this.lastPlace = place;
    if (this.inRow === FLAT) this.flats++;
    if (this.inRow > this.longest) this.longest = this.inRow;
  }

  result(sign: 1 | -1): FlatEnd {
    const { samples, nextSamples, flats, longest, firstSeconds } = this;
    return { value: sign * this.outermost, samples, nextSamples, flats, longest, firstSeconds };
  }
}

/** Fold that counts how often a channel stands exactly at its lowest and highest value. Block size changes nothing. */
export class ClippingFold {
  private readonly rateHz: number;
  private readonly high = new End();
  private readonly low = new End();
  private place = 0;

  constructor(options: { readonly rateHz: number }) {
    this.rateHz = options.rateHz;
  }

  /** Takes the next samples; where `startsRun` is true they start a new run, at `startSeconds` in either case. */
  push(samples: Float64Array, startsRun: boolean, startSeconds: number): void {
    // A place left free keeps flat tops from going on across a gap.
    if (startsRun) this.place++;
    const { high, low, rateHz, place } = this;
    let [above, below] = [high.next, -low.next];
    for (let i = 0; i < samples.length; i++) {
      const value = samples[i];
      if (value < above && value > below) continue;
      if (value >= above) high.take(value, place + i, startSeconds + i / rateHz);
      if (value <= below) low.take(-value, place + i, startSeconds + i / rateHz);
      above = high.next;
      below = -low.next;
    }
    this.place += samples.length;
  }

  result(): ClippingFigures {
    return { low: this.low.result(-1), high: this.high.result(1) };
  }
}

/**
 * The ends at which more samples stand than noise or a rounded wave would leave there; `step` is the quantisation step, null where
 * there is none. Noise below a step, which flickers between two or three values, has no ends that say anything.
 */
export function clippedEnds({ low, high }: ClippingFigures, step: number | null): FlatEnd[] {
  if (high.value - low.value <= FEWEST_STEPS * (step ?? 0)) return [];
  return [low, high].filter(isClipped);
}

function isClipped({ samples, nextSamples, longest }: FlatEnd): boolean {
  return (samples >= FEWEST || longest >= FEWEST_IN_A_ROW) && samples > PILED_UP * nextSamples;
}

/** Flat tops, or flat bottoms, as a finding; null where there are none. */
export function clippingFinding(figures: ClippingFigures, step: number | null, subject: Subject): Finding | null {
  const ends = clippedEnds(figures, step);
  if (ends.length === 0) return null;
  const { channel, role } = subject;
  const share = ends.reduce((sum, end) => sum + end.samples, 0) / subject.samples;
  const places = ends.map((end) => place(end, end === figures.high ? 'highest' : 'lowest', channel.unit));
  return {
    kind: 'clipping',
    severity: share >= REFUSE && role !== 'active' ? 'refusal' : share >= WARN ? 'warning' : 'note',
    channel: channel.name,
    what: `${percent(share)} of the samples${inRecording(role)} stand at an extreme: ${places.join('; ')}.`,
    effect:
      role === 'quiet'
        ? 'What lies beyond is lost: the noise is read too low, and flat tops make harmonics that look like lines.'
        : 'What lies beyond is lost: amplitudes are read too low, and flat tops make harmonics that widen the keep band.',
    advice:
      'Lower the gain or choose a wider range, and record again; where the value is a true stop or rest, ignore this.',
  };
}

function place({ value, samples, flats, longest, firstSeconds }: FlatEnd, which: string, unit: string): string {
  const flat = flats > 0 ? ` in ${count(flats)} flat stretch${flats > 1 ? 'es' : ''} of up to ${count(longest)}` : '';
  return `${count(samples)} at the ${which} value, ${quantity(value, unit, 4)}${flat}, first at ${seconds(firstSeconds)}`;
}
