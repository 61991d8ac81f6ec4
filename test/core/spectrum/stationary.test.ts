import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { ActivityFold, type ActivityWindow, stationaryStretches } from '../../../src/core/spectrum/stationary.ts';
import { normalNumbers, samplesOf } from './noise.ts';

const RATE = 100;

/** Activity of runs that follow on from each other in time, pushed in blocks of one length. */
function activity(runs: readonly Float64Array[], block = 1000): ActivityWindow[] {
  const fold = new ActivityFold({ rateHz: RATE });
  let seconds = 0;
  for (const run of runs) {
    for (let from = 0; from < run.length; from += block)
      fold.push(run.subarray(from, from + block), from === 0, seconds + from / RATE);
    seconds += run.length / RATE + 5;
  }
  return fold.result();
}

const part = (...runs: Float64Array[]) => stationaryStretches(activity(runs), RATE);
const noise = (count: number, seed: number) => samplesOf(count, normalNumbers(seed));

/** Noise whose samples from … to − 1 are louder, or moved. */
function disturbed(
  count: number,
  seed: number,
  from: number,
  to: number,
  change: (value: number, i: number) => number,
) {
  return noise(count, seed).map((value, i) => (i >= from && i < to ? change(value, i) : value));
}

describe('ActivityFold', () => {
  it('gives the same bits whatever the blocks (any length of block and runs)', () => {
    const samples = noise(3000, 1).map((value) => value + 1e6);
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 3000 }), fc.integer({ min: 1, max: 2999 }), (block, cut) => {
        const runs = [samples.subarray(0, cut), samples.subarray(cut)];
        expect(activity(runs, block)).toEqual(activity(runs, 3000));
      }),
      { numRuns: 60 },
    );
  });

  it('covers every sample once, in windows of 64, each run on its own', () => {
    const windows = activity([noise(200, 1), noise(64, 2), noise(10, 3)]);
    expect(windows.map(({ run, firstSample, samples }) => [run, firstSample, samples])).toEqual([
      [0, 0, 64],
      [0, 64, 64],
      [0, 128, 64],
      [0, 192, 8],
      [1, 0, 64],
      [2, 0, 10],
    ]);
    expect(windows.map((window) => window.startSeconds)).toEqual([0, 0.64, 1.28, 1.92, 7, 12.64]);
  });

  it('keeps its memory bounded: windows double in length, and means and variances stay those of the whole', () => {
    const samples = noise(600_000, 4);
    const windows = activity([samples], 65_536);
    expect(windows.length).toBeLessThanOrEqual(4096);
    expect(windows.length).toBeGreaterThan(2048);
    expect(windows.every((window, i) => window.firstSample === i * windows[0].samples)).toBe(true);
    const weighted = (value: (window: ActivityWindow) => number) =>
      windows.reduce((sum, window) => sum + value(window) * window.samples, 0) / samples.length;
    expect(weighted(() => 1)).toBe(1);
    expect(weighted((window) => window.mean)).toBeCloseTo(
      samples.reduce((sum, value) => sum + value, 0) / samples.length,
      12,
    );
    expect(weighted((window) => window.variance)).toBeCloseTo(1, 2);
  });

  it('survives more runs than it keeps windows', () => {
    const fold = new ActivityFold({ rateHz: RATE });
    for (let run = 0; run < 20_000; run++) fold.push(new Float64Array(3), true, run);
    expect(fold.result().length).toBe(20_000);
  });

  it('does not see a straight line (any slope and offset)', () => {
    fc.assert(
      fc.property(
        fc.double({ min: -100, max: 100, noNaN: true }),
        fc.double({ min: -1e5, max: 1e5, noNaN: true }),
        (slope, offset) => {
          const plain = activity([noise(64, 5)])[0];
          const tilted = activity([noise(64, 5).map((value, i) => value + offset + slope * i)])[0];
          expect(tilted.variance / plain.variance).toBeCloseTo(1, 6);
          expect(tilted.mean).toBeCloseTo(plain.mean + offset + slope * 31.5, 6);
        },
      ),
    );
  });

  it('has no variance to tell of one or two samples', () => {
    expect(activity([noise(1, 1), noise(2, 2)]).map((window) => window.variance)).toEqual([0, 0]);
  });
});

describe('stationaryStretches', () => {
  it.each([64, 100, 1000, 20_000, 400_000])('keeps all of %d samples of noise', (count) => {
    for (let seed = 1; seed <= (count > 1e5 ? 2 : 20); seed++) {
      const { stretches, usedSamples, totalSamples, reason } = part(noise(count, seed));
      expect(stretches).toEqual([{ run: 0, firstSample: 0, samples: count }]);
      expect([usedSamples, totalSamples, reason]).toEqual([count, count, null]);
    }
  });

  it('hardly ever cuts what is alike: 400 recordings of noise', () => {
    let cut = 0;
    for (let seed = 1; seed <= 400; seed++) if (part(noise(6400, 1000 + seed)).reason !== null) cut++;
    expect(cut).toBeLessThanOrEqual(4);
  });

  it.each([
    ['slow drift', (i: number) => 30 * Math.sin(i / 9000)],
    ['a straight drift', (i: number) => 0.01 * i],
    ['a strong line', (i: number) => 5 * Math.sin(0.9 * i)],
    ['two lines that beat', (i: number) => 3 * Math.sin(0.5 * i) + 3 * Math.sin(0.502 * i)],
    ['a line slower than a window', (i: number) => 3 * Math.sin(0.03 * i)],
  ])('keeps noise with %s', (_, added) => {
    for (let seed = 1; seed <= 5; seed++)
      expect(part(noise(20_000, seed).map((value, i) => value + added(i))).reason).toBeNull();
  });

  it('keeps noise of a random walk', () => {
    for (let seed = 1; seed <= 20; seed++) {
      let sum = 0;
      expect(
        part(
          noise(20_000, seed).map((value) => {
            sum += value;
            return sum;
          }),
        ).reason,
      ).toBeNull();
    }
  });

  it('cuts out a loud part and keeps both sides', () => {
    const { stretches, reason } = part(disturbed(20_000, 1, 8000, 10_000, (value) => 8 * value));
    expect(stretches.length).toBe(2);
    expect(stretches[0].firstSample).toBe(0);
    expect(stretches[0].samples).toBeGreaterThan(7600);
    expect(stretches[0].samples).toBeLessThanOrEqual(8000);
    expect(stretches[1].firstSample).toBeGreaterThanOrEqual(10_000);
    expect(stretches[1].firstSample).toBeLessThan(10_400);
    expect(reason).toMatch(/^2\d\.\d s of it are up to 8\.\d times as loud as the rest$/);
  });

  it('cuts off a loud end, and a short calm rest behind it', () => {
    const { stretches, usedSamples } = part(disturbed(20_000, 2, 17_000, 19_500, (value) => 10 * value));
    expect(stretches.length).toBe(1);
    expect(usedSamples).toBeGreaterThan(16_600);
    expect(usedSamples).toBeLessThanOrEqual(17_000);
  });

  it('cuts where the mean jumps, and says so', () => {
    const { stretches, reason } = part(disturbed(20_000, 3, 9000, 20_000, (value) => value + 10));
    expect(stretches.length).toBe(2);
    expect(stretches[0].samples).toBeLessThanOrEqual(9000);
    expect(reason).toMatch(/mean jumps/);
  });

  it('cuts out slow movement that is no louder than the noise', () => {
    const bump = (value: number, i: number) => value + 6 * Math.sin((2 * Math.PI * (i - 12_000)) / 400);
    const { stretches } = part(disturbed(20_000, 4, 12_000, 12_800, bump));
    expect(stretches.length).toBe(2);
    expect(stretches[0].samples).toBeLessThanOrEqual(12_000);
    expect(stretches[0].samples).toBeGreaterThan(11_000);
  });

  it('cuts out a part that fell silent', () => {
    const { stretches, reason } = part(disturbed(20_000, 5, 5000, 10_000, (value) => value / 10));
    expect(stretches.length).toBe(2);
    expect(reason).toMatch(/fainter/);
  });

  it('does not shred a recording for a few outliers', () => {
    const spikes = [1000, 6000, 11_000, 16_000];
    const samples = noise(20_000, 6).map((value, i) => (spikes.includes(i) ? value + 30 : value));
    expect(part(samples).stretches.length).toBe(1);
  });

  it('does not let them poison it either: what stays in adds less than a tenth to the power', () => {
    for (const loudness of [2, 3, 5, 10, 100]) {
      const samples = disturbed(20_000, 7, 4000, 4600, (value) => loudness * value);
      const { stretches } = part(samples);
      let [sum, count] = [0, 0];
      for (const { firstSample, samples: length } of stretches) {
        for (const value of samples.subarray(firstSample, firstSample + length)) sum += value ** 2;
        count += length;
      }
      // Below four times the variance nothing counts as disturbed: 600 samples of it add 9 % more.
      expect(sum / count).toBeLessThan(1.22);
    }
  });

  it('drops a short run in motion behind a gap, as on the launch pad', () => {
    const motion = samplesOf(60, (i) => 0.01 * i * i);
    const { stretches, usedSamples, totalSamples } = part(noise(500, 8), noise(540, 9), motion);
    expect(stretches.map((stretch) => stretch.run)).toEqual([0, 1]);
    expect(usedSamples).toBe(1040);
    expect(totalSamples).toBe(1100);
  });

  it('keeps something always, and every stretch within its run (any runs, any loudness)', () => {
    const run = fc.record({
      samples: fc.integer({ min: 1, max: 2000 }),
      loudness: fc.double({ min: 0, max: 1e3, noNaN: true }),
    });
    fc.assert(
      fc.property(fc.array(run, { minLength: 1, maxLength: 6 }), (runs) => {
        const samples = runs.map(({ samples: count, loudness }, i) =>
          noise(count, i + 1).map((value) => value * loudness),
        );
        const { stretches, usedSamples, totalSamples } = part(...samples);
        expect(stretches.length).toBeGreaterThan(0);
        expect(totalSamples).toBe(runs.reduce((sum, { samples: count }) => sum + count, 0));
        expect(usedSamples).toBe(stretches.reduce((sum, stretch) => sum + stretch.samples, 0));
        for (const { run: index, firstSample, samples: count } of stretches) {
          expect(firstSample).toBeGreaterThanOrEqual(0);
          expect(firstSample + count).toBeLessThanOrEqual(runs[index].samples);
        }
      }),
      { numRuns: 60 },
    );
  });

  it('has nothing to say of nothing', () => {
    expect(() => stationaryStretches([], RATE)).toThrow(RangeError);
  });
});
