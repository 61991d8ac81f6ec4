import type { Band, Spectrum } from '../spectrum/spectrum.ts';
import type { BandPowers } from './band-powers.ts';
import { densityAt } from './density.ts';

/**
 * What the two recordings say about signal and noise, as powers at frequencies: what every expected error is summed from.
 * All arrays of one length; powers in unit².
 */
export interface Evidence {
  /** Rate at which the filter is to run, Hz. */
  readonly rateHz: number;
  readonly frequencyHz: Float64Array;
  /** tan(π·frequency/rate): where the bilinear transform puts each frequency on the analog axis. */
  readonly tangent: Float64Array;
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

/** Where the tangent is still a number to reckon with. */
const NEARLY_NYQUIST = 0.4999;

/** How signal and noise are told apart. */
export interface Division {
  /** Rate at which the filter is to run, Hz. */
  readonly rateHz: number;
  /** Noise in use over noise when quiet, as a ratio of powers. */
  readonly noiseGainPower: number;
  readonly keep: Band;
  /** As far as any signal reaches, Hz. */
  readonly signalHighHz: number;
  /** Bands present only in use: all noise. */
  readonly inUse: readonly Band[];
}

/**
 * Lays the evidence out. Noise in use is the quiet power times the noise gain; within `inUse` bands all of the active power
 * is noise. The active recording speaks up to `signalHighHz`; beyond, what the two differ by is chance, and on strong lines
 * more than all that a filter leaves. Both keep steps of their own; `quietSpectrum` tells the noise at the active ones.
 */
export function layEvidence(
  active: BandPowers,
  quiet: BandPowers,
  quietSpectrum: Spectrum,
  { rateHz, noiseGainPower, keep, signalHighHz, inUse }: Division,
): Evidence {
  const rows: [frequencyHz: number, active: number, noise: number, signal: number][] = [];
  const onlyInUse = (f: number) => inUse.some((band) => f >= band.lowHz && f <= band.highHz);
  const kept = (f: number) => f >= keep.lowHz && f <= keep.highHz;
  let wienerPower = 0;
  active.frequencyHz.forEach((f, i) => {
    const power = active.power[i];
    if (onlyInUse(f)) rows.push([f, power, power, 0]);
    else if (f <= signalHighHz) {
      const noise = noiseGainPower * densityAt(quietSpectrum, f) * active.widthHz[i];
      const signal = kept(f) ? Math.max(0, power - noise) : 0;
      if (signal > 0) wienerPower += (signal * noise) / (signal + noise);
      rows.push([f, power, 0, signal]);
    }
  });
  let noiseInBandPower = 0;
  quiet.frequencyHz.forEach((f, i) => {
    if (onlyInUse(f)) return;
    const noise = noiseGainPower * quiet.power[i];
    if (kept(f)) noiseInBandPower += noise;
    rows.push([f, f > signalHighHz ? noise : 0, noise, 0]);
  });
  const column = (index: 0 | 1 | 2 | 3) => Float64Array.from(rows, (row) => row[index]);
  const total = (index: 2 | 3) => rows.reduce((sum, row) => sum + row[index], 0);
  const frequencyHz = column(0);
  return {
    rateHz,
    frequencyHz,
    tangent: frequencyHz.map((f) => Math.tan(Math.PI * Math.min(f / rateHz, NEARLY_NYQUIST))),
    active: column(1),
    noise: column(2),
    signal: column(3),
    noisePower: total(2),
    signalPower: total(3),
    noiseInBandPower,
    wienerPower,
  };
}
