import { quantity, significant } from '../figure.ts';
import { type Finding, inRecording, ofNoisePower, type Subject } from './finding.ts';

/** Differences that are looked at, and distinct ones that are kept: the smallest. */
const MOST_DIFFERENCES = 65_536;
const MOST_KEPT = 48;
/** Differences no further apart than this part of themselves are one: digits cut off, or the last bit of a double. */
const ALIKE = 0.004;
/** A difference below this part of the values is rounding in a double. */
const DOUBLE = 4e-15;
/** Seldom differences, such as those to a value that was bridged, make no step. */
const SELDOM = 0.01;
/** Deviation from a whole number of steps, in steps, that is let pass; and the part of the differences that must keep it. */
const OFF_GRID = 0.1;
const ON_GRID = 0.95;
/** A fast signal may skip the single step: the smallest difference is then some of them. */
const PARTS = [1, 2, 3, 4];
/** Fewest differences of two sizes that show a grid. */
const FEWEST = 16;
/** Parts of the noise power from which rounding is worth a note, a warning, or leaves no noise to be seen. */
const NOTE = 0.1;
const WARN = 0.5;

/**
 * Fold that finds the quantisation step of a channel from the smallest differences of neighbouring samples: up to 65,536 of them,
 * the 48 smallest distinct sizes counted. Block size changes nothing.
 */
export class QuantisationFold {
  private readonly sizes: number[] = [];
  private readonly counts: number[] = [];
  private left = MOST_DIFFERENCES;
  private last = Number.NaN;

  /** Takes the next samples; where `startsRun` is true they start a new run. */
  push(samples: Float64Array, startsRun: boolean): void {
    let last = startsRun ? Number.NaN : this.last;
    for (let i = 0; i < samples.length && this.left > 0; i++) {
      const value = samples[i];
      const size = Math.abs(value - last);
      if (size > DOUBLE * Math.max(Math.abs(value), Math.abs(last))) {
        this.left--;
        this.take(size);
      }
      last = value;
    }
    this.last = last;
  }

  /** Counts a difference among the smallest ones; which ones are kept does not depend on what was dropped before. */
  private take(size: number): void {
    const { sizes, counts } = this;
    if (sizes.length === MOST_KEPT && size > sizes[MOST_KEPT - 1] * (1 + ALIKE)) return;
    let [from, to] = [0, sizes.length];
    while (from < to) {
      const middle = (from + to) >> 1;
      if (sizes[middle] * (1 + ALIKE) < size) from = middle + 1;
      else to = middle;
    }
    if (from < sizes.length && size >= sizes[from] * (1 - ALIKE)) counts[from]++;
    else {
      sizes.splice(from, 0, size);
      counts.splice(from, 0, 1);
      if (sizes.length > MOST_KEPT) {
        sizes.pop();
        counts.pop();
      }
    }
  }

  /**
   * The quantisation step, in the unit of the samples: the smallest common difference, or a simple part of it, of which nearly all
   * others are multiples. Null where the values are too fine, or too few, for one to show.
   */
  result(): number | null {
    const { sizes, counts } = this;
    const total = counts.reduce((sum, each) => sum + each, 0);
    if (total < FEWEST) return null;
    const first = counts.findIndex((each) => each > SELDOM * total);
    if (first < 0) return null;
    for (const part of PARTS) {
      const step = this.gridOf(sizes[first] / part, first, total);
      if (step !== null) return step;
    }
    return null;
  }

  /** The step near `least` that the sizes from index `first` on share, averaged over them; null where they share none. */
  private gridOf(least: number, first: number, total: number): number | null {
    const { sizes, counts } = this;
    let [onGrid, size, steps] = [0, 0, 0];
    for (let i = first; i < sizes.length; i++) {
      const multiple = Math.round(sizes[i] / least);
      if (Math.abs(sizes[i] / least - multiple) > OFF_GRID) continue;
      onGrid += counts[i];
      size += counts[i] * sizes[i];
      steps += counts[i] * multiple;
    }
    // What stands behind the ninth digit is rounding in doubles.
    return onGrid >= ON_GRID * total ? Number((size / steps).toPrecision(9)) : null;
  }
}

/** RMS of the error that rounding to steps makes: q/√12 (Bennett 1948, Bell System Technical Journal 27:446). */
export function roundingRms(step: number): number {
  return step / Math.sqrt(12);
}

/**
 * Effective bits over a range whose noise has the given RMS: those of an ideal converter that is so noisy,
 * (SINAD − 1.76 dB)/6.02 for the largest sine in the range (IEEE Std 1241), which is log₂(range/(noise·√12)).
 */
export function effectiveBits(range: number, noise: number): number {
  return Math.log2(range / (noise * Math.sqrt(12)));
}

/** Rounding to `step` over a range of values as a finding, where it is a good part of the noise; null else. */
export function quantisationFinding(step: number | null, range: number, subject: Subject): Finding | null {
  const { channel, role, noiseRms } = subject;
  if (step === null) return null;
  const rounding = roundingRms(step);
  const share = noiseRms > 0 ? rounding ** 2 / noiseRms ** 2 : Number.POSITIVE_INFINITY;
  if (share < NOTE) return null;
  const levels = Math.round(range / step) + 1;
  const part =
    share >= 1
      ? 'as much as all the noise that is seen'
      : `${ofNoisePower(share)}, and ${significant(effectiveBits(range, noiseRms), 2)} effective bits over the range seen`;
  return {
    kind: 'rounding',
    severity: share >= WARN ? 'warning' : 'note',
    channel: channel.name,
    what: `The values${inRecording(role)} come in steps of ${quantity(step, channel.unit)}, ${significant(levels)} of them in all; rounding alone makes ${quantity(rounding, channel.unit)} RMS, ${part}.`,
    effect:
      share >= WARN
        ? 'Noise and lines below a step are not seen as they are, so the advice rests on rounding rather than on the sensor.'
        : 'The noise floor is read a little too high; lines well above it are right.',
    advice: 'Log more digits, raise the gain or choose a narrower range, so that the noise spans a few steps.',
  };
}
