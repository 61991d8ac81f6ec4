import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { Clock } from '../../../src/core/recording/clock.ts';
import { newBatch } from '../../../src/core/recording/rows.ts';
import { learnTimeRule } from '../../../src/core/recording/time-rule.ts';

const even = Float64Array.from({ length: 200 }, (_, i) => i / 100);
const rule = learnTimeRule({ stamps: even, same: new Uint8Array(200) }, 1, false);

function place(stamps: readonly number[]) {
  const batch = newBatch(stamps.length, 1);
  batch.length = stamps.length;
  batch.stamps.set(stamps);
  stamps.forEach((_, i) => {
    batch.lines[i] = i + 1;
    batch.values[0][i] = i;
  });
  const clock = new Clock('made.csv', rule, false);
  clock.place(batch);
  const { length } = batch;
  return { seconds: [...batch.stamps.slice(0, length)], values: [...batch.values[0].slice(0, length)], clock };
}

describe('Clock', () => {
  it('counts from the first stamp and takes repeats out', () => {
    const { seconds, values, clock } = place([7, 7.01, 7.01, 7.02]);
    expect(seconds).toEqual([0, expect.closeTo(0.01, 12), expect.closeTo(0.02, 12)]);
    expect(values).toEqual([0, 1, 3]);
    expect(clock.repairs.repeated).toEqual({ count: 1, firstLine: 3 });
  });

  it('places a row without a stamp a period on, but never behind the next stamp', () => {
    const { seconds } = place([0, 0.01, Number.NaN, 0.013, 0.023]);
    expect(seconds).toEqual([0, 0.01, 0.02, 0.02, 0.023]);
  });

  it('drops rows without a stamp before the first, and from the sixth in a row', () => {
    const { values, clock } = place([Number.NaN, 0, ...Array(7).fill(Number.NaN), 0.08]);
    expect(values).toEqual([1, 2, 3, 4, 5, 6, 9]);
    expect(clock.repairs).toMatchObject({ filled: { count: 5, firstLine: 3 }, lost: { count: 3, firstLine: 1 } });
  });

  it('never lets time fall', () => {
    const step = fc.oneof(fc.integer({ min: 0, max: 30 }), fc.constant(null));
    fc.assert(
      fc.property(fc.array(step, { minLength: 2, maxLength: 60 }), (steps) => {
        let at = 0;
        const stamps = steps.map((each) => {
          if (each === null) return Number.NaN;
          at += each;
          return at / 1000;
        });
        const { seconds } = place(stamps);
        expect(seconds.every((each, i) => i === 0 || each >= seconds[i - 1])).toBe(true);
      }),
    );
  });
});
