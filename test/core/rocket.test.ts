import { readFile } from 'node:fs/promises';
import { beforeAll, describe, expect, it } from 'vitest';
import { openRecording } from '../../src/core/recording/open.ts';
import { study } from '../../src/core/study.ts';
import type { Study } from '../../src/core/study-result.ts';
import { memorySource } from '../memory-source.ts';

/** Real recordings (test/data/rocket/README.md): uneven sampling, a gap, a quiet recording whose tail is not quiet. */
describe('pad.csv against flight.csv, with no option', () => {
  let found: Study;
  beforeAll(async () => {
    const open = async (name: string) => {
      const text = await readFile(new URL(`../data/rocket/${name}`, import.meta.url), 'utf8');
      return openRecording(memorySource(text, 65_536, name));
    };
    found = await study({
      quiet: await open('pad.csv'),
      active: await open('flight.csv'),
      settings: { droopDb: 0.5, rejectionDb: 20, keepHz: null, rejectHz: null, channels: null, rateHz: null },
      version: 'test',
    });
  });

  it('studies the four channels that both hold', () => {
    expect(found.channels.map(({ channel }) => channel.name)).toHaveLength(4);
    for (const { advice } of found.channels) expect(advice.cornerHz).toBeGreaterThan(0);
  });

  it('reports the gap of 1,068 s', () => {
    expect(found.quiet.gaps).toHaveLength(1);
    expect(found.quiet.gaps[0].lengthSeconds).toBeCloseTo(1068, -1);
  });

  it('is not poisoned by the rows behind the gap: x noise within a factor of two of 0.0036 g', () => {
    const x = found.channels.find(({ channel }) => /_x/.test(channel.name));
    expect(x?.advice.noiseBeforeRms).toBeGreaterThan(0.0018);
    expect(x?.advice.noiseBeforeRms).toBeLessThan(0.0072);
  });

  it('says which part of the quiet recording was used', () => {
    for (const { quietPart } of found.channels.filter(({ channel }) => channel.unit === 'g')) {
      expect(quietPart.usedSeconds).toBeLessThan(quietPart.totalSeconds);
      // The last half second of the file is already the start of the motion.
      const end = Math.max(...quietPart.stretches.map((stretch) => stretch.toSeconds));
      expect(end).toBeLessThan(found.quiet.durationSeconds - 0.4);
    }
  });
});
