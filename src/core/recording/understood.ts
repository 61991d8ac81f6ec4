import { count, hertz, seconds } from '../figure.ts';
import type { RecordingFacts } from './recording.ts';

const DELIMITERS: Record<string, string> = { ',': 'comma', ';': 'semicolon', '\t': 'tab', '|': 'pipe', ' ': 'blanks' };

/** What was understood of a recording, in one line: rows, rate, length, layout, time base, repairs. */
export function understood(facts: RecordingFacts): string {
  const { dialect, timeKind, timeName, gaps } = facts;
  const delimiter = DELIMITERS[dialect.delimiter] ?? `"${dialect.delimiter}"`;
  const layout = `${delimiter}-separated${dialect.decimal === ',' ? ' with decimal comma' : ''}`;
  const time =
    timeKind === 'none' ? 'no time column, rate as given' : `time in ${TIME_NAMES[timeKind]} from "${timeName}"`;
  const parts = [
    `${count(facts.rows)} rows`,
    `${hertz(facts.rateHz, 4)}${facts.resampled ? ' (uneven, resampled)' : ''}`,
    seconds(facts.durationSeconds),
    layout,
    time,
    gaps.length === 0 ? '' : `${count(gaps.length)} gap${gaps.length > 1 ? 's' : ''}`,
  ];
  return parts.filter((part) => part !== '').join(', ');
}

const TIME_NAMES: Record<RecordingFacts['timeKind'], string> = {
  s: 'seconds',
  ms: 'milliseconds',
  us: 'microseconds',
  ns: 'nanoseconds',
  min: 'minutes',
  epoch: 'epoch',
  iso8601: 'ISO 8601',
  clock: 'clock time',
  counter: 'samples',
  none: '',
};
