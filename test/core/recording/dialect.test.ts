import { describe, expect, it } from 'vitest';
import { readColumns, splitUnit } from '../../../src/core/recording/columns.ts';
import { readDialect } from '../../../src/core/recording/dialect.ts';

const head = (text: string) => readDialect('made.csv', new TextEncoder().encode(text), true);

describe('readDialect', () => {
  it.each([
    ['commas', 't,a\n0.1,1.5\n0.2,2.5\n', { delimiter: ',', decimal: '.' }],
    ['commas and blanks', 't, a\n0.1, 1.5\n0.2, 2.5\n', { delimiter: ',', decimal: '.' }],
    ['semicolons', 't;a\n0.1;1.5\n0.2;2.5\n', { delimiter: ';', decimal: '.' }],
    ['semicolons with decimal comma', 't;a\n0,1;1,5\n0,2;2,5\n', { delimiter: ';', decimal: ',' }],
    ['tabs', 't\ta\n0.1\t1.5\n0.2\t2.5\n', { delimiter: '\t', decimal: '.' }],
    ['tabs with decimal comma', 't\ta\n0,1\t1,5\n0,2\t2,5\n', { delimiter: '\t', decimal: ',' }],
    ['bars', 't|a\n0.1|1.5\n0.2|2.5\n', { delimiter: '|', decimal: '.' }],
    ['blanks', '  t   a\n0.1   1.5\n0.2   2.5\n', { delimiter: ' ', decimal: '.' }],
    ['blanks with decimal comma', 't a\n0,1 1,5\n0,2 2,5\n', { delimiter: ' ', decimal: ',' }],
    ['dates with a blank', 'time,a\n2024-05-01 10:00:00.1,1.5\n2024-05-01 10:00:00.2,2.5\n', { delimiter: ',' }],
    ['one column', 'a\n1.5\n2.5\n', { delimiter: ',', decimal: '.' }],
    ['a text column', 't,a,b\n0.1,1.5,on\n0.2,2.5,off\n', { delimiter: ',' }],
  ])('finds %s', (_title, text, dialect) => {
    expect(head(text).dialect).toMatchObject({ ...dialect, headerLine: 1, preambleLines: 0 });
    expect(head(text).firstDataLine).toBe(2);
  });

  it.each([
    ['\n', '\n'],
    ['\r\n', '\r\n'],
    ['\r', '\r'],
  ] as const)('finds the line end %j', (end, newline) => {
    const found = head(['t,a', '0,1', '1,2', ''].join(end));
    expect(found).toMatchObject({ dialect: { newline, headerLine: 1 }, names: ['t', 'a'], fields: 2 });
  });

  it('finds preamble, header and a row of units', () => {
    const text = 'Logger;7\nStarted;today, at noon\n\ntime;ax;ay\ns;m/s^2;m/s^2\n0;1;2\n1;2;3\n';
    expect(head(text)).toMatchObject({
      dialect: { delimiter: ';', preambleLines: 3, headerLine: 4, unitsLine: 5 },
      names: ['time', 'ax', 'ay'],
      units: ['s', 'm/s^2', 'm/s^2'],
      firstDataLine: 6,
    });
  });

  it('finds a header that stands in a comment, and one that is not there', () => {
    expect(head('# made up\n# time, ax\n0,1\n1,2\n')).toMatchObject({
      dialect: { headerLine: 2 },
      names: ['time', 'ax'],
    });
    expect(head('0,1\n1,2\n')).toMatchObject({
      dialect: { headerLine: null, preambleLines: 0 },
      names: [],
      firstDataLine: 1,
    });
  });

  it('lets channels be named by numbers', () => {
    expect(head('time,1,2\n0,5,6\n1,6,7\n')).toMatchObject({ names: ['time', '1', '2'], firstDataLine: 2 });
  });

  it('takes a delimiter behind the last field for an end', () => {
    expect(head('t,a,\n0,1,\n1,2,\n')).toMatchObject({ fields: 2, names: ['t', 'a', ''] });
  });

  it('keeps a quoted header whole, line end and all', () => {
    const found = head('"time, s","a\nupper"\n0,1\n1,2\n');
    expect(found).toMatchObject({ quoted: true, names: ['time, s', 'a\nupper'], firstDataLine: 3 });
  });

  it('takes a byte order mark off, reads UTF-16 and, where it is no UTF-8, Latin letters', () => {
    expect(head('\ufefft,a\n0,1\n').names).toEqual(['t', 'a']);
    const text = '\ufefft;temp [°C]\n0;1\n1;2\n';
    const utf16 = Uint8Array.from([...text].flatMap((sign) => [sign.charCodeAt(0) & 255, sign.charCodeAt(0) >> 8]));
    expect(readDialect('x', utf16, true)).toMatchObject({
      dialect: { encoding: 'utf-16le' },
      names: ['t', 'temp [°C]'],
    });
    const latin = Uint8Array.from([...text.slice(1)].map((sign) => sign.charCodeAt(0)));
    expect(readDialect('x', latin, true)).toMatchObject({ dialect: { encoding: 'latin1' }, names: ['t', 'temp [°C]'] });
  });

  it('does not trip over a letter that the end of the head cuts in two', () => {
    const bytes = new TextEncoder().encode('t,a\n0,1\n1,2\n3,µ');
    expect(readDialect('x', bytes.subarray(0, bytes.length - 1), false).dialect.encoding).toBe('utf-8');
  });
});

describe('readColumns', () => {
  it('makes names whole and unique and finds what is numeric', () => {
    expect(readColumns(head('time [s],ax,,ax,state\n0,1,2,3,on\n1,2,3,4,off\n'))).toMatchObject([
      { name: 'time', unit: 's', numeric: true },
      { name: 'ax', unit: '', numeric: true },
      { name: 'column 3', numeric: true },
      { name: 'ax (2)', numeric: true },
      { name: 'state', numeric: false },
    ]);
  });

  it('takes units from their row, brackets off', () => {
    const columns = readColumns(head('time,ax,temp\n[s],[m/s^2],°C\n0,1,2\n1,2,3\n'));
    expect(columns.map(({ unit }) => unit)).toEqual(['s', 'm/s^2', '°C']);
  });

  it.each([
    ['ax [g]', 'ax', 'g'],
    ['ax (m/s^2)', 'ax', 'm/s^2'],
    ['Force[kN]', 'Force', 'kN'],
    ['speed / rpm', 'speed', 'rpm'],
    ['ax_g', 'ax_g', 'g'],
    ['raw_acceleration_x_gs', 'raw_acceleration_x_gs', 'g'],
    ['pressure_pascals', 'pressure_pascals', 'Pa'],
    ['supply_V', 'supply_V', 'V'],
    ['rate (2) [°/s]', 'rate (2)', '°/s'],
    ['ax', 'ax', ''],
    ['sensor_a', 'sensor_a', ''],
    ['channel_v', 'channel_v', ''],
    ['[g]', '[g]', ''],
    ['constructor_constructor', 'constructor_constructor', ''],
  ])('splits %s', (text, name, unit) => {
    expect(splitUnit(text)).toEqual({ name, unit });
  });
});
