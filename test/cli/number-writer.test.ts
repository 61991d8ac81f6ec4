import fc from 'fast-check';
import { expect, test } from 'vitest';
import { NumberWriter } from '../../src/cli/number-writer.ts';

function printed(write: (writer: NumberWriter) => void): string {
  const writer = new NumberWriter();
  write(writer);
  return new TextDecoder().decode(writer.take());
}

const valueText = (value: number) => printed((writer) => writer.value(value)).slice(1);
const secondsText = (seconds: number) => printed((writer) => writer.seconds(seconds));

test('a value is read back within half a unit of its ninth digit', () => {
  const spread = fc
    .tuple(fc.double({ min: -10, max: 10, noNaN: true }), fc.integer({ min: -12, max: 12 }))
    .map(([mantissa, exponent]) => mantissa * 10 ** exponent);
  fc.assert(
    fc.property(fc.oneof(spread, fc.double({ noNaN: true, noDefaultInfinity: true })), (value) => {
      const unit = value === 0 ? 0 : 10 ** (Math.floor(Math.log10(Math.abs(value))) - 8);
      expect(Math.abs(Number(valueText(value)) - value)).toBeLessThanOrEqual(0.500001 * unit + Number.MIN_VALUE);
    }),
    { numRuns: 20_000 },
  );
});

test('a value of up to nine digits is read back as it is', () => {
  fc.assert(
    fc.property(fc.integer({ min: -999_999_999, max: 999_999_999 }), fc.nat({ max: 14 }), (digits, decimals) => {
      const value = Number(`${digits}e-${decimals}`);
      expect(Number(valueText(value))).toBe(value);
    }),
    { numRuns: 20_000 },
  );
});

test('a time is read back to the nanosecond', () => {
  fc.assert(
    fc.property(fc.double({ min: 0, max: 2e9, noNaN: true }), (seconds) => {
      expect(Number(secondsText(seconds))).toBe(Number(seconds.toFixed(9)));
    }),
    { numRuns: 20_000 },
  );
});

test.each([
  [0, '0'],
  [-0, '0'],
  [1, '1'],
  [-1.5, '-1.5'],
  [0.05, '0.05'],
  [9.999999994, '9.99999999'],
  [9.9999999996, '10'],
  [99999999.96, '100000000'],
  [1e-6, '0.000001'],
  [1.25e-7, '1.25e-7'],
  [123456789012, '123456789000'],
  [9.80665, '9.80665'],
])('%d is written as %s', (value, text) => {
  expect(valueText(value)).toBe(text);
});

test.each([
  [0, '0'],
  [0.001, '0.001'],
  [59.9999999999, '60'],
  [1200, '1200'],
  [1.000000001, '1.000000001'],
])('%d s is written as %s', (seconds, text) => {
  expect(secondsText(seconds)).toBe(text);
});

test('many rows between two takes are all kept, and none comes twice', () => {
  const writer = new NumberWriter();
  for (let row = 0; row < 20_000; row++) {
    writer.seconds(row);
    writer.value(row / 2);
    writer.endLine();
  }
  const rows = new TextDecoder().decode(writer.take()).split('\n');
  expect(rows).toHaveLength(20_001);
  expect(rows[19_999]).toBe('19999,9999.5');
  expect(writer.take()).toHaveLength(0);
});
