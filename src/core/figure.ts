/** Rounds to `digits` significant digits and prints plainly; very large and very small values in powers of ten. */
export function significant(value: number, digits = 3): string {
  if (!Number.isFinite(value)) return value > 0 ? '∞' : value < 0 ? '−∞' : 'not known';
  if (value === 0) return '0';
  const size = Math.abs(value);
  if (size >= 1e-4 && size < 1e6) {
    const decimals = Math.max(0, digits - 1 - Math.floor(Math.log10(Number(size.toPrecision(digits)))));
    return minus(Number(value.toPrecision(digits)).toFixed(decimals));
  }
  const [mantissa, exponent] = value.toExponential(digits - 1).split('e');
  return `${minus(mantissa as string)}·10${superscript(Number(exponent))}`;
}

/** `3.0 Hz`, `24 kHz`: two digits by default, as a corner is read. */
export function hertz(valueHz: number, digits = 2): string {
  if (valueHz >= 10_000) return `${significant(valueHz / 1000, Math.max(digits, 3))} kHz`;
  return `${significant(valueHz, digits)} Hz`;
}

/** A corner as it is built: `3.0 Hz` where two digits say it exactly, `185 Hz` or `2.86 Hz` where it takes three. */
export function corner(valueHz: number): string {
  const exact = Math.abs(Number(valueHz.toPrecision(2)) / valueHz - 1) < 1e-9;
  return hertz(valueHz, exact ? 2 : 3);
}

/** `20.4 dB`, one decimal. */
export function decibels(valueDb: number): string {
  return Number.isFinite(valueDb) ? `${minus(valueDb.toFixed(1))} dB` : `${significant(valueDb)} dB`;
}

/** `53 ms`, `1.20 s`, `340 µs`: three digits in the unit that fits. */
export function seconds(valueSeconds: number): string {
  const size = Math.abs(valueSeconds);
  if (size === 0) return '0 s';
  if (size < 1e-6) return `${significant(valueSeconds * 1e9)} ns`;
  if (size < 1e-3) return `${significant(valueSeconds * 1e6)} µs`;
  if (size < 1) return `${significant(valueSeconds * 1e3)} ms`;
  if (size < 600) return `${significant(valueSeconds)} s`;
  return size < 7200 ? `${significant(valueSeconds / 60)} min` : `${significant(valueSeconds / 3600)} h`;
}

/** A value in the unit of its channel: `0.0360 m/s²`; no unit, no blank. */
export function quantity(value: number, unit: string, digits = 3): string {
  return unit === '' ? significant(value, digits) : `${significant(value, digits)} ${unit}`;
}

/** `12 %`, of a ratio. */
export function percent(ratio: number, digits = 2): string {
  return `${significant(ratio * 100, digits)} %`;
}

/** A count with thousands apart: `2,000,000`. */
export function count(value: number): string {
  return value.toLocaleString('en-US');
}

function minus(text: string): string {
  return text.replace('-', '−');
}

function superscript(exponent: number): string {
  return [...String(exponent)].map((c) => (c === '-' ? '⁻' : '⁰¹²³⁴⁵⁶⁷⁸⁹'[Number(c)])).join('');
}
