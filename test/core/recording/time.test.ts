import { describe, expect, it } from 'vitest';
import { lines, read, wave } from './reading.ts';

/** A recording with the given stamps. */
const stamped = (name: string, count: number, stamp: (i: number) => string | number) =>
  `${name},a\n${lines(count, (i) => `${stamp(i)},${wave(i)}`)}`;

const two = (value: number) => String(value).padStart(2, '0');
/** Time of day to the millisecond, midnight passed as it comes. */
const clock = (milliseconds: number) => {
  const ms = Math.round(milliseconds) % 86_400_000;
  const [h, m, s] = [Math.floor(ms / 3.6e6), Math.floor(ms / 6e4) % 60, Math.floor(ms / 1000) % 60];
  return `${two(h)}:${two(m)}:${two(s)}.${String(ms % 1000).padStart(3, '0')}`;
};

const epoch = 1_714_557_600;

describe('kinds of time, all of them 100 Hz', () => {
  const cases: [name: string, stamp: (i: number) => string | number, kind: string][] = [
    ['time [s]', (i) => (i / 100).toFixed(2), 's'],
    ['time_ms', (i) => 10 * i, 'ms'],
    ['millis', (i) => 5 + 10 * i, 'ms'],
    ['t (us)', (i) => 10_000 * i, 'us'],
    ['Time [µs]', (i) => 10_000 * i, 'us'],
    ['time_ns', (i) => 1e7 * i, 'ns'],
    ['time [min]', (i) => (i / 6000).toFixed(9), 'min'],
    ['timestamp', (i) => (epoch + i / 100).toFixed(2), 'epoch'],
    ['timestamp', (i) => epoch * 1000 + 10 * i, 'epoch'],
    ['timestamp', (i) => `${epoch}${String(10_000 * i).padStart(6, '0')}`, 'epoch'],
    ['timestamp', (i) => `${epoch}${String(1e7 * i + 3).padStart(9, '0')}`, 'epoch'],
    ['timestamp_ns', (i) => `${epoch}${String(1e7 * i + 3).padStart(9, '0')}`, 'epoch'],
    ['date', (i) => new Date(epoch * 1000 + 10 * i).toISOString(), 'iso8601'],
    ['date', (i) => new Date(epoch * 1000 + 10 * i).toISOString().replace('T', ' ').replace('Z', ''), 'iso8601'],
    ['when', (i) => new Date(epoch * 1000 + 10 * i).toISOString().replace('Z', '+02:00'), 'iso8601'],
    ['clock', (i) => clock(43_200_000 + 10 * i), 'clock'],
    ['t', (i) => (1e-2 * i).toExponential(6), 's'],
    ['t', (i) => (i / 100 - 0.5).toFixed(2), 's'],
  ];

  it.each(cases)('%s: %#', async (name, stamp, kind) => {
    const { facts } = await read(stamped(name, 90, stamp));
    expect(facts).toMatchObject({ timeKind: kind, rateHz: 100, resampled: false, gaps: [], notes: [] });
    expect(facts.durationSeconds).toBeCloseTo(0.9, 9);
    expect(facts.channels.map((channel) => channel.name)).toEqual(['a']);
  });

  it.each([
    [10, 'ms'],
    [10_000, 'us'],
    [10_000_000, 'ns'],
  ])('takes whole steps of %d without a unit for %s, and warns', async (step, kind) => {
    const { facts } = await read(stamped('time', 100, (i) => step * i));
    expect(facts).toMatchObject({ timeKind: kind, rateHz: 100, notes: [{ severity: 'warning' }] });
    expect(facts.notes[0].text).toContain('"time" has no unit');
  });

  it('finds stamps by their numbers where there is no header', async () => {
    const { facts } = await read(lines(100, (i) => `${(i / 100).toFixed(2)},${wave(i)}`));
    expect(facts).toMatchObject({ timeKind: 's', rateHz: 100, channels: [{ name: 'column 2', column: 2 }] });
  });

  it('does not take a signal for time, nor time for a signal', async () => {
    const text = `response_time_ms,time,date,n,a\n${lines(
      100,
      (i) => `${wave(i)},${i / 100},2024-05-01T10:00:00Z,${i},${wave(i + 1)}`,
    )}`;
    const { facts } = await read(text);
    expect(facts.timeName).toBe('time');
    expect(facts.channels.map(({ name }) => name)).toEqual(['response_time_ms', 'a']);
    expect(facts.leftOut.map(({ name }) => name)).toEqual(['date', 'n']);
  });

  it('reads zones as what they are', async () => {
    const zones = ['Z', '+02:00', '-0330', '+05'];
    const offsets = [0, 120, -210, 300];
    const { facts } = await read(
      stamped('date', 200, (i) => {
        const local = new Date(epoch * 1000 + 10 * i + offsets[i % 4] * 60_000);
        return local.toISOString().replace('Z', zones[i % 4]);
      }),
    );
    expect(facts).toMatchObject({ rateHz: 100, gaps: [], durationSeconds: 2 });
  });

  it('carries a clock on past midnight, and counters past their end', async () => {
    const night = await read(stamped('clock', 200, (i) => clock(86_399_000 + 10 * i)));
    expect(night.facts).toMatchObject({ rateHz: 100, durationSeconds: 2, gaps: [] });
    expect(night.facts.notes[0].text).toBe(
      'The clock started again from zero once, in row 102; the time was carried on.',
    );
    for (const bits of [16, 32]) {
      const { facts } = await read(stamped('t_us', 40_000, (i) => (2 ** bits - 5000 + 10 * i) % 2 ** bits));
      expect(facts).toMatchObject({ rateHz: 1e5, gaps: [], longestRunSamples: 40_000 });
      expect(facts.notes[0].text).toContain('started again from zero');
    }
  });
});

describe('a given rate', () => {
  it('makes the time where there is none', async () => {
    const { facts, runs } = await read(`a,b\n${lines(100, (i) => `${wave(i)},${i % 3}`)}`, { rateHz: 250 });
    expect(facts).toMatchObject({
      timeKind: 'none',
      timeName: null,
      rateHz: 250,
      jitterSeconds: 0,
      durationSeconds: 0.4,
    });
    expect(runs[0].channels[1].slice(0, 4)).toEqual([0, 1, 2, 0]);
  });

  it('overrules a time column', async () => {
    const { facts } = await read(
      stamped('time [s]', 100, (i) => i / 100),
      { rateHz: 50 },
    );
    expect(facts).toMatchObject({ timeKind: 'none', rateHz: 50, channels: [{ name: 'a' }], longestRunSamples: 100 });
    expect(facts.leftOut[0].why).toContain('overruled by the given rate');
  });

  it('turns a counter into time, gaps and all', async () => {
    const { facts } = await read(
      stamped('sample', 200, (i) => (i < 100 ? i : i + 7)),
      { rateHz: 50 },
    );
    expect(facts).toMatchObject({ timeKind: 'counter', timeName: 'sample', rateHz: 50, resampled: false });
    expect(facts.gaps).toEqual([{ row: 102, atSeconds: 99 / 50, lengthSeconds: expect.closeTo(8 / 50, 12) }]);
  });
});

describe('gaps, repeats and rows without a stamp', () => {
  it('finds every gap, and none in steps up to 1.5 periods', async () => {
    const late = [0, 0, 0.004, 1];
    const { facts, runs } = await read(stamped('t [s]', 400, (i) => (i / 100 + late[Math.floor(i / 100)]).toFixed(3)));
    expect(facts.gaps).toHaveLength(1);
    expect(facts.gaps[0]).toMatchObject({ row: 302 });
    expect(facts.gaps[0].atSeconds).toBeCloseTo(2.994, 9);
    expect(facts.gaps[0].lengthSeconds).toBeCloseTo(1.006, 9);
    expect(runs.map((run) => run.channels[0].length)).toEqual([300, 100]);
    expect(runs[1].startSeconds).toBeCloseTo(4, 2);
    expect(facts.notes[0].text).toMatch(/^1 gap in time of 1\.01 s before row 302/);
  });

  it('drops rows that repeat a stamp', async () => {
    const clean = await read(stamped('t [s]', 200, (i) => (i / 100).toFixed(2)));
    const rows = stamped('t [s]', 200, (i) => (i / 100).toFixed(2)).split('\n');
    const doubled = rows.flatMap((row, i) => (i === 50 || i === 120 ? [row, row] : [row])).join('\n');
    const { facts, runs } = await read(doubled);
    expect(runs).toEqual(clean.runs);
    expect(facts).toMatchObject({ rows: 202, gaps: [], longestRunSamples: 200 });
    expect(facts.notes.map(({ text }) => text)).toEqual([
      '2 rows, the first being 52, repeated the time stamp before and were dropped.',
    ]);
  });

  it('drops rows of other values too, where the stamps are even without them', async () => {
    const many = stamped('t [s]', 2000, (i) => (i / 100).toFixed(2))
      .trim()
      .split('\n');
    const random = many.flatMap((row, i) =>
      i > 0 && (Math.imul(i, 2654435761) >>> 0) % 53 === 3 ? [row, `${row}5`] : [row],
    );
    expect(random.length).toBeGreaterThan(2020);
    expect((await read(random.join('\n'))).facts).toMatchObject({ rateHz: 100, longestRunSamples: 2000 });
    const rows = stamped('t [s]', 200, (i) => (i / 100).toFixed(4)).split('\n');
    rows.splice(81, 0, '0.7900,99');
    const { facts, runs } = await read(rows.join('\n'));
    expect(Math.max(...runs[0].channels[0])).toBeLessThan(3);
    expect(facts.notes.map(({ text }) => text)).toEqual(['Row 82 repeated the time stamp before and was dropped.']);
  });

  it('keeps every row once where all are written twice', async () => {
    const clean = await read(stamped('t [s]', 200, (i) => (i / 100).toFixed(2)));
    const rows = stamped('t [s]', 200, (i) => (i / 100).toFixed(2))
      .trim()
      .split('\n');
    const { facts, runs } = await read([rows[0], ...rows.slice(1).flatMap((row) => [row, row])].join('\n'));
    expect(runs).toEqual(clean.runs);
    expect(facts).toMatchObject({ rateHz: 100, rows: 400 });
  });

  it('places rows without a stamp behind the row before', async () => {
    const clean = await read(stamped('t [s]', 200, (i) => (i / 100).toFixed(2)));
    const { facts, runs } = await read(
      stamped('t [s]', 200, (i) => (i === 60 || i === 61 ? '' : (i / 100).toFixed(2))),
    );
    expect(runs).toEqual(clean.runs);
    expect(facts.notes.map(({ text }) => text)).toEqual([
      '2 rows, the first being 62, had no time stamp and were placed one period behind the row before.',
    ]);
  });

  it('puts a second run at another rate onto the grid of the longest', async () => {
    const { facts, runs } = await read(
      stamped('t [s]', 500, (i) => (i < 300 ? i / 100 : 10 + (i - 300) / 110).toFixed(6)),
    );
    expect(facts).toMatchObject({ rateHz: 100, resampled: true });
    expect(facts.notes[1].text).toMatch(
      /^The rate changes from 100\.0 Hz to 110\.0 Hz in the run at 10\.0 s; the samples are/,
    );
    expect(runs.map((run) => run.channels[0].length)).toEqual([300, Math.floor((199 / 110) * 100) + 1]);
  });

  it('drops runs of a single sample', async () => {
    const { facts, runs } = await read(
      stamped('t [s]', 200, (i) => (i / 100 + (i >= 100 ? 1 : 0) + (i >= 101 ? 1 : 0)).toFixed(2)),
    );
    expect(runs.map((run) => run.channels[0].length)).toEqual([100, 99]);
    expect(facts.notes.at(-1)?.text).toBe('1 run of a single sample between gaps left out.');
  });

  it('drops a last row that is cut off', async () => {
    const { facts } = await read(`t [s],a,b\n${lines(100, (i) => `${i / 100},${wave(i)},${wave(2 * i)}`)}1.00,0.3`);
    expect(facts).toMatchObject({ rows: 100, notes: [{ text: 'The last row, 102, is incomplete and was dropped.' }] });
  });
});

describe('stamps coarser than they should be', () => {
  it.each([
    [3000, 1000],
    [1100, 1000],
    [1004, 1000],
    [980.4, 1000],
    [833.3, 1000],
    [640, 1000],
    [412.7, 1000],
    [104.2, 100],
  ])('spreads %d Hz written in 1/%d s, as even, without a gap', async (rateHz, perSecond) => {
    const { facts, runs } = await read(
      stamped('t [s]', 4000, (i) => (Math.floor((i * perSecond) / rateHz + 0.3) / perSecond).toFixed(3)),
    );
    expect(facts.gaps).toEqual([]);
    expect(facts).toMatchObject({ resampled: false, longestRunSamples: 4000 });
    expect(Math.abs(facts.rateHz / rateHz - 1)).toBeLessThan(3e-4);
    expect(runs[0].channels[0]).toEqual(Array.from({ length: 4000 }, (_, i) => wave(i)));
    expect(runs[0].startSeconds).toBe(0);
  });

  it('spreads samples that come in bundles with one stamp each, however late', async () => {
    const late = (i: number) => ((Math.imul(i, 2654435761) >>> 0) % 97) / 97;
    const { facts, runs } = await read(
      stamped('t [ms]', 4000, (i) => Math.floor((5 * i) / 16) * 16 + Math.floor(9 * late(Math.floor((5 * i) / 16)))),
    );
    expect(facts).toMatchObject({ resampled: false, gaps: [], longestRunSamples: 4000 });
    expect(Math.abs(facts.rateHz / 200 - 1)).toBeLessThan(1e-3);
    expect(runs[0].channels[0]).toEqual(Array.from({ length: 4000 }, (_, i) => wave(i)));
  });

  it.each([
    [[1500], [1502]],
    [
      [700, 1400, 2100],
      [702, 1401, 2100],
    ],
    [
      [100, 700, 1500],
      [102, 701, 1500],
    ],
  ])('still finds %j lost where the stamps step by exactly one period', async (lost, found) => {
    const all = Array.from({ length: 3000 }, (_, i) => i).filter((i) => !lost.includes(i));
    const { facts } = await read(`t [ms],a\n${all.map((i) => `${i},${wave(i)}`).join('\n')}\n`);
    expect(facts).toMatchObject({ rateHz: 1000, resampled: false });
    expect(facts.gaps.map(({ row }) => row)).toEqual(found);
  });

  it('finds many random losses too', async () => {
    const kept = Array.from({ length: 4000 }, (_, i) => i).filter((i) => (Math.imul(i, 2654435761) >>> 0) % 97 !== 5);
    const { facts } = await read(`t [ms],a\n${kept.map((i) => `${i},${wave(i)}`).join('\n')}\n`);
    expect(facts.gaps.length).toBe(4000 - kept.length);
    expect(facts.rateHz).toBe(1000);
  });

  it('tells unevenness beyond what the resolution explains', async () => {
    const uneven = (i: number) => Math.round(10 * i + 1.5 * Math.sin(i * 7.3));
    expect((await read(stamped('t [ms]', 2000, uneven))).facts.resampled).toBe(true);
    expect((await read(stamped('t [ms]', 2000, (i) => Math.round(9.7 * i)))).facts.resampled).toBe(false);
  });

  it('lets a slow wander of the clock pass, and says so', async () => {
    const wander = (i: number) => (i / 1000 + 0.005 * Math.sin(i / 2000)).toFixed(7);
    const { facts } = await read(stamped('t [s]', 30_000, wander));
    expect(facts.resampled).toBe(false);
    expect(facts.notes[0].text).toMatch(/^The clock wanders by \d\.\d+ ms/);
  });
});
