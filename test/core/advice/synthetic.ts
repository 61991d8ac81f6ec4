import type { BandPowers } from '../../../src/core/advice/band-powers.ts';
import type { LevelSpectrum, Spectrum } from '../../../src/core/spectrum/spectrum.ts';

/** Spectrum whose density is a given function, on equal bins up to Nyquist, with the same degrees of freedom everywhere. */
export function spectrumOf(options: {
  rateHz: number;
  binHz: number;
  dof: number;
  density: (frequencyHz: number) => number;
}): Spectrum {
  const points = Math.floor(options.rateHz / 2 / options.binHz);
  const frequencyHz = Float64Array.from({ length: points }, (_, i) => (i + 1) * options.binHz);
  return {
    rateHz: options.rateHz,
    frequencyHz,
    density: frequencyHz.map(options.density),
    degreesOfFreedom: frequencyHz.map(() => options.dof),
    widthHz: frequencyHz.map(() => options.binHz),
  };
}

/** One level with that density, all its groups alike. */
export function levelOf(options: {
  rateHz: number;
  segmentSamples: number;
  segments: number;
  density: (frequencyHz: number) => number;
}): LevelSpectrum {
  const binHz = options.rateHz / options.segmentSamples;
  const density = Float64Array.from({ length: options.segmentSamples / 2 + 1 }, (_, k) => options.density(k * binHz));
  const perGroup = Math.max(1, Math.floor(options.segments / 8));
  return {
    rateHz: options.rateHz,
    segmentSamples: options.segmentSamples,
    density,
    segments: options.segments,
    degreesOfFreedom: 2 * options.segments,
    groups: Array.from({ length: 8 }, () => ({ segments: perGroup, density })),
  };
}

/** A spectrum's points taken as steps of power, without groups. */
export function powersOf({ frequencyHz, widthHz, density }: Spectrum): BandPowers {
  return { frequencyHz, widthHz, power: density.map((value, i) => value * widthHz[i]), groups: [], segments: [] };
}
