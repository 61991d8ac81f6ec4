import { describe, expect, it } from 'vitest';
import { bySeverity, type Finding } from '../../../src/core/health/finding.ts';
import { missingFinding } from '../../../src/core/health/gaps.ts';
import { jitterFinding } from '../../../src/core/health/jitter.ts';
import { mainsFindings } from '../../../src/core/health/mains.ts';
import { examine } from '../../../src/core/health/recording-health.ts';
import { openRecording } from '../../../src/core/recording/open.ts';
import type { RecordingFacts } from '../../../src/core/recording/recording.ts';
import type { NoiseLine } from '../../../src/core/spectrum/spectrum.ts';
import { seededRandom } from '../../campaign/seeded-random.ts';
import { madeRecording } from '../../made-recording.ts';
import { memorySource } from '../../memory-source.ts';
import { made, named } from './made-channel.ts';

const recording = (...channels: Float64Array[]) =>
  madeRecording({
    rateHz: 1000,
    channels: channels.map((_, i) => ({ name: `c${i}`, unit: 'V' })),
    runs: [{ startSeconds: 0, samples: channels }],
  });
const white = (seed: number, samples = 20_000) => made(samples, seed, (_, random) => random.normal());
const factsOf = (change: Partial<RecordingFacts>): RecordingFacts => ({ ...recording(white(1)).facts, ...change });

describe('missing samples', () => {
  const gaps = (...lengths: number[]) =>
    lengths.map((lengthSeconds, i) => ({ row: 10 * i, atSeconds: i + 1, lengthSeconds }));

  it.each([
    [0.101, 'note'],
    [0.301, 'warning'],
  ] as const)('a gap of %d s in 20 s: %s', (length, severity) => {
    const finding = missingFinding(factsOf({ gaps: gaps(length) }), 'quiet');
    expect(finding).toMatchObject({ kind: 'missing samples', severity, channel: null });
    expect(finding?.what).toContain(`about ${Math.round(length * 1000) - 1} samples in 1 gap`);
  });

  it('names the longest of several, and nothing without one', () => {
    expect(missingFinding(factsOf({ gaps: gaps(0.5, 2.5, 1) }), null)?.what).toMatch(
      /20 % of the time.*3 gaps, the longest 2\.50 s at 2\.00 s/,
    );
    expect(missingFinding(factsOf({}), null)).toBeNull();
  });
});

describe('jitter', () => {
  const at = (facts: Partial<RecordingFacts>, frequencyHz: number) =>
    jitterFinding(factsOf(facts), 'active', {
      channel: 'c0',
      frequencyHz,
      place: 'the keep-band edge',
      signal: { rms: 2, unit: 'V' },
    });

  it.each([
    // 2π·f·σ is 60 dB down at 15.9 Hz for 10 µs, 40 dB at 159 Hz.
    [15, null],
    [17, 'note'],
    [155, 'note'],
    [165, 'warning'],
  ] as const)('of 10 µs at %d Hz: %s', (hz, severity) => {
    expect(at({ jitterSeconds: 1e-5 }, hz)?.severity ?? null).toBe(severity);
  });

  it('gives the noise it makes of the signal: 2π·100 Hz·10 µs·2 V = 12.6 mV', () => {
    expect(at({ jitterSeconds: 1e-5 }, 100)?.what).toMatch(
      /10\.0 µs \(1\.0 % of a period\).*44\.0 dB below.*\(0\.0126 V RMS\)/,
    );
  });

  it('does not count what the resolution of the stamps explains, q/√12', () => {
    expect(at({ jitterSeconds: 1e-4 / Math.sqrt(12), stampResolutionSeconds: 1e-4 }, 400)).toBeNull();
  });

  it('is a note where the samples were interpolated, and where the clock wanders slowly', () => {
    expect(at({ jitterSeconds: 1e-4, resampled: true }, 200)).toMatchObject({
      severity: 'note',
      effect: expect.stringMatching(/interpolation/),
    });
    expect(at({ jitterSeconds: 1e-4 }, 200)).toMatchObject({
      severity: 'note',
      effect: expect.stringMatching(/wander/),
    });
  });
});

describe('mains', () => {
  const line = (frequencyHz: number, amplitude: number, family: string | null): NoiseLine => ({
    frequencyHz,
    amplitude,
    family,
    toleranceHz: 0.01,
    aboveFloorDb: 30,
    foldedFrom: [],
  });
  const subject = {
    channel: { name: 'a', unit: 'g', column: 1 },
    role: 'quiet' as const,
    samples: 1,
    rateHz: 1000,
    noiseRms: 1,
  };

  it.each([
    [0.9, 0, 'note'],
    [1.1, 0, 'warning'],
    [0.1, 49, 'note'],
    [0.1, 60, 'warning'],
  ] as const)('amplitude %d in noise of 1 with a keep band to %d Hz: %s', (amplitude, keepHz, severity) => {
    const lines = [line(24, 5, null), line(50, amplitude, 'mains 50 Hz × 1'), line(150, 0.05, 'mains 50 Hz × 3')];
    const [finding, ...others] = mainsFindings(lines, keepHz, subject);
    expect(others).toEqual([]);
    expect(finding.severity).toBe(severity);
    expect(finding.what).toMatch(/50 Hz mains in the quiet recording.*at 50\.0 Hz.*and 1 harmonic of it/);
  });

  it('are told for each network, and not without one', () => {
    const two = [line(50, 0.1, 'mains 50 Hz × 1'), line(60, 0.1, 'mains 60 Hz × 1')];
    expect(mainsFindings(two, 0, subject)).toHaveLength(2);
    expect(mainsFindings([line(24, 5, '24 Hz × 1')], 0, subject)).toEqual([]);
  });
});

describe('a recording examined', () => {
  it('finds nothing wrong with noise and tones', async () => {
    const tones = made(20_000, 2, (i, random) => Math.sin(i / 7) + 0.3 * Math.sin(i / 2.1) + 0.01 * random.normal());
    const { channels, findings } = await examine(recording(white(1), tones), null);
    expect(findings).toEqual([]);
    expect(channels.flatMap((channel) => channel.findings)).toEqual([]);
    expect(Math.abs(channels[0].noiseRms - 1)).toBeLessThan(0.05);
  });

  it('finds mains pick-up and a disturbance, each in its channel', async () => {
    const hum = made(20_000, 3, (i, random) => random.normal() + 0.5 * Math.sin((2 * Math.PI * 50.02 * i) / 1000));
    const knocked = white(4).map((x, i) => (i > 5000 && i < 7500 ? 30 * x : x));
    const { channels } = await examine(recording(hum, knocked), null);
    expect(named(channels[0].findings)).toEqual(['note: mains']);
    expect(channels[0].findings[0].what).toMatch(/from 50 Hz mains: 0\.\d+ V at 50\.0 Hz/);
    expect(named(channels[1].findings)).toEqual(['note: not stationary']);
  });

  it('works on 64 samples, and on the channels asked for only', async () => {
    const { channels } = await examine(recording(white(5, 64), white(6, 64)), ['C1']);
    expect(channels.map(({ channel }) => channel.name)).toEqual(['c1']);
    await expect(examine(recording(white(5, 64)), ['x'])).rejects.toThrow(
      'no channel "x" in made.csv; choose from "c0"',
    );
  });

  it('judges exact values from the rows, where uneven samples were interpolated', async () => {
    const random = seededRandom(7);
    const rows = Array.from({ length: 6000 }, (_, i) => {
      const t = (i + 0.4 * (random.uniform() - 0.5)) / 100;
      const value =
        i >= 3000 && i < 3060 ? 0.5 : Math.round(100 * Math.min(1, Math.sin(i / 9) + 0.1 * random.normal())) / 100;
      return `${t.toFixed(6)},${value.toFixed(2)}\n`;
    });
    const source = memorySource(`t [s],a [V]\n${rows.join('')}`);
    const health = await examine(await openRecording(source), null);
    expect(health.facts.resampled).toBe(true);
    const [channel] = health.channels;
    expect(channel.step).toBeCloseTo(0.01, 8);
    expect(channel.highest).toBe(1);
    expect(named(bySeverity(channel.findings))).toEqual([
      'warning: clipping',
      'warning: stuck values',
      'note: not stationary',
    ]);
    expect(named(health.findings)).toEqual(['note: jitter']);
  });
});

it('findings are sorted by severity and keep their order else', () => {
  const finding = (severity: Finding['severity'], what: string) => ({ severity, what }) as Finding;
  const sorted = bySeverity([
    finding('note', 'a'),
    finding('refusal', 'b'),
    finding('warning', 'c'),
    finding('note', 'd'),
    finding('warning', 'e'),
  ]);
  expect(sorted.map(({ what }) => what).join('')).toBe('bcead');
});
