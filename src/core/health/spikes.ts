import { count, quantity, seconds, significant } from '../figure.ts';
import { type Finding, inRecording, ofNoisePower, type Subject } from './finding.ts';

/** Single samples, or up to three, that leave the signal and return to it. */
export interface SpikeFigures {
  readonly spikes: number;
  /** Departure of the largest from the signal, signed, in the channel's unit, and its time, seconds. */
  readonly largest: number;
  readonly largestSeconds: number;
  readonly firstSeconds: number;
  /** Sum of squared departures, unit²·samples. */
  readonly power: number;
}

/** Samples judged at once, and those to either side that only serve as neighbours. */
const WINDOW = 1024;
const MARGIN = 14;
/** Fewest second differences whose scatter says anything. */
const FEWEST = 64;
/** Every so many second differences make the median. */
const EVERY = 4;
/** A normal number is this times its median absolute deviation (Hampel 1974, J. Am. Stat. Assoc. 69:383): 1/Φ⁻¹(3/4). */
export const MAD = 1.4826;
/**
 * Second differences beyond this many standard deviations are outliers: normal noise shows one in 10¹⁵, and where the median of 256 of
 * them is read low by three times its own scatter still less than one in 10⁹.
 */
const OUTLYING = 8;
/** Samples behind the first of an outlier that may belong to it, and those to either side that it must stand out of. */
const OWN = 4;
const SURROUNDINGS = 9;
/** What is left of a spike behind it, as a part of it; more is a step of the signal. */
const RETURNS = 0.5;
/** A spike spans at least so many quantisation steps: a flicker of the last digit is none. */
const FEWEST_STEPS = 6;
/** Part of the noise power from which spikes are worth a warning, but for an active recording, where they may be true events. */
const WARN = 0.05;

/** Spikes of like size: between 2ⁿ and 2ⁿ⁺¹ units. */
interface SizeClass {
  readonly size: number;
  spikes: number;
  power: number;
  largest: number;
  largestSeconds: number;
  readonly firstSeconds: number;
}

/**
 * Fold that finds spikes whatever the signal does: second differences, in which slow signals vanish, against their median absolute
 * deviation over 1,024 samples (the identifier of Hampel, after Davies & Gather 1993, J. Am. Stat. Assoc. 88:782), and again against
 * the nine to either side, so that bursts and shocks that ring do not count; steps do not, either. The first and last 14 samples of a run
 * are not judged. Windows are counted from the start of a run: block size changes nothing.
 */
export class SpikeFold {
  private readonly rateHz: number;
  private readonly held = new Float64Array(WINDOW + 2 * MARGIN);
  private readonly bends = new Float64Array(WINDOW + 2 * MARGIN);
  private readonly sorted = new Float64Array((WINDOW + 2 * MARGIN) / EVERY + 1);
  private readonly around = new Float64Array(SURROUNDINGS);
  private readonly classes = new Map<number, SizeClass>();
  private length = 0;
  /** Place within the run of the first sample held. */
  private base = 0;
  private runSeconds = 0;

  constructor(options: { readonly rateHz: number }) {
    this.rateHz = options.rateHz;
  }

  /** Takes the next samples; where `startsRun` is true they start a new run, at `startSeconds`. */
  push(samples: Float64Array, startsRun: boolean, startSeconds: number): void {
    if (startsRun) {
      this.judge();
      this.length = this.base = 0;
      this.runSeconds = startSeconds;
    }
    for (let from = 0; from < samples.length; ) {
      const take = Math.min(samples.length - from, this.held.length - this.length);
      this.held.set(samples.subarray(from, from + take), this.length);
      this.length += take;
      from += take;
      if (this.length < this.held.length) continue;
      this.judge();
      this.held.copyWithin(0, WINDOW);
      this.base += WINDOW;
      this.length = 2 * MARGIN;
    }
  }

  /** Ends the last run; `step` is the quantisation step, null where there is none. */
  result(step: number | null): SpikeFigures {
    this.judge();
    this.length = 0;
    const found = [...this.classes.values()].filter(({ size }) => size >= FEWEST_STEPS * (step ?? 0));
    const largest = found.reduce<SizeClass | null>((a, b) => (a && a.size >= b.size ? a : b), null);
    return {
      spikes: found.reduce((sum, each) => sum + each.spikes, 0),
      power: found.reduce((sum, each) => sum + each.power, 0),
      largest: largest?.largest ?? 0,
      largestSeconds: largest?.largestSeconds ?? 0,
      firstSeconds: found.reduce((first, each) => Math.min(first, each.firstSeconds), Number.POSITIVE_INFINITY),
    };
  }

  private judge(): void {
    const { held, bends, length } = this;
    if (length < FEWEST + 2 * MARGIN) return;
    for (let i = 1; i < length - 1; i++) bends[i] = Math.abs(held[i - 1] - 2 * held[i] + held[i + 1]);
    const limit = OUTLYING * this.scale();
    for (let i = MARGIN; i < length - MARGIN; i++) {
      if (bends[i] <= limit) continue;
      this.consider(i);
      i += OWN;
    }
  }

  /** Standard deviation of the second differences held, by their median; by their ninth decile where half of them are zero. */
  private scale(): number {
    const { bends, sorted, length } = this;
    let n = 0;
    for (let i = 1; i < length - 1; i += EVERY) sorted[n++] = bends[i];
    const middle = select(sorted, n, n >> 1);
    // 1.645 standard deviations hold nine tenths of normal numbers.
    return middle > 0 ? MAD * middle : select(sorted, n, Math.floor(0.9 * n)) / 1.645;
  }

  /** Judges an outlier that starts at sample `first` or the one behind: it must stand out of both sides, and return. */
  private consider(first: number): void {
    const { held, bends, around } = this;
    let bend = 0;
    for (let k = first; k <= first + OWN; k++) if (bends[k] > bend) bend = bends[k];
    for (const side of [first - 2 - SURROUNDINGS, first + OWN + 1]) {
      for (let k = 0; k < SURROUNDINGS; k++) around[k] = bends[side + k];
      if (bend <= OUTLYING * MAD * select(around, SURROUNDINGS, SURROUNDINGS >> 1)) return;
    }
    const before = this.lineAt(first - 7);
    const after = this.lineAt(first + OWN + 1);
    const apart = OWN + 8;
    const slope = (after.mean - before.mean) / apart;
    let size = 0;
    let at = first;
    for (let k = first; k <= first + OWN; k++) {
      const departure = held[k] - before.mean - slope * (k - first + 4.5);
      if (Math.abs(departure) <= Math.abs(size)) continue;
      size = departure;
      at = k;
    }
    const jump = (slope - (before.slope + after.slope) / 2) * apart;
    if (Math.abs(jump) <= RETURNS * Math.abs(size)) this.add(size, this.runSeconds + (this.base + at) / this.rateHz);
  }

  /** Mean and slope of six samples. */
  private lineAt(from: number): { mean: number; slope: number } {
    const { held } = this;
    const early = (held[from] + held[from + 1] + held[from + 2]) / 3;
    const late = (held[from + 3] + held[from + 4] + held[from + 5]) / 3;
    return { mean: (early + late) / 2, slope: (late - early) / 3 };
  }

  private add(size: number, atSeconds: number): void {
    const power = Math.floor(Math.log2(Math.abs(size)));
    const known = this.classes.get(power);
    if (known === undefined) {
      this.classes.set(power, {
        size: 2 ** power,
        spikes: 1,
        power: size ** 2,
        largest: size,
        largestSeconds: atSeconds,
        firstSeconds: atSeconds,
      });
      return;
    }
    known.spikes++;
    known.power += size ** 2;
    if (Math.abs(size) <= Math.abs(known.largest)) return;
    known.largest = size;
    known.largestSeconds = atSeconds;
  }
}

/** The value that would stand at `place` if the first `n` values were sorted; reorders them (Hoare 1961, Algorithm 65). */
function select(values: Float64Array, n: number, place: number): number {
  let [left, right] = [0, n - 1];
  while (left < right) {
    const pivot = values[(left + right) >> 1];
    let [i, j] = [left, right];
    while (i <= j) {
      while (values[i] < pivot) i++;
      while (values[j] > pivot) j--;
      if (i <= j) {
        const kept = values[i];
        values[i++] = values[j];
        values[j--] = kept;
      }
    }
    if (place <= j) right = j;
    else if (place >= i) left = i;
    else break;
  }
  return values[place];
}

/** A stretch of a recording, seconds from its first sample. */
export interface UsedStretch {
  readonly fromSeconds: number;
  readonly toSeconds: number;
}

/**
 * Spikes as a finding; null where there are none. `used` are the stretches that carry the noise figures, null where all does: what
 * lies outside spoils nothing.
 */
export function spikeFinding(
  figures: SpikeFigures,
  used: readonly UsedStretch[] | null,
  { channel, role, samples, noiseRms }: Subject,
): Finding | null {
  const { spikes, largest, largestSeconds, firstSeconds, power } = figures;
  if (spikes === 0) return null;
  const share = noiseRms > 0 ? power / samples / noiseRms ** 2 : Number.POSITIVE_INFINITY;
  const times = noiseRms > 0 ? `, ${significant(Math.abs(largest) / noiseRms, 2)} times the noise RMS` : '';
  const one = spikes === 1;
  const inside =
    used === null ||
    used.some(({ fromSeconds, toSeconds }) => largestSeconds >= fromSeconds && largestSeconds < toSeconds);
  return {
    kind: 'spikes',
    severity: share >= WARN && inside && role !== 'active' ? 'warning' : 'note',
    channel: channel.name,
    what: `${one ? 'One spike' : `${count(spikes)} spikes`}${inRecording(role)}, ${one ? '' : `the first at ${seconds(firstSeconds)}, the largest `}${quantity(largest, channel.unit)} at ${seconds(largestSeconds)}${times}.`,
    effect: inside
      ? spreads(one, share)
      : `${one ? 'It' : 'The largest'} lies in a part of the recording that is left out, and spoils nothing.`,
    advice:
      role === 'active'
        ? 'Where they are no true events, look for loose contacts, switching loads and lost bits.'
        : 'Look for loose contacts, switching loads and lost bits: a low-pass smears a spike but does not remove it.',
  };
}

function spreads(one: boolean, share: number): string {
  const raised = `${share >= WARN ? '' : 'hardly '}${one ? 'raises' : 'raise'}`;
  const by = Number.isFinite(share) ? `, by ${ofNoisePower(share)}` : '';
  return `${one ? 'It spreads' : 'They spread'} over all frequencies and ${raised} the noise floor${by}.`;
}
