import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { openRecording } from '../../../src/core/recording/open.ts';
import { memorySource } from '../../memory-source.ts';
import { lines, read, wave, wholeRuns } from './reading.ts';

const clean = `time [s],a [g],b\n${lines(200, (i) => `${(i / 100).toFixed(2)},${wave(i)},${i % 7}`)}`;

describe('openRecording', () => {
  it('reads a clean file to the last bit', async () => {
    const { facts, runs } = await read(clean);
    expect(facts).toMatchObject({
      file: 'made.csv',
      sizeBytes: clean.length,
      sha256: createHash('sha256').update(clean).digest('hex'),
      rows: 200,
      timeKind: 's',
      timeName: 'time',
      rateHz: 100,
      resampled: false,
      durationSeconds: 2,
      longestRunSamples: 200,
      gaps: [],
      channels: [
        { name: 'a', unit: 'g', column: 2 },
        { name: 'b', unit: '', column: 3 },
      ],
      leftOut: [],
      notes: [],
    });
    expect(facts.jitterSeconds).toBeLessThan(1e-12);
    expect(runs).toEqual([
      {
        startSeconds: 0,
        channels: [Array.from({ length: 200 }, (_, i) => wave(i)), Array.from({ length: 200 }, (_, i) => i % 7)],
      },
    ]);
  });

  it('plays again as often as wanted, two players at once', async () => {
    for (const memoryBytes of [1e6, 0]) {
      const recording = await openRecording(memorySource(clean, 100), { memoryBytes });
      const [once, twice] = await Promise.all([wholeRuns(recording), wholeRuns(recording)]);
      expect(once).toEqual(twice);
      expect(await wholeRuns(recording)).toEqual(once);
    }
  });

  it('reads the source again only where the numbers do not fit into the memory allowed', async () => {
    for (const [memoryBytes, again] of [
      [200 * 28, 0],
      [200 * 28 - 1, 1],
    ]) {
      let reads = 0;
      const source = memorySource(clean);
      const counted = { ...source, chunks: () => source.chunks() };
      counted.chunks = () => {
        reads++;
        return source.chunks();
      };
      const recording = await openRecording(counted, { memoryBytes });
      const before = reads;
      await wholeRuns(recording);
      expect(reads - before).toBe(again);
    }
  });

  it('says so where the file grows between two passes', async () => {
    let content = clean;
    const source = { ...memorySource(''), name: 'made.csv', chunks: () => memorySource(content).chunks() };
    const recording = await openRecording(source, { memoryBytes: 0 });
    content += '2.00,1,1\n';
    await expect(wholeRuns(recording)).rejects.toThrow(/made\.csv changed while it was read/);
  });

  it('tells progress up to the last byte', async () => {
    const told: number[] = [];
    await read(clean, { chunkBytes: 1000, onProgress: (bytes) => told.push(bytes) });
    expect(told).toEqual([1000, 2000, 3000, clean.length].filter((bytes) => bytes <= clean.length));
  });

  it('leaves out what is no channel, with the reason', async () => {
    const text = `time [s],a,state,flat,none,now and then\n${lines(
      100,
      (i) => `${i / 10},${wave(i)},on,3.5,,${i % 10 === 0 ? i : ''}`,
    )}`;
    const { facts } = await read(text);
    expect(facts.channels.map(({ name }) => name)).toEqual(['a']);
    expect(facts.leftOut).toEqual([
      { name: 'state', column: 3, why: 'text' },
      { name: 'flat', column: 4, why: 'constant at 3.5' },
      { name: 'none', column: 5, why: 'empty' },
      { name: 'now and then', column: 6, why: 'only 10 of 100 rows hold a value' },
    ]);
  });

  it('reads quoted files, and files where a quote turns up late', async () => {
    const quoted = clean.replace(/^(.*?),(.*?),(.*?)$/gm, '"$1","$2","$3"');
    expect((await read(quoted)).runs).toEqual((await read(clean)).runs);
    const late = `time,a,b\n${lines(9000, (i) => `${i / 100},${wave(i)},${i % 7}`)}90.00,"1","2"\n`;
    const { facts, runs } = await read(late);
    expect(facts.rows).toBe(9001);
    expect(runs[0].channels.map((channel) => channel[9000])).toEqual([1, 2]);
  });

  it('reads UTF-16 and decimal commas, in pieces of any size', async () => {
    const text = `\ufefftime [s];a [g];b\n${lines(200, (i) => `${i / 100};${wave(i)};${i % 7}`).replaceAll('.', ',')}`;
    const utf16 = new Uint8Array(2 * text.length);
    [...text].forEach((sign, i) => {
      utf16.set([sign.charCodeAt(0) & 255, sign.charCodeAt(0) >> 8], 2 * i);
    });
    const { runs } = await read(clean);
    for (const chunkBytes of [1, 7, 4096]) expect((await read(utf16, { chunkBytes })).runs).toEqual(runs);
    expect((await read(text, { chunkBytes: 5 })).runs).toEqual(runs);
  });
});

/** A file with everything in it: gap, repeats, missing values short and long, an unreadable one, comments, jitter. */
function mixed(seed: number, jitter: number): string {
  const { rows } = Array.from({ length: 700 }, (_, i) => i).reduce<{ rows: string[]; t: number }>(
    ({ rows, t }, i) => {
      const random = (Math.imul(i + 1, 2654435761 + seed) >>> 8) / 2 ** 24;
      const step = i === 300 ? 5 : 0.01 * (1 + jitter * (random - 0.5));
      const missing = (i > 50 && i < 54) || (i >= 500 && i < 510) || i === 299 || i === 300 || i === 699;
      const row = `${(t + step).toFixed(6)},${missing ? '' : wave(i + seed)},${i === 100 ? 'bad' : wave(3 * i)}`;
      return { rows: [...rows, row, ...(i === 200 ? [row, '# note', ''] : [])], t: t + step };
    },
    { rows: ['time,a,b'], t: seed },
  );
  return `${rows.join('\n')}\n`;
}

describe('neither blocks nor pieces nor memory change a result', () => {
  it.each([
    ['even', 0],
    ['uneven', 0.5],
  ])('of %s stamps', async (_title, jitter) => {
    await fc.assert(
      fc.asyncProperty(
        fc.nat(50),
        fc.oneof(fc.constantFrom(1, 7, 65_536), fc.integer({ min: 1, max: 900 })),
        fc.oneof(fc.constantFrom(1, 2), fc.integer({ min: 3, max: 30_000 })),
        fc.constantFrom(0, 1e6),
        async (seed, blockRows, chunkBytes, memoryBytes) => {
          const text = mixed(seed, jitter);
          const whole = await read(text);
          expect(whole.facts).toMatchObject({ resampled: jitter > 0, gaps: [{ row: 305 }] });
          expect(whole.runs).toHaveLength(3);
          expect(await read(text, { blockRows, chunkBytes, memoryBytes })).toEqual(whole);
        },
      ),
      { numRuns: 25 },
    );
  });

  it('of a quoted file', async () => {
    const text = mixed(3, 0.5).replace(/^([\d.]+),/gm, '"$1",');
    const plain = await read(mixed(3, 0.5));
    for (const [blockRows, chunkBytes] of [
      [1, 1],
      [7, 13],
      [65_536, 65_536],
    ])
      expect((await read(text, { blockRows, chunkBytes, memoryBytes: 0 })).runs).toEqual(plain.runs);
  });

  it('never delivers a block longer than asked', async () => {
    const recording = await openRecording(memorySource(mixed(1, 0.5)), { blockRows: 7 });
    for await (const block of recording.blocks()) expect(block.length).toBeLessThanOrEqual(7);
  });
});
