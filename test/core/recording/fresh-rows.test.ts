import { describe, expect, it } from 'vitest';
import { openRecording } from '../../../src/core/recording/open.ts';
import { memorySource } from '../../memory-source.ts';
import { lines, wave } from './reading.ts';

/** Stamps off by up to a tenth of a period, and ten times as dense from row 800 on where asked. */
const text = (dense: boolean) => {
  let t = 0;
  return `t [s],a\n${lines(900, (i) => {
    t += dense && i >= 800 ? 0.001 : 0.01;
    return `${(t + (dense && i >= 790 ? 0.0002 : 0.001) * Math.sin(i * i * 1.3)).toFixed(9)},${wave(i)}`;
  })}`;
};

async function rowsOf(content: string, blockRows: number): Promise<number[]> {
  const recording = await openRecording(memorySource(content), { blockRows });
  const all: number[] = [];
  for await (const block of recording.blocks()) all.push(...block.rows[0]);
  return all;
}

describe('rows as they were logged, beside the samples of a block', () => {
  it.each([false, true])('come once each and in order, up to the last sample; dense: %s', async (dense) => {
    const whole = await rowsOf(text(dense), 65_536);
    expect(whole.length).toBeGreaterThan(880);
    expect(whole).toEqual(Array.from({ length: whole.length }, (_, i) => wave(i)));
    for (const blockRows of [1, 7, 64]) expect(await rowsOf(text(dense), blockRows)).toEqual(whole);
  });

  it('are the very samples where nothing is interpolated', async () => {
    const recording = await openRecording(memorySource(`t [s],a\n${lines(200, (i) => `${i / 100},${wave(i)}`)}`));
    expect(recording.facts.resampled).toBe(false);
    for await (const block of recording.blocks()) expect(block.rows).toBe(block.channels);
  });
});
