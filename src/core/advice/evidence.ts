import type { Band, Spectrum } from '../spectrum/spectrum.ts';
import { densityAt } from './density.ts';

/**
 * What the two recordings say about signal and noise, as powers at frequencies: what every expected error is summed from.
 * All arrays of one length; powers in unit².
 */
export interface Evidence {
  readonly frequencyHz: Float64Array;
  /** Power of signal and noise together: measured where the signal is, the noise alone elsewhere. */
  readonly active: Float64Array;
  /** Power of the noise in use. */
  readonly noise: Float64Array;
  /** Power of the signal: what active exceeds the noise by within the keep band. */
  readonly signal: Float64Array;
  /** Sum of `noise`. */
  readonly noisePower: number;
  /** Sum of `signal`. */
  readonly signalPower: number;
  /** Noise within the keep band. */
  readonly noiseInBandPower: number;
  /** ∫ S_s·S_n/(S_s+S_n) df: the least error of any linear filter that knows all past and future (Wiener 1949). */
  readonly wienerPower: number;
}

/** Points of a twenty-fourth of an octave: no filter of order 8 bends within one. */
const POINTS_PER_OCTAVE = 24;

/**
 * Lays the evidence out. Noise in use is the quiet density times `noiseGainPower`; within `inUse` bands all of the active
 * power is noise. The active spectrum speaks up to `signalHighHz`, as far as any signal reaches; beyond, what active and
 * quiet differ by is chance, and on strong lines more than all that a filter leaves. Active and quiet keep points of their
 * own, so that neither is resampled; the points are then condensed.
 */
export function layEvidence(
  active: Spectrum,
  quiet: Spectrum,
  noiseGainPower: number,
  keep: Band,
  signalHighHz: number,
  inUse: readonly Band[],
): Evidence {
  const points = new Condenser();
  const inside = (bands: readonly Band[], f: number) => bands.some((band) => f >= band.lowHz && f <= band.highHz);
  let wienerPower = 0;
  active.frequencyHz.forEach((f, i) => {
    const power = active.density[i] * active.widthHz[i];
    const onlyInUse = inside(inUse, f);
    if (!onlyInUse && f > signalHighHz) return;
    const noise = noiseGainPower * densityAt(quiet, f) * active.widthHz[i];
    const signal = !onlyInUse && f >= keep.lowHz && f <= keep.highHz ? Math.max(0, power - noise) : 0;
    if (signal > 0) wienerPower += (signal * noise) / (signal + noise);
    points.add(f, power, onlyInUse ? power : 0, signal);
  });
  let noiseInBandPower = 0;
  quiet.frequencyHz.forEach((f, i) => {
    if (inside(inUse, f)) return;
    const noise = noiseGainPower * quiet.density[i] * quiet.widthHz[i];
    if (f >= keep.lowHz && f <= keep.highHz) noiseInBandPower += noise;
    points.add(f, f > signalHighHz ? noise : 0, noise, 0);
  });
  return { ...points.result(), noiseInBandPower, wienerPower };
}

/** Sums powers within narrow steps of frequency, each at its power's centre. */
class Condenser {
  private readonly sums = new Map<
    number,
    [moment: number, weight: number, active: number, noise: number, signal: number]
  >();

  add(frequencyHz: number, active: number, noise: number, signal: number): void {
    // What is measured in use and what is known from quiet stay apart: their centres differ within a step.
    const step = Math.floor(Math.log2(frequencyHz) * POINTS_PER_OCTAVE) * 2 + (active === noise ? 0 : 1);
    const sum = this.sums.get(step) ?? [0, 0, 0, 0, 0];
    const weight = Math.max(active, noise);
    sum[0] += frequencyHz * weight;
    sum[1] += weight;
    sum[2] += active;
    sum[3] += noise;
    sum[4] += signal;
    this.sums.set(step, sum);
  }

  result(): Omit<Evidence, 'noiseInBandPower' | 'wienerPower'> {
    const rows = [...this.sums.values()].filter((sum) => sum[1] > 0);
    const total = (index: number) => rows.reduce((all, row) => all + row[index], 0);
    return {
      frequencyHz: Float64Array.from(rows, (row) => row[0] / row[1]),
      active: Float64Array.from(rows, (row) => row[2]),
      noise: Float64Array.from(rows, (row) => row[3]),
      signal: Float64Array.from(rows, (row) => row[4]),
      noisePower: total(3),
      signalPower: total(4),
    };
  }
}
