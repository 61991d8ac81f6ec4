import { describe, expect, it } from 'vitest';
import { UserError } from '../../../src/core/user-error.ts';
import { lines, read, wave } from './reading.ts';

const table = (count: number, row: (i: number) => string) => `time [s],a\n${lines(count, row)}`;
const rubbish = Uint8Array.from({ length: 4096 }, (_, i) => (i * 7919) % 251);
const control = Uint8Array.from({ length: 4096 }, (_, i) => 1 + ((i * 7919) % 250));

describe('input that cannot be used is told in one sentence that names the file', () => {
  const cases: [title: string, content: string | Uint8Array, says: RegExp][] = [
    ['empty file', '', /is empty/],
    ['blank lines only', '\n \n\n', /empty but for blank lines/],
    ['header only', 'time [s],a\n', /header only and no rows/],
    ['header below a comment', '# made\ntime [s],a\n', /header only and no rows/],
    ['text only', `name,colour\n${lines(100, () => 'x,red')}`, /no numeric column in its first 101 rows/],
    ['time only', `time [s],colour\n${lines(100, (i) => `${i},red`)}`, /no numeric column besides time/],
    ['one row', table(1, () => '0,1'), /one row of data; at least 64/],
    ['63 samples', table(63, (i) => `${i / 100},${wave(i)}`), /63 rows of data; at least 64/],
    ['equal samples', table(200, (i) => `${i / 100},3`), /equal samples: every numeric column is constant/],
    ['runs too short', table(200, (i) => `${i / 100 + Math.floor(i / 50)},${wave(i)}`), /without a gap has 50 samples/],
    ['time running backwards', table(200, (i) => `${(200 - i) / 100},${wave(i)}`), /runs backwards in row 3;/],
    ['one step back', table(200, (i) => `${(i === 150 ? 140 : i) / 100},${wave(i)}`), /runs backwards in row 152;/],
    ['NUL bytes', rubbish, /not a text file/],
    ['control bytes', control, /not a text file/],
    ['gzip', Uint8Array.of(0x1f, 0x8b, 8, 0, 0, 0), /packed with gzip/],
    ['spreadsheet', Uint8Array.of(0x50, 0x4b, 3, 4, 0, 0), /zip archive or a spreadsheet/],
    ['no time', `a,b\n${lines(200, (i) => `${wave(i)},${wave(i + 5)}`)}`, /no time column.*--rate/],
    ['counter only', `sample,a\n${lines(200, (i) => `${i},${wave(i)}`)}`, /counts samples in column "sample".*--rate/],
    ['no stamp readable', `time [s],a\n${lines(200, (i) => `,${wave(i)}`)}`, /no time column|no readable time stamp/],
    [
      'sparse columns',
      `time [s],a\n${lines(200, (i) => `${i / 100},${i % 3 ? '' : wave(i)}`)}`,
      /no channel that can be used: "a" \(only 67 of 200/,
    ],
  ];

  it.each(cases)('%s', async (_title, content, says) => {
    const error: unknown = await read(content).then(
      () => null,
      (thrown: unknown) => thrown,
    );
    expect(error).toBeInstanceOf(UserError);
    const { kind, message } = error as UserError;
    expect(kind).toBe('input');
    expect(message).toMatch(/^made\.csv/);
    expect(message).toMatch(says);
    expect(message).toMatch(/^[^\n]*[.?]$/);
  });

  it('names the first five places where more than 1 % of the rows are unreadable', async () => {
    const bad = new Map([
      [10, '0.1,oops'],
      [50, 'half,1.2.3'],
      [60, '0.6'],
      [70, 'late,1'],
      [80, '0.8,1,2'],
      [90, '0.9,again'],
    ]);
    const text = table(500, (i) => bad.get(i) ?? `${i / 100},${wave(i)}`);
    await expect(read(text)).rejects.toThrow(
      'made.csv: 6 of 500 rows (1.2 %) cannot be read, the first ones being row 12, column "a": "oops"; ' +
        'row 52, column "time": "half"; row 52, column "a": "1.2.3"; row 62: wrong number of fields, "0.6"; row 72, column "time": "late"; ' +
        'mend them or export the recording again.',
    );
  });

  it('counts a ragged row once, with a time column or without', async () => {
    const text = `a,b\n${lines(500, (i) => (i === 9 ? '1' : `${wave(i)},${wave(2 * i)}`))}`;
    const { facts } = await read(text, { rateHz: 100 });
    expect(facts.notes[0].text).toBe('1 row could not be read and counts as missing, the first being row 11: "1".');
  });

  it('reads on where exactly 1 % of the rows are unreadable, and says so', async () => {
    const { facts, runs } = await read(table(500, (i) => `${i / 100},${i % 100 === 7 ? 'bad\u0007' : wave(i)}`));
    expect(runs[0].channels[0]).toHaveLength(500);
    expect(facts.notes).toEqual([
      {
        severity: 'warning',
        text: '5 rows could not be read and count as missing, the first being row 9, column "a": "bad·".',
      },
      { severity: 'note', text: 'Channel "a": 5 missing values bridged by a straight line, the first in row 9.' },
    ]);
  });
});
