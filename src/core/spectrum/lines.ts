import type { Floor } from './floor.ts';
import { foldedFrom } from './folding.ts';
import { nameFamilies } from './harmonics.ts';
import { FIRST_BIN, floorOfBins } from './line-floor.ts';
import { chiSquareQuantile, fQuantile } from './quantiles.ts';
import type { LevelSpectrum, NoiseLine } from './spectrum.ts';
import { HANN, hannLobe, hannOffset, hannSideLobes } from './window.ts';

/** How lines are told from chance and from resonances. */
export interface LineOptions {
  /** Chance that pure noise shows any line at all in one spectrum. Default 0.001. */
  readonly falseAlarms?: number;
  /** A peak wider than a sine's main lobe is still one line if it is no wider than this part of its frequency. Default 0.01. */
  readonly narrowRatio?: number;
}

/** A peak that stands out of the floor more than chance allows. */
export interface Peak {
  readonly frequencyHz: number;
  /** Uncertainty of the frequency, about two standard deviations, Hz. */
  readonly toleranceHz: number;
  /** Amplitude of a sine with the peak's power, in the channel's unit. */
  readonly amplitude: number;
  readonly aboveFloorDb: number;
  /** Width, Hz: the peak's power over its density. A steady sine shows 1.5 to 2.1 bins. */
  readonly width: number;
  /** `line`: no wider than a sine or a slightly unsteady one. `resonance`: broader than that. */
  readonly kind: 'line' | 'resonance';
}

/** Main lobe of the Hann window: two bins to either side. */
const LOBE = 2;
/** Width at a quarter of the density: exactly 2 bins for a sine, a clear factor more for a resonance. */
const WIDEST_LOBE = 3.5;
/** Power over density, bins: 2.1 at the most for a steady sine. */
const WIDEST_LINE = 2.5;
/** Bins to either side of the lobe that a line must stand out of. */
const SURROUNDINGS = 12;
/** Chance that a bin on a broad hump stands out of its surroundings. */
const LOCAL_CHANCE = 1e-4;
/** Side lobes of averaged segments stay below this multiple of their crests. */
const SIDE_LOBE_MARGIN = 4;

/**
 * Noise lines of a quiet spectrum, by frequency, with harmonic families and folded frequencies named. See `findPeaks`;
 * its resonances are left out.
 */
export function findLines(level: LevelSpectrum, options: LineOptions = {}): NoiseLine[] {
  const lines = findPeaks(level, options).filter((peak) => peak.kind === 'line');
  const families = nameFamilies(lines);
  return lines.map(({ frequencyHz, toleranceHz, amplitude, aboveFloorDb }, i) => ({
    frequencyHz,
    toleranceHz,
    amplitude,
    aboveFloorDb,
    family: families[i],
    foldedFrom: foldedFrom(frequencyHz, level.rateHz, toleranceHz),
  }));
}

/**
 * Peaks of one level above its noise floor, by frequency. A bin must exceed the floor by a χ² test at one false alarm per thousand
 * spectra (Bonferroni over the bins), the floor's own uncertainty counted in (an F test, which is the χ² test once the floor is
 * known well), and stand out of its surroundings. Strongest first; what lies within a main lobe of a stronger peak belongs to it,
 * and side lobes, falling 18 dB an octave (Harris 1978), count as floor. Frequencies come from the three bins of the main lobe,
 * amplitudes from its power less the floor. Where there are lines the floor is then estimated anew without the bins that they and
 * their side lobes fill, and the search repeated: a strong line low in frequency would otherwise lift its own floor.
 */
export function findPeaks(level: LevelSpectrum, options: LineOptions = {}): Peak[] {
  const first = new PeakSearch(level, floorOfBins(level), options);
  const peaks = first.run();
  const again = peaks.some((peak) => peak.kind === 'line')
    ? new PeakSearch(level, floorOfBins(level, first.filledBins()), options).run()
    : peaks;
  return again.sort((a, b) => a.frequencyHz - b.frequencyHz);
}

class PeakSearch {
  private readonly density: Float64Array;
  private readonly binHz: number;
  private readonly dof: number;
  /** Floor by bin; the side lobes of the lines found so far are added to it. */
  private readonly floor: Float64Array;
  /** What those side lobes reach at the most, with a margin. */
  private readonly sideLobes: Float64Array;
  private readonly floorDof: Float64Array;
  /** 0 free, 1 belongs to a line, 2 belongs to a resonance. */
  private readonly taken: Uint8Array;
  private readonly endBin: number;
  private readonly chance: number;
  private readonly narrowRatio: number;

  constructor(level: LevelSpectrum, floor: Floor, options: LineOptions) {
    this.density = level.density;
    this.binHz = level.rateHz / level.segmentSamples;
    this.dof = level.degreesOfFreedom;
    this.floor = floor.density;
    this.floorDof = floor.degreesOfFreedom;
    this.sideLobes = new Float64Array(this.density.length);
    this.taken = new Uint8Array(this.density.length);
    this.endBin = this.density.length - 2;
    this.chance = (options.falseAlarms ?? 1e-3) / Math.max(1, this.endBin - FIRST_BIN);
    this.narrowRatio = options.narrowRatio ?? 0.01;
  }

  run(): Peak[] {
    const peaks: Peak[] = [];
    for (const bin of this.candidates()) {
      if (this.taken[bin] !== 0 || !this.exceedsFloor(bin)) continue;
      const peak = this.standsOut(bin) ? this.line(bin) : this.hump(bin);
      if (peak !== null) peaks.push(peak);
    }
    return peaks;
  }

  /** Bins that lines and their side lobes fill, so that they say nothing of the floor. */
  filledBins(): Uint8Array {
    return this.taken.map((by, k) => (by === 1 || this.sideLobes[k] > this.density[k] ? 1 : 0));
  }

  /** Local maxima above the least threshold, strongest first. */
  private candidates(): number[] {
    const { density, floor } = this;
    const least = chiSquareQuantile(1 - this.chance, this.dof) / this.dof;
    const bins: number[] = [];
    for (let k = FIRST_BIN; k < this.endBin; k++) {
      if (density[k] > least * floor[k] && density[k] >= density[k - 1] && density[k] > density[k + 1]) bins.push(k);
    }
    return bins.sort((a, b) => density[b] - density[a]);
  }

  private exceedsFloor(bin: number): boolean {
    const { density, floor, floorDof, sideLobes } = this;
    if (density[bin] < sideLobes[bin] + floor[bin]) return false;
    return density[bin] > fQuantile(1 - this.chance, this.dof, floorDof[bin]) * floor[bin];
  }

  /** True where the peak is as narrow as a main lobe and rises out of both sides, as a spike on a resonance does not. */
  private standsOut(bin: number): boolean {
    const around = Math.max(this.floor[bin], this.surroundings(bin, -1), this.surroundings(bin, 1));
    const localDof = (0.5 * this.dof * SURROUNDINGS) / HANN.neighbourInflation;
    if (this.density[bin] < fQuantile(1 - LOCAL_CHANCE, this.dof, localDof) * around) return false;
    // Measured at a quarter of the height, or up to a half where the floor's own scatter would widen a weak line.
    const height = this.density[bin] - around;
    const scatter = 2 * around * Math.sqrt(2 / this.dof);
    const at = around + Math.max(height / 4, Math.min(height / 2, scatter));
    return this.reach(bin, -1, at) + this.reach(bin, 1, at) <= WIDEST_LOBE;
  }

  /** Level of the bins behind the main lobe on one side: their lower quartile, since other lines may stand among them. */
  private surroundings(bin: number, side: 1 | -1): number {
    const values: number[] = [];
    for (let d = LOBE + 1; d <= LOBE + SURROUNDINGS; d++) {
      const k = bin + side * d;
      if (k >= FIRST_BIN && k < this.endBin) values.push(this.density[k]);
    }
    if (values.length < SURROUNDINGS / 2) return 0;
    values.sort((a, b) => a - b);
    return (values[Math.floor(values.length / 4)] * this.dof) / chiSquareQuantile(0.27, this.dof);
  }

  /** Distance from a peak at which the density has fallen to a value, in bins, by straight line between bins. */
  private reach(bin: number, side: 1 | -1, value: number): number {
    const { density } = this;
    let k = bin;
    while (k + side > 0 && k + side < density.length && density[k + side] > value) k += side;
    const next = density[k + side] ?? 0;
    return Math.abs(k - bin) + (density[k] - value) / Math.max(density[k] - next, Number.MIN_VALUE);
  }

  private line(bin: number): Peak {
    const { density, floor } = this;
    const above = (k: number) => density[k] - floor[k];
    const offset = hannOffset(above(bin - 1), above(bin), above(bin + 1));
    // Where another peak stands close by, only the bins on this side of the middle are this line's.
    const half = this.freeBins(bin);
    let lobe = 0;
    let share = 0;
    for (let j = -half; j <= half; j++) {
      lobe += above(bin + j);
      share += hannLobe(j - offset);
    }
    const power = (Math.max(0, lobe) * this.binHz * HANN.noiseBandwidthBins) / share;
    const aboveFloor = density[bin] / floor[bin];
    this.take(bin - LOBE, bin + LOBE, 1);
    this.addSideLobes(bin + offset, (power * 2) / (3 * this.binHz));
    return {
      frequencyHz: (bin + offset) * this.binHz,
      toleranceHz: frequencyTolerance(aboveFloor - 1, this.dof) * this.binHz,
      amplitude: Math.sqrt(2 * power),
      aboveFloorDb: 10 * Math.log10(aboveFloor),
      width: (lobe / above(bin)) * this.binHz,
      kind: 'line',
    };
  }

  /** Bins to either side, two at the most, that no stronger peak has taken and no other peak shares. */
  private freeBins(bin: number): number {
    for (let d = 1; d <= LOBE; d++) {
      if (this.taken[bin - d] || this.taken[bin + d]) return Math.max(1, d - 1);
    }
    const rises = (side: 1 | -1) => {
      const [near, far] = [bin + side * LOBE, bin + side * (LOBE + 1)];
      return this.density[far] > this.density[near] && this.density[far] > 0.05 * this.density[bin];
    };
    return rises(1) || rises(-1) ? 1 : LOBE;
  }

  /** A peak wider than a main lobe: all bins around it down to a tenth. Null for the skirt of one found before. */
  private hump(bin: number): Peak | null {
    const { density, floor, taken } = this;
    const tenth = (k: number) => floor[k] + 0.1 * (density[bin] - floor[bin]);
    const belongs = (k: number) =>
      k >= FIRST_BIN && k < this.endBin && taken[k] === 0 && (density[k] > tenth(k) || density[k + 1] > tenth(k + 1));
    let from = bin;
    let to = bin;
    while (belongs(from - 1)) from--;
    while (belongs(to + 1)) to++;
    const skirt = taken[from - 1] === 2 || taken[to + 1] === 2;
    let power = 0;
    let moment = 0;
    for (let k = from; k <= to; k++) {
      power += density[k] - floor[k];
      moment += (density[k] - floor[k]) * k;
    }
    const widthBins = power / (density[bin] - floor[bin]);
    // A weak line may fail to stand out of scattering surroundings, and yet be no wider than a line.
    if (!skirt && widthBins <= WIDEST_LINE) return this.line(bin);
    this.take(from - LOBE, to + LOBE, 2);
    if (skirt || power <= 0) return null;
    const width = widthBins * this.binHz;
    const frequencyHz = (moment / power) * this.binHz;
    return {
      frequencyHz,
      toleranceHz: width / 2,
      amplitude: Math.sqrt(2 * power * this.binHz),
      aboveFloorDb: 10 * Math.log10(density[bin] / floor[bin]),
      width,
      kind: width <= this.narrowRatio * frequencyHz ? 'line' : 'resonance',
    };
  }

  private take(from: number, to: number, by: 1 | 2): void {
    for (let k = Math.max(0, from); k <= Math.min(this.taken.length - 1, to); k++)
      if (this.taken[k] === 0) this.taken[k] = by;
  }

  /** Raises the floor by the side lobes of a line whose density would peak at `peak`, as far as they matter. */
  private addSideLobes(position: number, peak: number): void {
    for (const side of [-1, 1]) {
      for (let d = LOBE + 1; ; d++) {
        const k = Math.round(position) + side * d;
        if (k < 0 || k >= this.floor.length) break;
        const crest = SIDE_LOBE_MARGIN * peak * hannSideLobes(k - position);
        if (crest < 0.01 * this.floor[k]) break;
        this.sideLobes[k] += crest;
        this.floor[k] += peak * hannLobe(k - position);
      }
    }
  }
}

/**
 * Two standard deviations of `hannOffset`, bins, for a line `ratio` times as strong as the floor, plus a fiftieth of a bin for
 * sources that are not quite steady. Fitted to simulated sines (test/core/spectrum/lines.test.ts), 6 to 60 dB, 4 to 40 segments.
 */
function frequencyTolerance(ratio: number, dof: number): number {
  const above = Math.max(ratio, 0.1);
  return 0.02 + (1.5 / Math.sqrt(dof * above)) * Math.sqrt(1 + 4 / above);
}
