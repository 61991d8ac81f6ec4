import { describe, expect, it } from 'vitest';
import { inOneLine } from '../../src/core/health/finding.ts';
import { openRecording } from '../../src/core/recording/open.ts';
import type { Recording } from '../../src/core/recording/recording.ts';
import { study } from '../../src/core/study.ts';
import { studyDocument } from '../../src/core/study-document.ts';
import type { Study } from '../../src/core/study-result.ts';
import { studyWarnings } from '../../src/core/study-warnings.ts';
import { seededRandom } from '../campaign/seeded-random.ts';
import { madeRecording } from '../made-recording.ts';
import { memorySource } from '../memory-source.ts';
import { made, named } from './health/made-channel.ts';

const N = 20_000;
const settings = { droopDb: 0.5, rejectionDb: 20, keepHz: null, rejectHz: null, channels: null, rateHz: null };
const quietNoise = made(N, 1, (i, random) => random.normal() + Math.sin((2 * Math.PI * 31 * i) / 200));
const activeNoise = made(N, 2, (i, random) => random.normal() + Math.sin((2 * Math.PI * 31 * i) / 200));
const signal = made(N, 3, (i) => 8 * Math.sin(i / 60) + 5 * Math.sin(i / 37));
const sum = (a: Float64Array, b: Float64Array) => a.map((x, i) => x + b[i]);

const recording = (file: string, samples: Float64Array, unit = 'g', name = 'a') =>
  madeRecording({ rateHz: 200, file, channels: [{ name, unit }], runs: [{ startSeconds: 0, samples: [samples] }] });
const studied = (quiet: Recording, active: Recording): Promise<Study> =>
  study({ quiet, active, settings, version: 'test' });
const findingsOf = async (quiet: Float64Array, active: Float64Array) =>
  (await studied(recording('q.csv', quiet), recording('a.csv', active))).channels[0].findings;

describe('findings of a pair', () => {
  it('none, but for the noise that stays in the keep band, where nothing is wrong', async () => {
    const found = await studied(recording('q.csv', quietNoise), recording('a.csv', sum(activeNoise, signal)));
    expect(named(found.channels[0].findings).filter((name) => name !== 'note: noise in the keep band')).toEqual([]);
    expect(found.findings).toEqual([]);
    expect(studyWarnings(found)).toEqual([]);
  });

  it('of both recordings, the worst first, each told which recording it is in', async () => {
    const clipped = quietNoise.map((x) => Math.min(0.8, x));
    const spiked = sum(activeNoise, signal);
    spiked[5000] += 90;
    const findings = await findingsOf(clipped, spiked);
    expect(named(findings).slice(0, 2)).toEqual(['refusal: clipping', 'note: spikes']);
    expect(findings[0].what).toMatch(/samples in the quiet recording stand/);
    expect(findings[1].what).toMatch(/One spike in the active recording, [89]\d\.\d g at 25\.0 s/);
    const found = await studied(recording('q.csv', clipped), recording('a.csv', spiked));
    expect(studyWarnings(found)).toEqual([
      { severity: 'refusal', text: expect.stringMatching(/^a: .* stand at an extreme.* What lies beyond is lost/) },
    ]);
  });

  it('says that a quiet recording is not stationary, how much of it is used and why', async () => {
    const knocked = quietNoise.map((x, i) => (i > 4000 && i < 8000 ? 20 * x : x));
    const [first] = await findingsOf(knocked, sum(activeNoise, signal));
    expect(first).toMatchObject({ kind: 'not stationary', severity: 'warning', channel: 'a' });
    expect(inOneLine(first)).toMatch(
      /2\d\.\d s of it are up to 2\d times as loud.* Only 7\d\.\d s of 100 s \(7\d %\) are used/,
    );
  });

  it('warns of spikes in the part of the quiet recording that is used, and only notes them elsewhere', async () => {
    const knocked = quietNoise.map((x, i) => (i > 4000 && i < 8000 ? 20 * x : x));
    const active = sum(activeNoise, signal);
    const spikes = async (size: number, ...places: number[]) => {
      const spiked = knocked.map((x, i) => (places.includes(i) ? x + size : x));
      return (await findingsOf(spiked, active)).filter(({ kind }) => kind === 'spikes');
    };
    // One of 900 makes its surroundings unlike the rest, so that they are cut out with it; six of 25 stay.
    const [cut] = await spikes(900, 6000);
    expect(cut).toMatchObject({
      severity: 'note',
      effect: 'It lies in a part of the recording that is left out, and spoils nothing.',
    });
    const [kept] = await spikes(25, 9000, 11_000, 13_000, 15_000, 17_000, 19_000);
    expect(kept).toMatchObject({
      severity: 'warning',
      what: expect.stringMatching(/^6 spikes .* the first at 45\.0 s/),
    });
    expect(kept.effect).toMatch(/raise the noise floor, by 1\d % of the noise power/);
  });

  it('warns of mains within the keep band', async () => {
    const hum = sum(
      quietNoise,
      made(N, 5, (i) => 0.6 * Math.sin((2 * Math.PI * 16.7 * i) / 200)),
    );
    const fast = sum(
      activeNoise,
      made(N, 6, (i, random) => 9 * Math.sin((2 * Math.PI * 22 * i) / 200 + 0.002 * random.normal())),
    );
    const humming = fast.map((x, i) => x + 0.6 * Math.sin((2 * Math.PI * 16.7 * i) / 200));
    const { channels } = await study({
      quiet: recording('q.csv', hum),
      active: recording('a.csv', humming),
      settings: { ...settings, keepHz: { lowHz: 0, highHz: 25 } },
      version: 'test',
    });
    expect(named(channels[0].findings)).toContain('warning: mains');
  });

  it('of different units and rates, missing partners and gaps stand with the pair', async () => {
    const quiet = recording('q.csv', quietNoise, 'g');
    const active = madeRecording({
      rateHz: 250,
      file: 'a.csv',
      channels: [
        { name: 'a', unit: 'm/s²' },
        { name: 'b', unit: 'V' },
      ],
      runs: [{ startSeconds: 0, samples: [sum(activeNoise, signal), quietNoise] }],
    });
    const gap = { row: 99, atSeconds: 3, lengthSeconds: 5 };
    const found = await studied(quiet, { ...active, facts: { ...active.facts, gaps: [gap] } });
    expect(named(found.findings)).toEqual([
      'warning: rates differ',
      'warning: units differ',
      'warning: missing samples',
      'note: no partner',
    ]);
    expect(studyDocument(found, { report: null, plan: null, filtered: null }).findings).toEqual(found.findings);
  });

  it('gives the cost of interpolation and of jitter at the keep-band edge, where the stamps are uneven', async () => {
    const random = seededRandom(9);
    const text = (samples: Float64Array) =>
      `t [s],a [g]\n${Array.from(samples.slice(0, 8000), (x, i) => `${((i + 0.3 * (random.uniform() - 0.5)) / 200).toFixed(6)},${x.toFixed(4)}\n`).join('')}`;
    const open = (samples: Float64Array) => openRecording(memorySource(text(samples)));
    const { channels } = await studied(await open(quietNoise), await open(sum(activeNoise, signal)));
    const findings = channels[0].findings.map(inOneLine).join('\n');
    expect(findings).toMatch(/interpolating them costs less than 0\.01 dB at the keep-band edge of/);
    expect(findings).toMatch(
      /jitter by 4\d\d µs \(8\.\d % of a period\), which at [\d.]+ Hz, the keep-band edge, makes noise \d\d\.\d dB below a signal there \([\d.]+ g RMS\)/,
    );
  });

  it('gives the step and the effective bits: range in use over quiet noise', async () => {
    const step = (samples: Float64Array) => samples.map((x) => Math.round(100 * x) / 100);
    const active = step(sum(activeNoise, signal));
    const found = await studied(recording('q.csv', step(quietNoise)), recording('a.csv', active));
    const { step: found1, effectiveBits } = found.channels[0].resolution;
    const range = active.reduce((a, b) => Math.max(a, b)) - active.reduce((a, b) => Math.min(a, b));
    expect(found1).toBeCloseTo(0.01, 8);
    // Noise of 1 and a line of amplitude 1: √1.5 RMS.
    expect(Math.abs(effectiveBits - Math.log2(range / Math.sqrt(12 * 1.5)))).toBeLessThan(0.05);
  });
});
