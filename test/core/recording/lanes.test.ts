import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { NumberLane, QuoteFound } from '../../../src/core/recording/number-lane.ts';
import type { Layout, RowLane } from '../../../src/core/recording/rows.ts';
import { TextLane } from '../../../src/core/recording/text-lane.ts';

function layout(fields: number, over: Partial<Layout> & { delimiter?: string; decimal?: '.' | ',' } = {}): Layout {
  const { delimiter = ',', decimal = '.', ...rest } = over;
  return {
    file: 'made.csv',
    dialect: {
      encoding: 'utf-8',
      delimiter,
      decimal,
      newline: '\n',
      preambleLines: 0,
      headerLine: null,
      unitsLine: null,
    },
    firstDataLine: 1,
    fields,
    stampField: -1,
    stampForm: 'number',
    valueFields: Array.from({ length: fields }, (_, i) => i),
    ...rest,
  };
}

interface Table {
  lines: number[];
  stamps: number[];
  values: number[][];
}

function run(lane: RowLane, text: string, chunkBytes = 1 << 16): Table {
  const bytes = new TextEncoder().encode(text);
  const table: Table = { lines: [], stamps: [], values: [] };
  const take = () => {
    for (let batch = lane.next(); batch; batch = lane.next())
      for (let row = 0; row < batch.length; row++) {
        table.lines.push(batch.lines[row]);
        table.stamps.push(batch.stamps[row]);
        table.values.push(batch.values.map((column) => column[row]));
      }
  };
  for (let at = 0; at < bytes.length; at += chunkBytes) {
    lane.feed(bytes.slice(at, at + chunkBytes));
    take();
  }
  lane.finish();
  take();
  return table;
}

const column = (texts: readonly string[], over = {}) =>
  run(new NumberLane(layout(1, over), 100), `${texts.join('\n')}\n`).values.map(([value]) => value);

const digits = fc.string({ unit: fc.constantFrom(...'0123456789'), minLength: 1, maxLength: 22 });
const literal = fc
  .tuple(
    fc.constantFrom('', '-', '+'),
    digits,
    fc.option(digits, { nil: null }),
    fc.option(fc.integer({ min: -30, max: 30 }), { nil: null }),
    fc.constantFrom('e', 'E'),
  )
  .map(([sign, whole, fraction, exponent, e]) =>
    [sign, whole, fraction === null ? '' : `.${fraction}`, exponent === null ? '' : `${e}${exponent}`].join(''),
  );

describe('NumberLane', () => {
  it('gives the doubles of Number(), to the last bit, for any decimal literal', () => {
    fc.assert(
      fc.property(fc.array(literal, { minLength: 1, maxLength: 60 }), (texts) => {
        expect(column(texts)).toEqual(texts.map(Number));
      }),
      { numRuns: 500 },
    );
  });

  it('gives back any double that is printed', () => {
    const doubles = fc.double({ noNaN: true, noDefaultInfinity: true });
    fc.assert(
      fc.property(fc.array(doubles, { minLength: 1, maxLength: 60 }), (values) => {
        const texts = values.map((value) => (Object.is(value, -0) ? '-0' : String(value)));
        expect(column(texts)).toEqual(values);
      }),
      { numRuns: 300 },
    );
  });

  it.each([
    '0',
    '-0',
    '.5',
    '5.',
    '00000000000000000001.5',
    '123456789012345',
    '1234567890123456',
    '9007199254740993',
    '0.1',
    '0.3',
    '2.2250738585072014e-308',
    '4.9e-324',
    '1.7976931348623157e308',
    '8.5e-23',
    '1e22',
    '1e23',
    '123456789012345e22',
    '3.14159265358979e-7',
    '0.000000000000000000000012345',
    '1e-22',
    '1e00005',
    '-1E+3',
  ])('reads %s as Number() does', (text) => {
    expect(column([text])).toEqual([Number(text)]);
  });

  it('reads decimal commas, and blanks around numbers', () => {
    expect(column(['1,5', ' -2,25 ', '\t3', '4e-1'], { delimiter: ';', decimal: ',' })).toEqual([1.5, -2.25, 3, 0.4]);
  });

  it('leaves no value where one is missing or unreadable, and tells the second', () => {
    const lane = new NumberLane(layout(2), 100);
    const odd = ['', 'NaN', 'nan', 'NULL', 'NA', '-', 'inf', '1e999'];
    const bad = ['x', '1.2.3', '1-2', '0x10', '1e', '.', '1 2'];
    const { values } = run(lane, [...odd, ...bad].map((text) => `7,${text}\n`).join(''));
    expect(values).toEqual([...odd, ...bad].map(() => [7, Number.NaN]));
    expect(lane.faults.of([0, 1])).toEqual({
      rows: bad.length,
      first: bad.slice(0, 5).map((text, i) => ({ line: odd.length + i + 1, field: 1, text })),
    });
  });

  it('counts lines through comments, blank lines and preamble, and takes any line end', () => {
    const text = '# made\nname\n\n1,2\r\n% note\n// note\n  \n3,4,\n5,6';
    const table = run(new NumberLane(layout(2, { firstDataLine: 3 }), 100), text);
    expect(table).toMatchObject({
      lines: [4, 8, 9],
      values: [
        [1, 2],
        [3, 4],
        [5, 6],
      ],
    });
    const mac = layout(2, { dialect: { ...layout(2).dialect, newline: '\r' } });
    expect(run(new NumberLane(mac, 2), '1,2\r\r3,4\r').lines).toEqual([1, 3]);
  });

  it('tells ragged rows, and drops one that the end of the file cuts off', () => {
    const lane = new NumberLane(layout(3), 100);
    const { values } = run(lane, '1,2,3\n4,5\n6,7,8,9\n1,2');
    expect(values[0]).toEqual([1, 2, 3]);
    expect(values.slice(1)).toEqual([1, 2].map(() => [Number.NaN, Number.NaN, Number.NaN]));
    expect(lane.faults.of([])).toEqual({
      rows: 2,
      first: [
        { line: 2, field: -1, text: '4,5' },
        { line: 3, field: -1, text: '6,7,8,9' },
      ],
    });
    expect(lane.faults.incompleteLine).toBe(4);
  });

  it('takes any run of blanks for one delimiter', () => {
    const text = '  1   2\t3\n4 5  6  \n';
    expect(run(new NumberLane(layout(3, { delimiter: ' ' }), 100), text).values).toEqual([
      [1, 2, 3],
      [4, 5, 6],
    ]);
  });

  it('keeps nanoseconds of an epoch apart', () => {
    const over = { stampField: 0, valueFields: [1] };
    const text = '1700000000000000001,1\n1700000000000000003,2\n1700000000000000257,3\n';
    expect(run(new NumberLane(layout(2, over), 100), text).stamps).toEqual([0, 2, 256]);
    const parts = '1700000000.000000001,1\n1700000000.250000002,2\n';
    expect(run(new NumberLane(layout(2, over), 100), parts).stamps).toEqual([1e-9, 0.250000002]);
  });

  it('refuses quotes, which are for the other lane', () => {
    expect(() => run(new NumberLane(layout(2), 100), '1,2\n3,"4"\n')).toThrow(QuoteFound);
  });
});

describe('both lanes', () => {
  const token = fc.oneof(
    { weight: 6, arbitrary: literal },
    { weight: 1, arbitrary: fc.constantFrom('', 'NaN', '-', 'x', ' 1 ', '2020-01-01', 'µ', '1;2', '1 2') },
  );
  const row = fc.oneof(
    { weight: 9, arbitrary: fc.array(token, { minLength: 3, maxLength: 3 }).map((tokens) => tokens.join(',')) },
    { weight: 1, arbitrary: fc.constantFrom('', '# note', '1,2', '1,2,3,', '1,2,3,4', ',,', '  ') },
  );

  it('read the same rows, whatever the pieces and batches', () => {
    const over = { stampField: 0, valueFields: [1, 2] };
    fc.assert(
      fc.property(
        fc.array(row, { maxLength: 30 }),
        fc.constantFrom('\n', ''),
        fc.integer({ min: 1, max: 40 }),
        fc.integer({ min: 1, max: 9 }),
        (rows, end, chunk, capacity) => {
          const text = rows.join('\n') + end;
          const whole = new NumberLane(layout(3, over), 1000);
          const expected = run(whole, text);
          for (const lane of [new NumberLane(layout(3, over), capacity), new TextLane(layout(3, over), capacity)]) {
            expect(run(lane, text, chunk)).toEqual(expected);
            expect(lane.faults).toEqual(whole.faults);
          }
        },
      ),
      { numRuns: 500 },
    );
  });

  it('agree on blanks as delimiters and on decimal commas', () => {
    for (const over of [
      { delimiter: ' ', decimal: ',' as const },
      { delimiter: '\t', decimal: ',' as const },
      { delimiter: ';', decimal: ',' as const },
    ]) {
      const text = ['1,5', '-2,25', '3'].join(over.delimiter);
      const lane = run(new TextLane(layout(3, over), 9), `${text}\n${text}`);
      expect(lane).toEqual(run(new NumberLane(layout(3, over), 9), `${text}\n${text}`));
      expect(lane.values[1]).toEqual([1.5, -2.25, 3]);
    }
  });
});

describe('TextLane', () => {
  it('reads quoted fields, with delimiters, quotes and line ends in them, and counts lines on', () => {
    const over = { valueFields: [0, 2] };
    const text = '"1","a, ""b""\nc","2"\n3,plain,"4"\n';
    for (const chunk of [1, 3, 100])
      expect(run(new TextLane(layout(3, over), 9), text, chunk)).toMatchObject({
        lines: [1, 3],
        values: [
          [1, 2],
          [3, 4],
        ],
      });
  });

  it('gives a stray quote up after a mebibyte, whatever the pieces', () => {
    const text = `1,"open\n${'2,x\n'.repeat(300_000)}`;
    for (const chunk of [1000, 1 << 22]) {
      const { values } = run(new TextLane(layout(2, { valueFields: [0] }), 1000), text, chunk);
      expect(values.length).toBeGreaterThan(30_000);
    }
  });

  it('takes a quote within a field for what it is', () => {
    expect(run(new TextLane(layout(2, { valueFields: [0] }), 9), '1,5" pipe\n2,x\n').values).toEqual([[1], [2]]);
  });
});
