import { beforeAll, describe, expect, it } from 'vitest';
import { makeSamples, truth } from '../../samples/make-samples.ts';
import { inOneLine } from '../../src/core/health/finding.ts';
import { openRecording } from '../../src/core/recording/open.ts';
import type { ReadingOptions } from '../../src/core/recording/recording.ts';
import { study } from '../../src/core/study.ts';
import { studyDocument } from '../../src/core/study-document.ts';
import type { Study, StudySettings } from '../../src/core/study-result.ts';
import { madeRecording } from '../made-recording.ts';
import { memorySource } from '../memory-source.ts';

const DEFAULTS: StudySettings = {
  droopDb: 0.5,
  rejectionDb: 20,
  keepHz: null,
  rejectHz: null,
  channels: null,
  rateHz: null,
};
const samples = makeSamples();

async function studySamples(settings: Partial<StudySettings> = {}, reading: ReadingOptions = {}): Promise<Study> {
  return study({
    quiet: await openRecording(memorySource(samples['cabin-quiet.csv']), reading),
    active: await openRecording(memorySource(samples['cabin-active.csv']), reading),
    settings: { ...DEFAULTS, ...settings },
    version: 'test',
  });
}

describe('the study of the sample pair', () => {
  let found: Study;
  beforeAll(async () => {
    found = await studySamples();
  });

  it('finds every line that the generator put in, within 0.05 Hz and 1 dB, and no other', () => {
    truth.channels.forEach((channel, i) => {
      const { lines } = found.channels[i];
      expect(lines).toHaveLength(channel.lines.length);
      channel.lines.forEach((line, k) => {
        expect(Math.abs(lines[k].frequencyHz - line.frequencyHz)).toBeLessThan(0.05);
        expect(Math.abs(20 * Math.log10(lines[k].amplitude / line.amplitude))).toBeLessThan(1);
      });
    });
  });

  it('names the fan as a harmonic family and the mains as mains', () => {
    for (const { lines } of found.channels) {
      const family = (hz: number) => lines.find((line) => Math.abs(line.frequencyHz - hz) < 0.05)?.family;
      expect(family(48.6)).toMatch(/24\.3.*2/);
      expect(family(72.9)).toMatch(/24\.3.*3/);
      expect(family(50)).toMatch(/mains 50/);
      expect(family(35.7)).toBeNull();
    }
  });

  it('finds the keep-band edge within 15 % and calls the advice clear', () => {
    truth.channels.forEach((channel, i) => {
      const { keep, advice } = found.channels[i];
      expect(Math.abs(keep.highHz / channel.keepEdgeHz - 1)).toBeLessThan(0.15);
      expect(keep).toMatchObject({ lowHz: 0, source: 'measured' });
      expect(advice.verdict).toBe('clear');
    });
  });

  it('takes a single pole where there is room for one, and no more than order 2 on heave', () => {
    expect(found.channels.map((channel) => channel.advice.order)).toEqual([1, 1, 2]);
  });

  it('keeps the limits at the true edge and the true first line', () => {
    truth.channels.forEach((channel, i) => {
      const { advice } = found.channels[i];
      expect(advice.droopDb).toBeLessThanOrEqual(0.5);
      expect(advice.rejectionDb).toBeGreaterThanOrEqual(20);
      expect(advice.firstLineHz).toBeCloseTo(channel.lines[0].frequencyHz, 1);
    });
  });

  it('measures the noise before as the generator made it, and the gain at each line as computed', () => {
    truth.channels.forEach((channel, i) => {
      const put = Math.sqrt(
        channel.noiseRms ** 2 + channel.lines.reduce((sum, line) => sum + line.amplitude ** 2 / 2, 0),
      );
      expect(found.channels[i].advice.noiseBeforeRms / put).toBeCloseTo(1, 1);
      expect(found.channels[i].noiseGain / truth.noiseGain).toBeCloseTo(1, 1);
      for (const { computedDb, measuredDb } of found.channels[i].lineGains)
        expect(Math.abs((measuredDb as number) - computedDb)).toBeLessThan(1);
    });
  });

  it('brackets the corner with its interval', () => {
    for (const { advice } of found.channels) {
      expect(advice.cornerRangeHz[0]).toBeLessThanOrEqual(advice.cornerHz);
      expect(advice.cornerRangeHz[1]).toBeGreaterThanOrEqual(advice.cornerHz);
    }
  });

  it('gives the JSON document its fields and nothing that JSON cannot hold', () => {
    const files = { report: 'a', plan: 'b', filtered: null };
    const document = studyDocument(found, files);
    expect(JSON.parse(JSON.stringify(document))).toEqual(document);
    expect(Object.keys(document)).toEqual([
      'schema',
      'version',
      'settings',
      'quiet',
      'active',
      'channels',
      'findings',
      'files',
    ]);
    expect(Object.keys(document.channels[0])).toEqual([
      'name',
      'unit',
      'lines',
      'keep',
      'advice',
      'rivals',
      'findings',
    ]);
    expect(document.schema).toBe('quietcorner/study@1');
  });

  it.each([1, 7])('is the same for blocks of %d rows', async (blockRows) => {
    const again = await studySamples({}, { blockRows });
    again.channels.forEach((channel, i) => {
      const first = found.channels[i];
      expect(channel.advice.cornerHz).toBe(first.advice.cornerHz);
      for (const figure of ['noiseBeforeRms', 'noiseAfterRms', 'droopDb', 'wienerRatio', 'signalKept'] as const)
        expect(Math.abs(channel.advice[figure] / first.advice[figure] - 1)).toBeLessThan(1e-12);
      expect(channel.lines).toEqual(first.lines);
      expect(channel.findings).toEqual(first.findings);
      expect(channel.findings.filter(({ severity }) => severity !== 'note')).toEqual([]);
      for (const trace of ['before', 'after'] as const) {
        expect(channel.simulation[trace].low).toEqual(first.simulation[trace].low);
        expect(channel.simulation[trace].high).toEqual(first.simulation[trace].high);
      }
      channel.simulation.insets.forEach((inset, k) => {
        expect(inset.after).toEqual(first.simulation.insets[k].after);
        expect(Math.abs(inset.seconds[0] - first.simulation.insets[k].seconds[0])).toBeLessThan(1e-9);
      });
    });
  });
});

describe('what the user sets overrules what is measured', () => {
  it('advises 3.0 Hz for keep 1 Hz, reject 30 Hz, 20 dB, 0.5 dB (common practice: 30/√99)', async () => {
    const { channels } = await studySamples({ keepHz: { lowHz: 0, highHz: 1 }, rejectHz: 30 });
    for (const { advice, keep } of channels) {
      expect(advice).toMatchObject({ family: 'rc', order: 1, cornerHz: 3, verdict: 'clear' });
      expect(keep).toEqual({ lowHz: 0, highHz: 1, source: 'given' });
    }
  });

  it('studies only the channels asked for', async () => {
    const { channels } = await studySamples({ channels: ['heave_z'] });
    expect(channels.map(({ channel }) => channel.name)).toEqual(['heave_z']);
  });

  it('needs a higher order for more rejection', async () => {
    const { channels } = await studySamples({ rejectionDb: 60, channels: ['sway_x'] });
    expect(channels[0].advice.order).toBeGreaterThan(1);
    expect(channels[0].advice.rejectionDb).toBeGreaterThanOrEqual(60);
  });
});

describe('odd pairs', () => {
  const noise = (count: number, start: number) => {
    let state = start;
    return Float64Array.from({ length: count }, () => {
      state = (16807 * state) % 2147483647;
      return state / 2147483647 - 0.5;
    });
  };
  const recording = (samples: Float64Array, unit = 'g', rateHz = 100) =>
    madeRecording({ rateHz, channels: [{ name: 'a', unit }], runs: [{ startSeconds: 0, samples: [samples] }] });
  const run = (quiet: Float64Array, active: Float64Array) =>
    study({ quiet: recording(quiet), active: recording(active), settings: DEFAULTS, version: 'test' });
  const plus = (a: Float64Array, b: Float64Array) => a.map((value, i) => value + b[i]);
  const swell = (count: number, size: number) =>
    Float64Array.from({ length: count }, (_, i) => size * Math.sin(i / 40));

  it('calls noise against noise inseparable and says that there is no signal', async () => {
    const { channels } = await run(noise(20000, 11), noise(20000, 12));
    expect(channels[0].advice.verdict).toBe('inseparable');
    expect(channels[0].advice.reasons.join(' ')).toMatch(/Nothing in the active recording exceeds/);
  });

  it('questions a quiet recording that is louder than the active one', async () => {
    const loud = plus(swell(20000, 3), noise(20000, 21));
    const { channels } = await run(loud, noise(20000, 22));
    expect(channels[0].findings.map(inOneLine).join(' ')).toMatch(/louder in the quiet recording/);
  });

  it('works on 64 samples', async () => {
    const { channels } = await run(
      noise(64, 31),
      noise(64, 32).map((value, i) => value + 5 * Math.sin(i / 8)),
    );
    expect(channels[0].advice.cornerHz).toBeGreaterThan(0);
  });

  it('studies a pair of different rates and units, and says so', async () => {
    const { findings } = await study({
      quiet: recording(noise(20000, 41), 'g', 120),
      active: recording(plus(swell(20000, 3), noise(20000, 42)), 'm/s²', 100),
      settings: DEFAULTS,
      version: 'test',
    });
    expect(findings.map(inOneLine).join(' ')).toMatch(
      /different rates, 120\.0 Hz quiet and 100\.0 Hz active.*in "g" when quiet and in "m\/s²"/,
    );
  });
});
