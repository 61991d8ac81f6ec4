import { describe, expect, it } from 'vitest';
import { chooseInsets, InsetFold } from '../../../src/core/simulation/inset.ts';

const window = (firstSample: number, mean: number, variance: number) => ({
  run: 0,
  firstSample,
  samples: 64,
  startSeconds: firstSample / 100,
  mean,
  variance,
});

describe('chooseInsets', () => {
  it('finds the calmest and the liveliest stretch, by slow and by fast movement', () => {
    const windows = [0, 0, 5, -5, 0, 0, 0, 0].map((mean, i) => window(i * 64, mean, i === 6 || i === 7 ? 0.01 : 0.1));
    const [calm, lively] = chooseInsets(windows, 128);
    expect(calm.firstSample).toBe(6 * 64);
    expect(lively.firstSample).toBe(2 * 64);
  });

  it('shows a recording that is shorter than the stretch as a whole', () => {
    expect(chooseInsets([window(0, 0, 1)], 1000)).toMatchObject([{ firstSample: 0, samples: 64 }]);
  });
});

describe('InsetFold', () => {
  it('collects its place over blocks of any size', () => {
    const place = { title: 'x', run: 1, firstSample: 10, samples: 20 };
    const collect = (size: number) => {
      const fold = new InsetFold(place, 10);
      for (let i = 0; i < 50; i += size) {
        const samples = Float64Array.from({ length: size }, (_, k) => i + k);
        fold.push(
          { run: 1, firstSample: i, startSeconds: 100 + i / 10 },
          samples,
          samples.map((v) => -v),
        );
        fold.push({ run: 2, firstSample: i, startSeconds: 900 }, samples, samples);
      }
      return fold.result();
    };
    const whole = collect(50);
    expect([...whole.before]).toEqual(Array.from({ length: 20 }, (_, i) => 10 + i));
    expect(whole.after[0]).toBe(-10);
    expect(whole.seconds[0]).toBeCloseTo(101, 9);
    expect(collect(5)).toEqual(whole);
    expect(collect(1).before).toEqual(whole.before);
  });
});
