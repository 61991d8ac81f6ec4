import { describe, expect, it } from 'vitest';
import { found, judged, made, named, RATE_HZ, rounded } from './made-channel.ts';

const N = 20_000;
const noise = (seed: number) => made(N, seed, (_, random) => random.normal());
const stepped = (samples: Float64Array, step: number) => samples.map((x) => rounded(x, step));
const only = (samples: Float64Array, role: 'quiet' | 'active' | null, kind: string) => {
  const findings = found(samples, role).filter((finding) => finding.kind === kind);
  expect(findings).toHaveLength(1);
  return findings[0];
};

describe('clipping', () => {
  const tone = (i: number) => Math.sin(i / 15);
  const clipped = (limit: number, step: number) =>
    stepped(
      made(N, 3, (i, random) => Math.max(-9, Math.min(limit, tone(i) + 0.01 * random.normal()))),
      step,
    );

  it('finds flat tops, their number, their longest and their first', () => {
    const samples = clipped(0.8, 0.001);
    const at = samples.reduce((sum, x) => sum + (x === 0.8 ? 1 : 0), 0);
    const { clipping } = judged([samples]).figures;
    expect(clipping.high).toMatchObject({ value: 0.8, samples: at, firstSeconds: samples.indexOf(0.8) / RATE_HZ });
    // A sine of 94.2 samples stands over 0.8 for acos(0.8)/π of them: 19.3 in each of 212 periods.
    expect(at / ((N * Math.acos(0.8)) / Math.PI)).toBeCloseTo(1, 2);
    expect(clipping.high.flats / (N / (2 * Math.PI * 15))).toBeCloseTo(1, 1);
    expect(clipping.high.longest).toBeGreaterThanOrEqual(19);
    const finding = only(samples, 'active', 'clipping');
    expect(finding).toMatchObject({ severity: 'warning', channel: 'a' });
    expect(finding.what).toMatch(/at the highest value, 0\.8000 g in 2\d\d flat stretches of up to 2\d, first at/);
    expect(finding.what).not.toMatch(/lowest/);
  });

  it('finds samples scattered at the rail by noise that was cut at 2.5 standard deviations', () => {
    const samples = stepped(
      noise(9).map((x) => Math.max(-2.5, Math.min(2.5, x))),
      0.01,
    );
    expect(only(samples, 'quiet', 'clipping').what).toMatch(
      /at the lowest value, −2\.500 g.*at the highest value, 2\.500 g/,
    );
  });

  it.each([
    [19, 200_000, 'note'],
    [21, 200_000, 'warning'],
    [1990, 20_000, 'warning'],
    [2010, 20_000, 'refusal'],
  ] as const)('%d samples of %d: %s', (flat, count, severity) => {
    const samples = made(count, 4, (i, random) => (i >= 500 && i < 500 + flat ? 99 : random.normal()));
    expect(only(samples, 'quiet', 'clipping').severity).toBe(severity);
  });

  it('never refuses an active recording, whose rest may be at a stop', () => {
    const samples = made(N, 4, (i, random) => (i < N / 2 ? 0 : Math.abs(random.normal())));
    expect(only(samples, 'active', 'clipping').severity).toBe('warning');
    expect(only(samples, 'quiet', 'clipping').severity).toBe('refusal');
  });
});

describe('stuck values', () => {
  const stuck = (from: number, length: number) => {
    const samples = stepped(noise(11), 0.05);
    return samples.fill(1.35, from, from + length);
  };

  it('are found with value, place and length', () => {
    const samples = stuck(7000, 300);
    const finding = only(samples, 'quiet', 'stuck values');
    expect(finding.severity).toBe('warning');
    expect(finding.what).toMatch(/300 samples at 1\.350 g, from 35\.0 s; 1\.5 % of all samples/);
  });

  it.each([
    [19, 'note'],
    [21, 'warning'],
    [9_900, 'warning'],
    [10_100, 'refusal'],
  ] as const)('%d samples of 20,000: %s', (length, severity) => {
    expect(only(stuck(5000, length), 'quiet', 'stuck values').severity).toBe(severity);
  });

  it('counts several stretches', () => {
    const samples = stepped(noise(12), 0.05);
    for (const from of [1000, 5000, 9000]) samples.fill(samples[from], from, from + 40 + from / 1000);
    expect(only(samples, 'active', 'stuck values').what).toMatch(
      /^3 stretches in the active recording.*the longest 49 samples/,
    );
  });

  it('are not made of equal samples on both sides of a gap', () => {
    const samples = stepped(noise(13), 0.05);
    const before = samples.slice(0, 5000).fill(samples[4990], 4994);
    const after = samples.slice(5000).fill(samples[4990], 0, 6);
    expect(judged([before, after]).figures.stuck.longest).toEqual([]);
  });

  it('tells a logger that is faster than the sensor, but not a slow ramp', () => {
    const values = stepped(noise(14), 0.01);
    const held = made(N, 1, (i) => values[Math.floor(i / 5)]);
    const finding = only(held, 'quiet', 'held values');
    expect(finding.what).toMatch(
      /stands in 5 samples in a row: the logger takes 200\.0 Hz, the sensor delivers 40\.00 Hz/,
    );
    expect(finding.effect).toMatch(/Above 20\.0 Hz/);
    const ramp = made(N, 1, (i) => rounded(Math.floor(i / 5) * 0.01, 0.01));
    expect(named(found(ramp)).join()).not.toMatch(/held|stuck/);
  });
});

describe('rounding', () => {
  it.each([1e-6, 0.004, 0.0625, 1, 25])('finds a step of %d', (step) => {
    const samples = stepped(
      noise(21).map((x) => 5 * step * x + 1000 * step),
      step,
    );
    expect((judged([samples]).figures.step as number) / step).toBeCloseTo(1, 8);
  });

  it('finds the step of counts that were scaled and then cut to four decimals', () => {
    const gain = 0.048_828_125;
    const samples = noise(22).map((x) => Number((Math.round(4 * x) * gain).toFixed(4)));
    expect((judged([samples]).figures.step as number) / gain).toBeCloseTo(1, 3);
  });

  it('is not misled by a few values that were bridged', () => {
    const samples = stepped(noise(23), 0.1);
    for (let i = 100; i < N; i += 1000) samples[i] = (samples[i - 1] + samples[i + 1]) / 2 + 0.013;
    expect(judged([samples]).figures.step).toBeCloseTo(0.1, 8);
  });

  it('finds no step in values as fine as doubles, and none in too few', () => {
    expect(judged([noise(24)]).figures.step).toBeNull();
    expect(judged([made(400, 1, (i) => (i < 200 ? 1 : 2))]).figures.step).toBeNull();
  });

  it.each([
    [0.9, null],
    [1.25, 'note'],
    [2.3, 'note'],
    [4.5, 'warning'],
  ] as const)('a step of %d standard deviations of the noise: %s', (step, severity) => {
    const findings = found(
      stepped(
        noise(25).map((x) => x + 0.4),
        step,
      ),
    ).filter(({ kind }) => kind === 'rounding');
    expect(findings.map((finding) => finding.severity)).toEqual(severity === null ? [] : [severity]);
  });

  it('says that noise below a step is not seen', () => {
    const slow = made(40_000, 1, (i) => rounded(3 * Math.sin(i / 3000), 0.01));
    expect(only(slow, 'quiet', 'rounding')).toMatchObject({ severity: 'warning' });
  });
});

describe('spikes', () => {
  const spiked = (places: readonly number[], size: number, wide = 1) => {
    const samples = noise(31);
    for (const place of places) for (let k = 0; k < wide; k++) samples[place + k] += size;
    return samples;
  };

  it.each([1, 2, 3])('of %d samples are counted and placed, with the largest', (wide) => {
    const samples = spiked([400, 5023, 5024 + 20, 12_000, 19_900], 60, wide);
    samples[12_000] += 15;
    const { spikes } = judged([samples]).figures;
    expect(spikes.spikes).toBe(5);
    expect(spikes.firstSeconds).toBeCloseTo(2, 1);
    expect(spikes.largestSeconds).toBeCloseTo(60, 1);
    expect(Math.abs(spikes.largest - 75)).toBeLessThan(5);
    expect(named(found(samples))).toEqual(['warning: spikes']);
  });

  it('are found on a strong slow signal and on a tone that hides them from a look at the values', () => {
    const samples = made(
      N,
      32,
      (i, random) => 500 * Math.sin(i / 4000) + 30 * Math.sin(i / 40) + 0.1 * random.normal(),
    );
    samples[8000] += 3;
    const { spikes } = judged([samples]).figures;
    expect(spikes).toMatchObject({ spikes: 1, firstSeconds: 40 });
    expect(Math.abs(spikes.largest - 3)).toBeLessThan(0.5);
  });

  it.each([
    [16, 'note'],
    [80, 'warning'],
  ] as const)('of %d standard deviations, one in 20,000 samples: %s', (size, severity) => {
    expect(named(found(spiked([9000], -size)))).toEqual([`${severity}: spikes`]);
  });

  it('are only noted in an active recording', () => {
    expect(named(found(spiked([9000], 80), 'active'))).toEqual(['note: spikes']);
  });

  it('are not the flicker of the last digit', () => {
    const samples = made(N, 33, (i) => (i % 997 === 0 ? 0.2 : i % 991 === 0 ? -0.3 : 0) + (i % 2000 < 1000 ? 0 : 0.1));
    const stepOnly = stepped(samples, 0.1);
    expect(judged([stepOnly]).figures.spikes.spikes).toBe(0);
  });
});

describe('drift', () => {
  const drifting = (change: number) => made(N, 41, (i, random) => random.normal() + (change * i) / N);

  it.each([
    [0, null],
    [0.8, null],
    [1.2, 'note'],
    [4.8, 'note'],
    [5.2, 'warning'],
  ] as const)('of %d times the noise over the recording: %s', (change, severity) => {
    expect(named(found(drifting(change)))).toEqual(severity === null ? [] : [`${severity}: drift`]);
  });

  it('is measured per minute', () => {
    // 20,000 samples at 200 Hz are 100 s: 6 g in 100 s are 3.6 g a minute.
    const { perMinute, change } = judged([drifting(6)]).drift;
    expect(Math.abs(perMinute - 3.6)).toBeLessThan(0.05);
    expect(Math.abs(change - 6)).toBeLessThan(0.1);
  });

  it('is only noted in an active recording, and none is what swings', () => {
    expect(named(found(drifting(20), 'active'))).toEqual(['note: drift']);
    expect(named(found(made(N, 42, (i, random) => random.normal() + 20 * Math.sin(i / 900))))).toEqual([]);
  });
});
