import { describe, expect, it } from 'vitest';
import { lines, read, wave } from '../core/recording/reading.ts';
import entries from './timebase.json' with { type: 'json' };

interface Entry {
  readonly id: string;
  readonly inputs: Record<string, number[] & number>;
  readonly expected: Record<string, number[] & number>;
}

function entry(id: string): Entry {
  return (entries as unknown as Entry[]).find((each) => each.id === id) as Entry;
}

const stamped = (name: string, stamps: readonly (number | string)[]) =>
  `${name},a\n${lines(stamps.length, (i) => `${stamps[i]},${wave(i)}`)}`;

describe('time base against figures computed with scipy 1.10 (numpy)', () => {
  it('jitter of stamps rounded to q is q/√12 (uniform rounding error)', async () => {
    const { inputs, expected } = entry('jitter.quantised_clock');
    for (const [i, q] of inputs['q_s'].entries()) {
      const decimals = Math.round(-Math.log10(q));
      const period = q * (7 + Math.SQRT1_2);
      const stamps = Array.from({ length: 20_000 }, (_, k) => (k * period).toFixed(decimals));
      const { facts } = await read(stamped('time [s]', stamps));
      const sigma = expected['sigma_s'][i];
      expect(facts.jitterSeconds / sigma).toBeCloseTo(1, 2);
      expect(facts).toMatchObject({ resampled: false, gaps: [] });
    }
  });

  it('an unsigned 32-bit microsecond counter goes on where it wraps, after 4294.967296 s (unsigned arithmetic)', async () => {
    const { expected } = entry('wrap.unwrap');
    const wrapSeconds = entry('wrap.32bit_us').expected['seconds'];
    const unwrapped = expected['unwrapped'];
    const from = unwrapped[0] - 5 * 100;
    const raw = Array.from({ length: 200 }, (_, i) => (from + 5 * i) % (wrapSeconds * 1e6));
    expect(raw.slice(100, 104)).toEqual(entry('wrap.unwrap').inputs['raw']);
    const { facts } = await read(stamped('time_us', raw));
    expect(facts).toMatchObject({ rateHz: 200_000, gaps: [], longestRunSamples: 200 });
    expect(facts.jitterSeconds).toBeLessThan(1e-12);
  });

  it('epoch stamps keep steps below the spacing of doubles there (numpy.spacing)', async () => {
    const { expected } = entry('float64.resolution');
    const [seconds] = expected['ulp'];
    const stamps = Array.from({ length: 500 }, (_, i) => `1700000000.${String(i * 100).padStart(9, '0')}`);
    expect(1e-7).toBeLessThan(seconds);
    const { facts } = await read(stamped('timestamp', stamps));
    expect(facts).toMatchObject({ timeKind: 'epoch', rateHz: 1e7, resampled: false, gaps: [] });
  });

  it('rate over n samples and n − 1 intervals (definition)', async () => {
    const { inputs, expected } = entry('rate.from_counts');
    const { n, t_first, t_last } = inputs;
    const stamps = Array.from({ length: n }, (_, i) => t_first + ((t_last - t_first) * i) / (n - 1));
    const { facts } = await read(stamped('time [s]', stamps));
    expect(Math.abs(facts.rateHz / expected['fs'] - 1)).toBeLessThan(2e-9);
  });

  it('three samples lost of a regular time base make one gap', async () => {
    const { expected } = entry('rate.gap');
    const { median_dt, gaps, lost } = expected;
    // Twice as long as in the source, since a run needs 64 samples.
    const kept = Array.from({ length: 200 }, (_, i) => i).filter((i) => i < 100 || i >= 100 + lost);
    const { facts } = await read(
      stamped(
        'time [s]',
        kept.map((i) => (i * median_dt).toFixed(2)),
      ),
    );
    expect(facts.rateHz).toBe(1 / median_dt);
    expect(facts.gaps).toHaveLength(gaps);
    expect(facts.gaps[0].lengthSeconds / median_dt - 1).toBeCloseTo(lost, 9);
  });
});
