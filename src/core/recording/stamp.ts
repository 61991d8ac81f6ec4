/** How a time stamp is written: a number, ISO 8601 date and time, or a time of day. */
export type StampForm = 'number' | 'iso8601' | 'clock';

const ISO = /^(\d{4})-(\d\d)-(\d\d)(?:[T ]+(\d\d):(\d\d)(?::(\d\d)(?:[.,](\d+))?)?\s*(Z|[+-]\d\d(?::?\d\d)?)?)?$/i;
const CLOCK = /^(\d{1,2}):(\d\d):(\d\d)(?:[.,:](\d+))?$/;
const NUMBER = /^([+-]?)(\d*)(?:\.(\d*))?(?:[eE]([+-]?\d+))?$/;
const SPLIT = 1e9;

/** A stamp in two whole parts and a fraction, so that 19 digits are kept: (high·10⁹ + low + fraction). */
interface Stamp {
  readonly high: number;
  readonly low: number;
  readonly fraction: number;
}

/** How a token is written as a time stamp; null where it is none. Plain numbers are 'number'. */
export function stampForm(text: string, decimal: '.' | ','): StampForm | null {
  const trimmed = text.trim();
  if (ISO.test(trimmed)) return 'iso8601';
  if (CLOCK.test(trimmed)) return 'clock';
  return numberStamp(trimmed, decimal) ? 'number' : null;
}

/**
 * Reads stamps relative to the whole part of the first one, which keeps nanoseconds of an epoch apart where a double would not.
 * Numbers keep their unit; dates and times of day are in seconds. Dates count by the proleptic Gregorian calendar; a zone is
 * subtracted, none is taken as UTC.
 */
export class StampReader {
  private readonly parse: (text: string) => Stamp | null;
  private origin: Stamp | null = null;

  constructor(form: StampForm, decimal: '.' | ',') {
    this.parse = form === 'iso8601' ? isoStamp : form === 'clock' ? clockStamp : (text) => numberStamp(text, decimal);
  }

  /** The stamp, counted from the whole part of the first; NaN where the text is no stamp. */
  read(text: string): number {
    const stamp = this.parse(text.trim());
    return stamp ? this.relative(stamp.high, stamp.low, stamp.fraction) : Number.NaN;
  }

  /** The same for a stamp that is already taken apart: the number high·10⁹ + low + fraction. */
  relative(high: number, low: number, fraction: number): number {
    this.origin ??= { high, low, fraction: 0 };
    return (high - this.origin.high) * SPLIT + (low - this.origin.low) + fraction;
  }

  /** Size of the first stamp's whole part, by which an epoch is known; 0 before any was read. */
  get firstWhole(): number {
    return this.origin ? this.origin.high * SPLIT + this.origin.low : 0;
  }
}

function numberStamp(text: string, decimal: '.' | ','): Stamp | null {
  const plain = decimal === ',' ? text.replace(',', '.') : text;
  const match = NUMBER.exec(plain);
  if (!match || (match[2] === '' && (match[3] ?? '') === '')) return null;
  const [, sign, whole, fraction = '', exponent] = match;
  const factor = sign === '-' ? -1 : 1;
  if (exponent !== undefined || whole.length > 24) {
    const value = Number(plain);
    const low = Math.trunc(value);
    return Number.isFinite(value) ? { high: 0, low, fraction: value - low } : null;
  }
  const high = whole.length > 15 ? Number(whole.slice(0, -9)) : 0;
  const low = Number(whole.length > 15 ? whole.slice(-9) : whole);
  return { high: factor * high, low: factor * low, fraction: factor * Number(`0.${fraction}`) };
}

function isoStamp(text: string): Stamp | null {
  const match = ISO.exec(text);
  if (!match) return null;
  const [, year, month, day, hour = '0', minute = '0', second = '0', fraction = '', zone = 'Z'] = match;
  const date = Date.UTC(Number(year), Number(month) - 1, Number(day)) / 1000;
  const ofDay = Number(hour) * 3600 + Number(minute) * 60 + Number(second);
  return { high: 0, low: date + ofDay - zoneSeconds(zone), fraction: Number(`0.${fraction}`) };
}

function zoneSeconds(zone: string): number {
  if (zone.toUpperCase() === 'Z') return 0;
  const digits = zone.slice(1).replace(':', '');
  const seconds = Number(digits.slice(0, 2)) * 3600 + Number(digits.slice(2) || '0') * 60;
  return zone.startsWith('-') ? -seconds : seconds;
}

function clockStamp(text: string): Stamp | null {
  const match = CLOCK.exec(text);
  if (!match) return null;
  const [, hour, minute, second, fraction = ''] = match;
  return {
    high: 0,
    low: Number(hour) * 3600 + Number(minute) * 60 + Number(second),
    fraction: Number(`0.${fraction}`),
  };
}
