import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type SeededRandom, seededRandom } from '../../campaign/seeded-random.ts';
import { found, judged, made, named, rounded } from './made-channel.ts';

const tone = (i: number, samplesPerPeriod: number) => Math.sin((2 * Math.PI * i) / samplesPerPeriod + 0.4);

/** Signals with nothing wrong, each with its quantisation step; 0 for none. */
const CLEAN: [title: string, step: number, value: (i: number, random: SeededRandom) => number][] = [
  ['white noise', 0, (_, random) => random.normal()],
  ['white noise in fine steps', 0.01, (_, random) => random.normal()],
  ['white noise of two steps', 0.5, (_, random) => random.normal()],
  ['uniform noise', 0, (_, random) => random.uniform()],
  ['a tone', 0, (i) => tone(i, 37.3)],
  ['a tone in whole periods', 1e-4, (i) => tone(i, 20)],
  ['a slow tone in steps, flat at its turns', 1e-3, (i) => tone(i, 200)],
  ['a slower tone in steps', 1e-3, (i) => tone(i, 1000)],
  ['noise and a strong tone', 1e-3, (i, random) => 0.05 * random.normal() + tone(i, 8.3)],
  ['two tones that beat', 1e-3, (i) => tone(i, 40) + tone(i, 41)],
  ['noise that swells and fades', 0, (i, random) => random.normal() * (1.5 + tone(i, 5000))],
  ['noise in bursts', 0, (i, random) => random.normal() * (i % 3000 < 150 ? 20 : 1)],
  [
    'blows that ring down',
    0,
    (i, random) => 0.05 * random.normal() + 4 * Math.exp(-(i % 2000) / 30) * tone(i % 2000, 9),
  ],
  ['a square wave with noise', 1e-3, (i, random) => (i % 400 < 200 ? 1 : -1) + 0.02 * random.normal()],
  ['steps up and down at odd times', 0, (i, random) => Math.sign(Math.sin(i / 90) + 0.3) + 0.02 * random.normal()],
  ['noise on a large offset', 1e-3, (_, random) => 1e5 + 0.02 * random.normal()],
];

describe('no warning where nothing is wrong', () => {
  it.each(CLEAN)('%s', (_title, step, value) => {
    for (const seed of [1, 2, 3]) {
      const samples = made(40_000, seed, value).map((x) => (step === 0 ? x : rounded(x, step)));
      expect(named(found(samples)).filter((name) => !name.startsWith('note: rounding'))).toEqual([]);
    }
  });

  it('noise of any colour and step, from a tenth of a step up', () => {
    fc.assert(
      fc.property(
        fc.integer(),
        fc.double({ min: 0, max: 0.95, noNaN: true }),
        fc.integer({ min: 0, max: 12 }),
        (seed, memory, size) => {
          let last = 0;
          const samples = made(8000, seed, (_, random) => {
            last = memory * last + random.normal();
            return Math.round(last * 0.1 * 2 ** size);
          });
          const bad = named(found(samples)).filter((name) => !/rounding/.test(name));
          expect(bad).toEqual([]);
        },
      ),
      { numRuns: 120, seed: 20 },
    );
  });

  it('no spike in two million samples of normal noise (normal law: 8 standard deviations once in 10¹⁵)', () => {
    const random = seededRandom(77);
    const runs = Array.from({ length: 20 }, () => Float64Array.from({ length: 100_000 }, () => random.normal()));
    expect(judged(runs).figures.spikes.spikes).toBe(0);
  });
});

describe('blocks', () => {
  it('of any size change nothing', () => {
    const faulty = made(6000, 5, (i, random) => {
      if (i >= 2000 && i < 2100) return 0.25;
      if (i % 1700 === 900) return 9;
      return Math.min(2, rounded(random.normal() + i / 4000, 0.01));
    });
    const runs = [faulty.slice(0, 2500), faulty.slice(2500)];
    const whole = judged(runs);
    expect(named(found(faulty)).length).toBeGreaterThan(1);
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 7000 }), (blockSamples) => {
        expect(judged(runs, 'quiet', blockSamples)).toEqual(whole);
      }),
      { numRuns: 40, seed: 3, examples: [[1], [2], [1023], [1024]] },
    );
  });
});
