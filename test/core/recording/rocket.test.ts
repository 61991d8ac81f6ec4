import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { read } from './reading.ts';

const file = (name: string) => readFileSync(new URL(`../../data/rocket/${name}`, import.meta.url));

/** Figures given in test/data/rocket/README.md, measured with a general-purpose numerical library and Python's statistics. */
describe('the recordings of a rocket', () => {
  it('pad.csv: 1,103 rows, one gap of 1,068 s, quiet before it', async () => {
    const { facts, runs } = await read(file('pad.csv'));
    expect(facts).toMatchObject({ rows: 1103, timeKind: 's', timeName: 'timestamp_seconds', resampled: true });
    expect(facts.gaps).toHaveLength(1);
    expect(facts.gaps[0].lengthSeconds).toBeCloseTo(1068.23, 2);
    expect(facts.channels.map(({ name, unit }) => [name, unit])).toEqual([
      ['raw_acceleration_x_gs', 'g'],
      ['raw_acceleration_y_gs', 'g'],
      ['raw_acceleration_z_gs', 'g'],
      ['pressure_pascals', 'Pa'],
    ]);
    expect(runs).toHaveLength(2);
    expect(deviation(runs[0].channels[0]) / 0.00425).toBeCloseTo(1, 1.3);
    expect(deviation(runs.flatMap((run) => run.channels[0]))).toBeCloseTo(0.565, 2);
  });

  it('flight.csv: 4,984 rows at 90.908 Hz in one run', async () => {
    const { facts, runs } = await read(file('flight.csv'));
    expect(facts).toMatchObject({ rows: 4984, gaps: [], resampled: true, leftOut: [] });
    expect(facts.rateHz).toBeCloseTo(90.908, 1);
    expect(Math.abs(facts.rateHz - 90.908)).toBeLessThan(0.005);
    expect(facts.durationSeconds).toBeCloseTo(4984 / 90.908, 1);
    expect(runs).toHaveLength(1);
    expect(runs[0].channels[0]).toHaveLength(facts.longestRunSamples);
    expect(Math.abs(facts.longestRunSamples - 4984)).toBeLessThanOrEqual(1);
  });

  it('jitter agrees with the 0.50 ms deviation of the steps: the difference of two stamps has √2 of one', async () => {
    const { facts } = await read(file('flight.csv'));
    expect(facts.jitterSeconds * Math.SQRT2).toBeCloseTo(0.0005, 4);
  });
});

function deviation(values: readonly number[]): number {
  const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
  return Math.sqrt(values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1));
}
