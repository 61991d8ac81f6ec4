import { describe, expect, it } from 'vitest';
import { uniformNumbers } from '../../../src/core/advice/random.ts';
import { findLines, findPeaks, type Peak } from '../../../src/core/spectrum/lines.ts';
import { levelFrom, normalNumbers, samplesFor, samplesOf } from './noise.ts';

const SEGMENT = 1024;

/** Rate equal to the segment's length: frequencies in Hz are bins. */
const level = (samples: Float64Array) => levelFrom(samples, SEGMENT, SEGMENT);

/** Amplitude of a sine that stands so many dB above white noise of variance 1 when right on a bin: A²/2 = density·1.5 bins. */
const amplitudeAt = (aboveFloorDb: number) => Math.sqrt(2 * 1.5 * (2 / SEGMENT) * 10 ** (aboveFloorDb / 10));

const sine = (amplitude: number, bins: number, phase: number) => (i: number) =>
  amplitude * Math.sin((2 * Math.PI * bins * i) / SEGMENT + phase);

const rms = (values: readonly number[]) =>
  Math.sqrt(values.reduce((sum, value) => sum + value ** 2, 0) / values.length);
const lines = (peaks: readonly Peak[]) => peaks.filter((peak) => peak.kind === 'line');

/** Errors of many sines at random places in white noise. */
function measure(aboveFloorDb: number, segments: number, trials: number) {
  const uniform = uniformNumbers(31 * segments + aboveFloorDb);
  const normal = normalNumbers(77 * segments + aboveFloorDb);
  const amplitude = amplitudeAt(aboveFloorDb);
  const result = { bins: [] as number[], amplitudeDb: [] as number[], beyondTolerance: 0, heightDb: 0, others: 0 };
  for (let trial = 0; trial < trials; trial++) {
    const at = 20 + uniform() * (SEGMENT / 2 - 40);
    const tone = sine(amplitude, at, 2 * Math.PI * uniform());
    const peaks = findPeaks(level(samplesOf(samplesFor(SEGMENT, segments), (i) => normal() + tone(i))));
    const hit = lines(peaks).find((peak) => Math.abs(peak.frequencyHz - at) < 1);
    result.others += peaks.length - (hit ? 1 : 0);
    if (hit === undefined) continue;
    result.bins.push(hit.frequencyHz - at);
    result.amplitudeDb.push(20 * Math.log10(hit.amplitude / amplitude));
    result.heightDb += hit.aboveFloorDb / trials;
    if (Math.abs(hit.frequencyHz - at) > hit.toleranceHz) result.beyondTolerance++;
  }
  return result;
}

describe('a sine in white noise, anywhere between bins', () => {
  it.each([
    // dB above the floor, segments, frequency error in bins (rms), amplitude error in dB (rms)
    [20, 4, 0.04, 0.5],
    [20, 20, 0.016, 0.2],
    [20, 40, 0.012, 0.16],
    [30, 20, 0.005, 0.07],
    [40, 20, 0.002, 0.025],
    [60, 20, 0.0005, 0.005],
  ])('%d dB, %d segments: within %d bins and %d dB', (aboveFloorDb, segments, bins, decibels) => {
    const found = measure(aboveFloorDb, segments, 80);
    expect(found.bins.length).toBe(80);
    expect(found.others).toBeLessThanOrEqual(1);
    expect(rms(found.bins)).toBeLessThan(bins);
    expect(rms(found.amplitudeDb)).toBeLessThan(decibels);
    // A peak that falls between bins reads up to 1.42 dB low (Harris 1978, scallop loss); the noise adds to it.
    expect(found.heightDb).toBeGreaterThan(aboveFloorDb - 1.42);
    expect(found.heightDb).toBeLessThan(aboveFloorDb + 0.5);
  });

  it.each([
    [6, 40],
    [10, 20],
    [14, 7],
    [30, 4],
  ])('%d dB, %d segments: the tolerance covers two standard deviations', (aboveFloorDb, segments) => {
    const found = measure(aboveFloorDb, segments, 150);
    expect(found.bins.length).toBeGreaterThan(140);
    expect(found.beyondTolerance / found.bins.length).toBeLessThan(0.08);
    expect(Math.abs(found.amplitudeDb.reduce((sum, value) => sum + value, 0) / found.bins.length)).toBeLessThan(0.15);
  });

  it('goes unseen where it hardly reaches the floor', () => {
    expect(measure(-6, 20, 40).bins.length).toBe(0);
  });
});

describe('several sines', () => {
  const pair = (spacing: number, weakerDb: number, seed: number) => {
    const uniform = uniformNumbers(seed);
    const normal = normalNumbers(seed);
    const at = 200 + 100 * uniform();
    const strong = sine(1, at, 6 * uniform());
    const weak = sine(10 ** (-weakerDb / 20), at + spacing, 6 * uniform());
    const peaks = findPeaks(level(samplesOf(samplesFor(SEGMENT, 20), (i) => strong(i) + weak(i) + 0.003 * normal())));
    return { at, peaks };
  };

  it.each([
    // spacing in bins, dB by which the second is weaker, error of its frequency in bins and of its amplitude in dB
    [3, 0, 0.1, 0.1],
    [4, 20, 0.25, 0.5],
    [5, 20, 0.05, 0.1],
    [6, 40, 0.3, 1],
    [10, 40, 0.1, 0.4],
    [40, 60, 0.1, 1],
  ])('%d bins apart, the second %d dB weaker: both, and nothing else', (spacing, weakerDb, bins, decibels) => {
    for (let seed = 1; seed <= 25; seed++) {
      const { at, peaks } = pair(spacing, weakerDb, seed);
      expect(peaks.map((peak) => peak.kind)).toEqual(['line', 'line']);
      expect(Math.abs(peaks[1].frequencyHz - at - spacing)).toBeLessThan(bins);
      expect(Math.abs(20 * Math.log10(peaks[1].amplitude) + weakerDb)).toBeLessThan(decibels);
    }
  });

  it('closer than a main lobe are one line', () => {
    for (let seed = 1; seed <= 25; seed++) expect(pair(1.2, 3, seed).peaks.length).toBe(1);
  });

  it('20 harmonics five bins apart are all found', () => {
    const normal = normalNumbers(20);
    const comb = samplesOf(samplesFor(SEGMENT, 22), (i) => {
      let sum = 0.1 * normal();
      for (let n = 1; n <= 20; n++) sum += (2 / n) * Math.sin((2 * Math.PI * 5.3 * n * i) / SEGMENT + n * n);
      return sum;
    });
    expect(lines(findPeaks(level(comb))).map((peak) => Math.round(peak.frequencyHz / 5.3))).toEqual(
      Array.from({ length: 20 }, (_, n) => n + 1),
    );
  });
});

describe('a very strong line', () => {
  it('brings no side lobes with it, 100 dB above the floor', () => {
    const uniform = uniformNumbers(3);
    const normal = normalNumbers(3);
    for (let trial = 0; trial < 25; trial++) {
      const tone = sine(amplitudeAt(100), 30 + 450 * uniform(), 6 * uniform());
      expect(findPeaks(level(samplesOf(samplesFor(SEGMENT, 20), (i) => tone(i) + normal()))).length).toBe(1);
    }
  });

  it.each([20.3, 60.3, 200.3])(
    'at bin %d stands as high as it is, though its side lobes fill the half octave around it',
    (at) => {
      const normal = normalNumbers(6);
      const tone = sine(amplitudeAt(80), at, 1);
      const weak = sine(amplitudeAt(14), at + 25, 1);
      const peaks = findPeaks(level(samplesOf(samplesFor(SEGMENT, 20), (i) => tone(i) + weak(i) + normal())));
      expect(peaks.map((peak) => Math.round(peak.frequencyHz - at + 1))).toEqual([1, 26]);
      // 0.3 bins off costs 0.5 dB of the height.
      expect(Math.abs(peaks[0].aboveFloorDb - 79.5)).toBeLessThan(3.5);
      expect(Math.abs(peaks[1].aboveFloorDb - 13.5)).toBeLessThan(2);
    },
  );

  it('stands alone without any noise', () => {
    for (const at of [30.5, 100, 333.3]) {
      const [line, ...others] = findPeaks(level(samplesOf(8000, sine(2, at, 1))));
      expect(others).toEqual([]);
      expect(line.frequencyHz).toBeCloseTo(at, 3);
      expect(line.amplitude).toBeCloseTo(2, 3);
      expect(line.width).toBeGreaterThan(1.4);
      expect(line.width).toBeLessThan(2.1);
    }
  });
});

describe('a peak broader than a line', () => {
  /** White noise through a resonance of quality q at a random frequency, over a floor. */
  function resonance(q: number, seed: number): Peak[] {
    const rateHz = 1000;
    const uniform = uniformNumbers(seed);
    const normal = normalNumbers(seed);
    const atHz = 50 + 300 * uniform();
    const radius = Math.exp((-Math.PI * atHz) / q / rateHz);
    const turn = 2 * radius * Math.cos((2 * Math.PI * atHz) / rateHz);
    let [last, before] = [0, 0];
    const samples = samplesOf(samplesFor(2048, 22), () => {
      const value = turn * last - radius * radius * before + normal();
      before = last;
      last = value;
      return 2 * (1 - radius) * value + 0.2 * normal();
    });
    return findPeaks(levelFrom(samples, 2048, rateHz));
  }

  it.each([5, 10, 20, 50])('a resonance of quality %d is no line, whatever its scatter', (q) => {
    let falseLines = 0;
    for (let seed = 1; seed <= 40; seed++) falseLines += lines(resonance(q, seed)).length;
    expect(falseLines).toBeLessThanOrEqual(1);
  });

  it('of quality 20 or 50 is told as one, with its width: π/2 times the half-power width f/q, less what the cut at a tenth leaves out', () => {
    for (const q of [20, 50]) {
      const found = Array.from({ length: 40 }, (_, seed) => resonance(q, seed + 1)).flat();
      expect(found.length).toBeLessThanOrEqual(44);
      expect(found.length).toBeGreaterThanOrEqual(38);
      const relative = found.map((peak) => (peak.width / peak.frequencyHz) * q);
      expect(rms(relative)).toBeGreaterThan(0.6);
      expect(rms(relative)).toBeLessThan(1.8);
    }
  });

  it('a sine that wanders by a thousandth is one line with its full power', () => {
    for (let seed = 1; seed <= 15; seed++) {
      const normal = normalNumbers(seed);
      let phase = 0;
      let drift = 0;
      const samples = samplesOf(samplesFor(2048, 22), () => {
        drift = 0.9995 * drift + Math.sqrt(1 - 0.9995 ** 2) * normal();
        phase += (2 * Math.PI * 200 * (1 + 0.001 * drift)) / 1000;
        return Math.sin(phase) + 0.3 * normal();
      });
      const peaks = findPeaks(levelFrom(samples, 2048, 1000));
      expect(peaks.map((peak) => peak.kind)).toEqual(['line']);
      expect(Math.abs(peaks[0].frequencyHz - 200)).toBeLessThan(0.3);
      expect(Math.abs(20 * Math.log10(peaks[0].amplitude))).toBeLessThan(0.3);
    }
  });
});

describe('findLines', () => {
  it('gives lines by frequency, families named, folded frequencies listed', () => {
    const normal = normalNumbers(8);
    const tones = [
      { hz: 48.62, amplitude: 0.01 },
      { hz: 24.31, amplitude: 0.02 },
      { hz: 50.02, amplitude: 0.015 },
    ];
    const samples = samplesOf(24_000, (i) =>
      tones.reduce(
        (sum, { hz, amplitude }) => sum + amplitude * Math.sin((2 * Math.PI * hz * i) / 200),
        9.81 + 0.05 * normal(),
      ),
    );
    const found = findLines(levelFrom(samples, 2048, 200));
    expect(found.map((line) => line.family)).toEqual(['24.3 Hz × 1', '24.3 Hz × 2', 'mains 50 Hz × 1']);
    expect(found[0].frequencyHz).toBeCloseTo(24.31, 1);
    expect(found[2].foldedFrom[0].frequencyHz).toBeCloseTo(149.98, 1);
    expect(found[2].foldedFrom[0].mains).toBe('mains 50 Hz × 3');
  });

  it('finds nothing in nothing, and nothing in spectra of a few bins', () => {
    expect(findLines(level(new Float64Array(5000)))).toEqual([]);
    for (const segment of [4, 8, 16]) expect(findLines(levelFrom(samplesOf(64, Math.sin), segment, 1))).toEqual([]);
  });

  it('does not see drift or an offset', () => {
    const normal = normalNumbers(10);
    const samples = samplesOf(samplesFor(SEGMENT, 20), (i) => 1e4 + 0.01 * i + 5e-7 * i * i + normal());
    expect(findPeaks(level(samples))).toEqual([]);
  });
});
