import { UserError } from '../user-error.ts';
import type { Column } from './columns.ts';
import type { Head } from './dialect.ts';
import { median } from './median.ts';
import type { TimeKind } from './recording.ts';
import { type StampForm, StampReader, stampForm } from './stamp.ts';

/** The time column and how its stamps become seconds. */
export interface TimeColumn {
  /** 0-based field; -1 where there is none. */
  readonly field: number;
  readonly name: string | null;
  readonly form: StampForm;
  readonly kind: TimeKind;
  /** Units of the stamps in a second; for a counter, counts. */
  readonly unitsPerSecond: number;
  /** How the unit was found where the file does not say it; null where it does. */
  readonly guess: string | null;
  /** Fields that tell time or count samples besides it: no channels. */
  readonly others: readonly number[];
}

type Unit = 's' | 'ms' | 'us' | 'ns' | 'min';

const PER_SECOND: Record<Unit, number> = { s: 1, ms: 1e3, us: 1e6, ns: 1e9, min: 1 / 60 };
const UNIT_WORDS: readonly [RegExp, Unit][] = [
  [/^(?:s|secs?|seconds?)$/i, 's'],
  [/^(?:ms|msecs?|millis|milliseconds?)$/i, 'ms'],
  [/^(?:[uµμ]s|[uµμ]secs?|micros|microseconds?)$/i, 'us'],
  [/^(?:ns|nsecs?|nanos|nanoseconds?)$/i, 'ns'],
  [/^(?:min|mins|minutes?)$/i, 'min'],
];
/** Names that mean time whatever the numbers do, with a unit behind them or not; others must also rise. */
const TIME =
  /^(?:t|time|date|date[_ ]?time|time[_ ]?stamp|epoch|clock|elapsed|uptime|s|secs?|seconds?|ms|millis|[uµμ]s|micros|ns|nanos)$/i;
const TIME_WORD = /(?:^|[_ ])(?:time|timestamp|epoch|elapsed|millis|micros|seconds)(?:$|[_ ])|timestamp/i;
const COUNTER =
  /^(?:#|n|no|nr|samples?|sample[_ ](?:no|nr|number|index)|index|idx|count|counter|seq|sequence|ticks?)$/i;
/** Days of the epoch's scale that count as a date: 2001 to 2128, in seconds. */
const EPOCH_FROM = 1e9;
const EPOCH_TO = 5e9;

/** What the head's stamps of one column look like. */
interface Stamps {
  readonly column: Column;
  readonly form: StampForm;
  /** First stamp's whole part. */
  readonly whole: number;
  /** Median of the steps other than zero, units of the stamps; 0 where there is none. */
  readonly step: number;
  readonly rising: boolean;
  readonly even: boolean;
  readonly integer: boolean;
}

/**
 * Finds the time column by its name, its form or its numbers, and the unit of its stamps. A given rate overrules a column of
 * times, not a counter. Throws UserError('input') where there is neither a time column nor a rate.
 */
export function findTime(file: string, head: Head, columns: readonly Column[], rateHz?: number): TimeColumn {
  const { found, telling } = timeStamps(head, columns);
  const others = telling.map(({ column }) => column.field);
  if (rateHz !== undefined) {
    const given = { unitsPerSecond: rateHz, guess: null };
    if (found?.kind !== 'counter') return { ...given, field: -1, name: null, form: 'number', kind: 'none', others };
    const { stamps } = found;
    return { ...described(stamps, others), ...given, kind: 'counter', unitsPerSecond: rateHz * (stamps.step || 1) };
  }
  if (!found)
    throw new UserError('input', `${file} has no time column; give the sampling rate with --rate, such as --rate 200.`);
  if (found.kind === 'counter')
    throw new UserError(
      'input',
      `${file} counts samples in column "${found.stamps.column.name}" but has no time; give the sampling rate with --rate, such as --rate 200.`,
    );
  return timed(found.stamps, others);
}

/** The column that tells the time best, and all that tell it or count samples. */
function timeStamps(head: Head, columns: readonly Column[]) {
  const all = columns.map((column) => stampsOf(head, column)).filter((stamps) => stamps !== null);
  const numbers = all.filter(({ form }) => form === 'number');
  const dates = all.filter(({ form, rising }) => form === 'iso8601' && rising);
  const written = all.filter(({ form }) => form !== 'number');
  const named = numbers.filter(({ column, rising }) => isTimeName(column) || (rising && TIME_WORD.test(column.name)));
  const counters = numbers.filter(({ column, rising, integer }) => rising && integer && COUNTER.test(column.name));
  const first = numbers.find(({ column }) => column.field === 0);
  const nameless = first && (head.names[0] ?? '') === '' && first.rising && first.even ? [first] : [];
  const counting = nameless.filter(({ integer, step }) => integer && step === 1);
  const times = [...named.filter(({ column }) => unitOf(column) !== null), ...dates, ...named, ...written];
  const time = times[0] ?? (counters.length + counting.length > 0 ? undefined : nameless[0]);
  const counter = counters[0] ?? counting[0];
  const found = time ? { stamps: time, kind: 'time' } : counter ? { stamps: counter, kind: 'counter' } : null;
  return { found, telling: [...times, ...counters, ...nameless] };
}

function isTimeName(column: Column): boolean {
  const words = column.name.split(/[_ ]/);
  const last = words.length > 1 && wordUnit(words[words.length - 1]) !== null;
  return TIME.test(column.name) || (last && TIME.test(words.slice(0, -1).join('_')));
}

function unitOf(column: Column): Unit | null {
  return wordUnit(column.unit) ?? wordUnit(column.name.split(/[_ ]/).at(-1) ?? '');
}

function wordUnit(word: string): Unit | null {
  return UNIT_WORDS.find(([pattern]) => pattern.test(word))?.[1] ?? null;
}

function stampsOf({ rows, dialect }: Head, column: Column): Stamps | null {
  const tokens = rows.map((row) => row[column.field]).filter((token) => token.trim() !== '');
  const forms = tokens.map((token) => stampForm(token, dialect.decimal));
  const form = forms[0];
  if (!form || 2 * forms.filter((other) => other === form).length < tokens.length) return null;
  const reader = new StampReader(form, dialect.decimal);
  const stamps = tokens.map((token) => reader.read(token)).filter((stamp) => !Number.isNaN(stamp));
  const steps = stamps.slice(1).map((stamp, i) => stamp - stamps[i]);
  const moving = steps.filter((step) => step !== 0);
  const step = median(moving);
  return {
    column,
    form,
    whole: reader.firstWhole,
    step,
    rising: moving.length > 0 && moving.every((each) => each > 0),
    even: steps.length >= 8 && steps.every((each) => each > 0.5 * step && each < 1.5 * step),
    integer: stamps.every((stamp) => Number.isInteger(stamp)),
  };
}

function described({ column, form }: Stamps, telling: readonly number[]) {
  return { field: column.field, name: column.name, form, others: telling.filter((field) => field !== column.field) };
}

function timed(stamps: Stamps, others: readonly number[]): TimeColumn {
  const known = described(stamps, others);
  if (stamps.form !== 'number')
    return { ...known, kind: stamps.form === 'clock' ? 'clock' : 'iso8601', unitsPerSecond: 1, guess: null };
  const written = unitOf(stamps.column);
  const epoch = (['s', 'ms', 'us', 'ns'] as const).find((unit) => isEpoch(stamps, unit));
  const unit = written ?? epoch ?? unitBySteps(stamps);
  const kind = isEpoch(stamps, unit) ? 'epoch' : unit;
  const clear = written !== null || epoch !== undefined || (!stamps.integer && stamps.step < 1);
  const guess = clear ? null : `its steps of ${Number(stamps.step.toPrecision(4))}`;
  return { ...known, kind, unitsPerSecond: PER_SECOND[unit], guess };
}

function isEpoch({ whole, step }: Stamps, unit: Unit): boolean {
  const seconds = whole / PER_SECOND[unit];
  return seconds >= EPOCH_FROM && seconds < EPOCH_TO && step / PER_SECOND[unit] < 3600;
}

/** Unit by the size of the steps, where the file does not say: whole steps of 2 and more are hardly seconds. */
function unitBySteps({ step, integer }: Stamps): Unit {
  if (step < 2 && !(integer && step > 1)) return 's';
  if (step < 1000) return 'ms';
  return step < 1e6 ? 'us' : 'ns';
}
