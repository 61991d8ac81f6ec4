import { readFile } from 'node:fs/promises';
import { describe, expect, it } from 'vitest';
import { makeSamples, truth } from '../samples/make-samples.ts';

const made = makeSamples();
const committed = (name: string) => readFile(new URL(`../samples/${name}`, import.meta.url), 'utf8');

describe('the demo pair', () => {
  for (const name of ['cabin-quiet.csv', 'cabin-active.csv'] as const) {
    it(`${name} is what the script makes, byte for byte`, async () => {
      // Compared as a truth value: a diff of megabytes helps nobody.
      expect((await committed(name)) === made[name]).toBe(true);
    });

    it(`${name} says in its first line that it is invented`, () => {
      expect(made[name].split('\n')[0]).toMatch(/^# Invented data, not recorded/);
    });
  }

  it('holds the rows and columns that its truth tells of', () => {
    const header = `time [s],${truth.channels.map(({ name, unit }) => `${name} [${unit}]`).join(',')}`;
    for (const [text, seconds] of [
      [made['cabin-quiet.csv'], truth.quietSeconds],
      [made['cabin-active.csv'], truth.activeSeconds],
    ] as const) {
      const [, , names, ...rows] = text.trimEnd().split('\n');
      expect(names).toBe(header);
      expect(rows).toHaveLength(seconds * truth.rateHz);
      expect(rows.at(-1)?.split(',')[0]).toBe((seconds - 1 / truth.rateHz).toFixed(3));
    }
  });

  it('has the power of noise and lines that its truth tells of', () => {
    const rows = made['cabin-quiet.csv'].trimEnd().split('\n').slice(3);
    truth.channels.forEach((channel, column) => {
      const values = rows.map((row) => Number(row.split(',')[column + 1]));
      const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
      const power = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / values.length;
      const put = channel.noiseRms ** 2 + channel.lines.reduce((sum, { amplitude }) => sum + amplitude ** 2 / 2, 0);
      expect(mean).toBeCloseTo(channel.rest, 3);
      expect(power / put).toBeCloseTo(1, 1);
    });
  });

  it('leaves a single pole room on the sway axes and not on heave: line over edge against 28.5', () => {
    const room = truth.channels.map(({ lines, keepEdgeHz }) => lines[0].frequencyHz / keepEdgeHz);
    // 28.5 = √99 / √(10^0.05 − 1): 20 dB at the line and 0.5 dB at the edge with one pole.
    expect(room.map((ratio) => ratio > 28.5)).toEqual([true, true, false]);
  });
});
