import { fQuantile } from '../spectrum/quantiles.ts';
import type { Spectrum } from '../spectrum/spectrum.ts';
import { HANN } from '../spectrum/window.ts';

/** Active and quiet spectra averaged over the same bands; all arrays of one length, frequencies increasing. */
export interface Comparison {
  readonly lowHz: Float64Array;
  readonly highHz: Float64Array;
  /** Mean density over the band, unit²/Hz. */
  readonly active: Float64Array;
  readonly quiet: Float64Array;
  readonly activeDof: Float64Array;
  readonly quietDof: Float64Array;
}

const BANDS_PER_OCTAVE = 12;

/**
 * Averages two spectra over common bands of a twelfth of an octave, wider where either spectrum resolves less.
 * Below the quiet spectrum's first point its first density is taken to go on.
 */
export function compareSpectra(active: Spectrum, quiet: Spectrum): Comparison {
  const topHz = Math.min(active.rateHz, quiet.rateHz) / 2;
  const activeSteps = new StepDensity(active);
  const quietSteps = new StepDensity(quiet);
  const rows: number[][] = [];
  let low = 0;
  while (low < topHz * (1 - 1e-9)) {
    const finest = Math.max(activeSteps.widthAt(low), quietSteps.widthAt(low));
    let high = Math.min(topHz, Math.max(low * 2 ** (1 / BANDS_PER_OCTAVE), low + finest));
    if (topHz - high < 0.3 * (high - low)) high = topHz;
    const a = activeSteps.mean(low, high);
    const q = quietSteps.mean(low, high);
    rows.push([low, high, a.density, q.density, a.dof, q.dof]);
    low = high;
  }
  const column = (index: number) => Float64Array.from(rows, (row) => row[index]);
  return {
    lowHz: column(0),
    highHz: column(1),
    active: column(2),
    quiet: column(3),
    activeDof: column(4),
    quietDof: column(5),
  };
}

/**
 * Marks the bands where active exceeds quiet·`noiseGainPower` by an F test with the degrees of freedom of both
 * (Fisher; table in the NIST/SEMATECH e-Handbook §1.3.6.7.3), one false alarm in a thousand comparisons, and by a third at the least.
 * In bands that hold a quiet noise line the excess must be fourfold: a line may grow in use without being signal.
 */
export function excessBands(comparison: Comparison, noiseGainPower: number, lineHz: readonly number[]): boolean[] {
  const bands = comparison.lowHz.length;
  const chance = 1e-3 / Math.max(1, bands);
  return Array.from(comparison.lowHz, (low, band) => {
    const high = comparison.highHz[band];
    const ratio = comparison.active[band] / (comparison.quiet[band] * noiseGainPower);
    const margin = 0.5 * (high - low);
    const holdsLine = lineHz.some((line) => line >= low - margin && line <= high + margin);
    if (ratio < (holdsLine ? 4 : 4 / 3)) return false;
    return ratio > fQuantile(1 - chance, comparison.activeDof[band], comparison.quietDof[band]);
  });
}

/** A spectrum as a step function of frequency, for averaging over any band. */
class StepDensity {
  private readonly spectrum: Spectrum;
  private readonly upperHz: Float64Array;

  constructor(spectrum: Spectrum) {
    this.spectrum = spectrum;
    let upper = 0;
    // The points' widths cover everything from 0 Hz on without a hole.
    this.upperHz = spectrum.widthHz.map((width) => {
      upper += width;
      return upper;
    });
  }

  widthAt(frequencyHz: number): number {
    return this.spectrum.widthHz[this.pointAt(frequencyHz)];
  }

  mean(lowHz: number, highHz: number): { density: number; dof: number } {
    const { density, degreesOfFreedom, widthHz } = this.spectrum;
    let power = 0;
    let dof = 0;
    let point = this.pointAt(lowHz);
    const smallestDof = degreesOfFreedom[point];
    for (let from = lowHz; from < highHz; point++) {
      const last = point >= this.upperHz.length - 1;
      const to = last ? highHz : Math.min(highHz, this.upperHz[point]);
      power += density[point] * (to - from);
      dof += (degreesOfFreedom[point] * (to - from)) / widthHz[point];
      from = to;
    }
    // Neighbouring bins of a Hann spectrum tell partly the same.
    return { density: power / (highHz - lowHz), dof: Math.max(dof / HANN.neighbourInflation, smallestDof) };
  }

  private pointAt(frequencyHz: number): number {
    let low = 0;
    let high = this.upperHz.length - 1;
    while (low < high) {
      const middle = (low + high) >> 1;
      if (this.upperHz[middle] > frequencyHz) high = middle;
      else low = middle + 1;
    }
    return low;
  }
}
