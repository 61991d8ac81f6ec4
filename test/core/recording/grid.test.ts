import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { cubicWeights, interpolationLossDb } from '../../../src/core/recording/interpolation.ts';
import { lines, read, wave } from './reading.ts';

/** Stamps about `i/100` s, off by up to `share` of a period, the same at every call. */
const uneven = (i: number, share: number) => Number((i / 100 + (share / 100) * Math.sin(i * i * 1.3)).toFixed(9));

describe('missing values', () => {
  const table = (missing: (i: number) => boolean) =>
    `t [s],a,b\n${lines(200, (i) => `${(i / 100).toFixed(2)},${missing(i) ? 'NaN' : 3 * i},${wave(i)}`)}`;

  it('are bridged by a straight line up to five in a row, counted and placed', async () => {
    const { facts, runs } = await read(table((i) => (i >= 50 && i < 55) || i === 90));
    expect(runs).toHaveLength(1);
    runs[0].channels[0].forEach((value, i) => {
      expect(value).toBeCloseTo(3 * i, 9);
    });
    expect(runs[0].channels[1]).toEqual(Array.from({ length: 200 }, (_, i) => wave(i)));
    expect(facts.notes).toEqual([
      { severity: 'note', text: 'Channel "a": 6 missing values bridged by a straight line, the first in row 52.' },
    ]);
  });

  it('cut the run where six are in a row', async () => {
    const { facts, runs } = await read(table((i) => i >= 80 && i < 86));
    expect(runs.map(({ channels }) => channels[0].length)).toEqual([80, 114]);
    expect(runs[1].channels[0][0]).toBe(3 * 86);
    expect(runs[1].startSeconds).toBeCloseTo(0.86, 12);
    expect(facts).toMatchObject({ longestRunSamples: 114, gaps: [], durationSeconds: 2 });
    expect(facts.notes.map(({ text }) => text)).toEqual([
      '1 stretch of more than 5 missing values, the first from row 82; the recording is cut there.',
    ]);
  });

  it('at the ends of a run take the nearest value', async () => {
    const { runs } = await read(table((i) => i < 3 || i >= 195));
    expect(runs[0].channels[0].slice(0, 4)).toEqual([9, 9, 9, 9]);
    expect(runs[0].channels[0].slice(194)).toEqual(Array(6).fill(3 * 194));
  });

  it('take a short run out where a channel has no value in all of it', async () => {
    const text = `t [s],a,b\n${lines(203, (i) => {
      const t = i < 100 ? i / 100 : i < 103 ? 5 + i / 100 : 9 + i / 100;
      return `${t.toFixed(2)},${i >= 100 && i < 103 ? '' : wave(i)},${wave(2 * i)}`;
    })}`;
    const { facts, runs } = await read(text);
    expect(facts.gaps).toHaveLength(2);
    expect(runs.map(({ channels }) => channels[0].length)).toEqual([100, 100]);
  });

  it('are bridged by time where the stamps are uneven', async () => {
    const text = `t [s],a\n${lines(300, (i) => {
      const t = uneven(i, 0.2);
      return `${t},${i === 100 || i === 101 ? '' : 5 * t}`;
    })}`;
    const { facts, runs } = await read(text);
    expect(facts.resampled).toBe(true);
    runs[0].channels[0].forEach((value, k) => {
      expect(value).toBeCloseTo((5 * k) / facts.rateHz, 8);
    });
  });
});

describe('resampling of uneven stamps', () => {
  const recorded = (signal: (t: number) => number) =>
    `t [s],a\n${lines(2000, (i) => `${uneven(i, 0.2)},${signal(uneven(i, 0.2))}`)}`;

  it('gives cubics back exactly', async () => {
    const cubic = (t: number) => 2 + t - 0.3 * t * t + 0.02 * t ** 3;
    const { facts, runs } = await read(recorded(cubic));
    expect(facts.resampled).toBe(true);
    runs[0].channels[0].forEach((value, k) => {
      expect(Math.abs(value - cubic(k / facts.rateHz))).toBeLessThan(1e-9);
    });
  });

  it('keeps a sine of a twentieth of the rate to a thousandth, where rows taken as even are ten times worse', async () => {
    const sine = (t: number) => Math.sin(2 * Math.PI * 5 * t);
    const { facts, runs } = await read(recorded(sine));
    const rms = (error: (k: number) => number) =>
      Math.sqrt(runs[0].channels[0].reduce((sum, _, k) => sum + error(k) ** 2, 0) / runs[0].channels[0].length);
    const kept = rms((k) => runs[0].channels[0][k] - sine(k / facts.rateHz));
    const rows = rms((k) => sine(uneven(k, 0.2)) - sine(k / facts.rateHz));
    expect(kept).toBeLessThan(1e-3);
    expect(rows).toBeGreaterThan(10 * kept);
  });

  it('is said, with its cost', async () => {
    const { facts } = await read(recorded((t) => Math.sin(31 * t)));
    expect(facts.jitterSeconds).toBeCloseTo((0.2 * 0.01) / Math.SQRT2, 4);
    expect(facts.notes[0].text).toMatch(
      /^The stamps are uneven by 1\.4\d ms \(14 % of a period\); .* even 100\.0 Hz, which costs up to 0\.031 dB at 10 Hz and 1\.1 dB at 25 Hz\.$/,
    );
  });
});

describe('cubicWeights', () => {
  const times = fc
    .array(
      fc.oneof(
        fc.constantFrom(1e-6, 0.01),
        fc.integer({ min: 10, max: 1000 }).map((n) => n / 1000),
      ),
      {
        minLength: 3,
        maxLength: 3,
      },
    )
    .map(([a, b, c]) => Float64Array.of(0, a, a + b, a + b + c));

  it('sum to one and never amplify by more than two', () => {
    fc.assert(
      fc.property(
        times,
        fc.integer({ min: 0, max: 64 }).map((n) => n / 64),
        (at, share) => {
          const weights = new Float64Array(4);
          cubicWeights(at, 0, at[1] + share * (at[2] - at[1]), weights);
          expect(weights.reduce((sum, weight) => sum + weight)).toBeCloseTo(1, 9);
          expect(weights.reduce((sum, weight) => sum + Math.abs(weight), 0)).toBeLessThanOrEqual(2 + 1e-12);
        },
      ),
    );
  });

  it('are those of the table midway between even points', () => {
    const weights = new Float64Array(4);
    cubicWeights(Float64Array.of(0, 1, 2, 3), 0, 1.5, weights);
    expect([...weights]).toEqual([-1 / 16, 9 / 16, 9 / 16, -1 / 16]);
  });

  it('stay finite where two stamps are equal', () => {
    const weights = new Float64Array(4);
    cubicWeights(Float64Array.of(0, 1, 1, 3), 0, 1, weights);
    expect([...weights].every(Number.isFinite)).toBe(true);
  });
});

describe('interpolationLossDb', () => {
  it('is what the midpoint of two samples loses of a cosine', () => {
    for (const ratio of [0.01, 0.1, 0.25, 0.4]) {
      const weights = [-1 / 16, 9 / 16, 9 / 16, -1 / 16];
      const middle = weights.reduce((sum, w, i) => sum + w * Math.cos(2 * Math.PI * ratio * (i - 1.5)), 0);
      expect(interpolationLossDb(ratio)).toBeCloseTo(-20 * Math.log10(middle), 9);
    }
  });
});
