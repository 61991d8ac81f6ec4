import type { LevelSpectrum } from './spectrum.ts';
import { addPowers, pairTransform } from './transform.ts';
import { HANN } from './window.ts';

/** What a Welch estimate is to be made of. */
export interface WelchOptions {
  readonly rateHz: number;
  /** Segment lengths, each a power of two from 4 on. */
  readonly segmentSamples: readonly number[];
  /** Samples about to come, over all runs; only decides which segments form a group. */
  readonly expectedSamples: number;
  /** Groups of consecutive segments kept apart for resampling. Default 8. */
  readonly groups?: number;
}

/**
 * Fold that estimates the one-sided power spectral density of one channel at several segment lengths in one pass:
 * Welch (1967, IEEE Trans. AU-15:70), Hann window, 50 % overlap, each segment's mean removed. Segments never cross a run.
 * Results do not depend on how the samples are cut into blocks, not even in the last bit.
 */
export class WelchFold {
  private readonly levels: readonly LevelFold[];

  /** Throws RangeError where a segment length is no power of two or under 4. */
  constructor(options: WelchOptions) {
    this.levels = options.segmentSamples.map((samples) => new LevelFold(samples, options));
  }

  /** Takes the next samples; `startsRun` is true where they do not follow on from the ones before. */
  push(samples: Float64Array, startsRun: boolean): void {
    for (const level of this.levels) {
      if (startsRun) level.endRun();
      level.push(samples);
    }
  }

  /** Spectra of the levels that had at least one segment, in the order asked for. Ends the last run. */
  result(): LevelSpectrum[] {
    return this.levels.flatMap((level) => {
      level.endRun();
      return level.result();
    });
  }
}

interface Group {
  segments: number;
  readonly powers: Float64Array;
}

/** One segment length. Holds one and a half segments, so that two overlapping ones go through one transform. */
class LevelFold {
  private readonly samples: number;
  private readonly hop: number;
  private readonly rateHz: number;
  private readonly buffer: Float64Array;
  private readonly groupLimit: number;
  private readonly expectedSegments: number;
  private readonly groups: Group[] = [];
  private filled = 0;
  private segments = 0;
  private overlaps = 0;
  private runHasSegments = false;

  constructor(samples: number, options: WelchOptions) {
    if (!Number.isInteger(Math.log2(samples)) || samples < 4)
      throw new RangeError(`A segment's length must be a power of two from 4 on, not ${samples}`);
    this.samples = samples;
    this.hop = samples / 2;
    this.rateHz = options.rateHz;
    this.buffer = new Float64Array(samples + this.hop);
    this.groupLimit = options.groups ?? 8;
    this.expectedSegments = Math.max(1, Math.floor(options.expectedSamples / this.hop) - 1);
  }

  push(block: Float64Array): void {
    for (let offset = 0; offset < block.length; ) {
      const end = Math.min(block.length, offset + this.buffer.length - this.filled);
      this.buffer.set(block.subarray(offset, end), this.filled);
      this.filled += end - offset;
      offset = end;
      if (this.filled === this.buffer.length) this.transformTwo();
    }
  }

  endRun(): void {
    if (this.filled >= this.samples) this.transformOne();
    this.filled = 0;
    this.runHasSegments = false;
  }

  result(): LevelSpectrum[] {
    const { segments, samples } = this;
    if (segments === 0) return [];
    const { window } = pairTransform(samples);
    const scale = 2 / (this.rateHz * window.reduce((sum, weight) => sum + weight * weight, 0));
    const total = new Float64Array(samples / 2 + 1);
    for (const { powers } of this.groups) for (let k = 0; k < total.length; k++) total[k] += powers[k];
    // Overlapping segments are correlated: K²/(K + 2ρ²·overlaps), twice (Welch 1967; Percival & Walden 1993, eq. 292b).
    const averages = segments ** 2 / (segments + 2 * HANN.overlapCorrelation ** 2 * this.overlaps);
    return [
      {
        rateHz: this.rateHz,
        segmentSamples: samples,
        density: toDensity(total, scale / segments),
        segments,
        degreesOfFreedom: 2 * averages,
        groups: this.groups.map((group) => ({
          segments: group.segments,
          density: toDensity(group.powers, scale / group.segments),
        })),
      },
    ];
  }

  private transformTwo(): void {
    const { samples, hop, buffer } = this;
    const transform = pairTransform(samples);
    const { input, window } = transform;
    const shared = sumOf(buffer, hop, samples);
    const firstMean = (sumOf(buffer, 0, hop) + shared) / samples;
    const secondMean = (shared + sumOf(buffer, samples, samples + hop)) / samples;
    for (let n = 0; n < samples; n++) {
      input[2 * n] = (buffer[n] - firstMean) * window[n];
      input[2 * n + 1] = (buffer[n + hop] - secondMean) * window[n];
    }
    transform.run();
    const first = this.nextGroup();
    const second = this.nextGroup();
    addPowers(transform, first.powers, second.powers);
    buffer.copyWithin(0, samples);
    this.filled = hop;
  }

  private transformOne(): void {
    const { samples, hop, buffer } = this;
    const transform = pairTransform(samples);
    const { input, window } = transform;
    const mean = (sumOf(buffer, 0, hop) + sumOf(buffer, hop, samples)) / samples;
    for (let n = 0; n < samples; n++) {
      input[2 * n] = (buffer[n] - mean) * window[n];
      input[2 * n + 1] = 0;
    }
    transform.run();
    const { powers } = this.nextGroup();
    addPowers(transform, powers, powers);
  }

  /** Counts a segment and gives the group it belongs to. */
  private nextGroup(): Group {
    const wanted = Math.floor((this.segments * this.groupLimit) / Math.max(this.expectedSegments, this.groupLimit));
    const index = Math.min(this.groupLimit - 1, wanted);
    let group = this.groups[index];
    if (group === undefined) {
      group = { segments: 0, powers: new Float64Array(this.samples / 2 + 1) };
      this.groups[index] = group;
    }
    group.segments++;
    this.segments++;
    if (this.runHasSegments) this.overlaps++;
    this.runHasSegments = true;
    return group;
  }
}

function sumOf(values: Float64Array, from: number, to: number): number {
  let sum = 0;
  for (let i = from; i < to; i++) sum += values[i];
  return sum;
}

/** One-sided density: 0 Hz and Nyquist have no mirror image and count once. */
function toDensity(powers: Float64Array, scale: number): Float64Array {
  const density = new Float64Array(powers.length);
  for (let k = 0; k < powers.length; k++) density[k] = powers[k] * scale;
  density[0] /= 2;
  density[density.length - 1] /= 2;
  return density;
}
