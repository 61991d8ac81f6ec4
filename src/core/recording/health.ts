import { count, hertz, percent, quantity, seconds } from '../figure.ts';
import { UserError } from '../user-error.ts';
import type { Repair } from './clock.ts';
import type { ColumnFold, Stretch } from './column-fold.ts';
import { LONGEST_BRIDGE } from './column-fold.ts';
import type { FaultCount } from './faults.ts';
import { interpolationLossDb } from './interpolation.ts';
import type { Note } from './recording.ts';
import type { Survey } from './survey.ts';
import type { TimeBase } from './time-base.ts';

/** Shortest recording that tells anything of frequencies, samples. */
export const FEWEST_SAMPLES = 64;
/** Share of unreadable rows from which a file is refused. */
const UNREADABLE_SHARE = 0.01;

/** A value column by its name. */
export interface NamedColumn {
  readonly name: string;
  readonly fold: ColumnFold;
}

/** What the notes are made of. */
export interface Findings {
  readonly survey: Survey;
  readonly time: TimeBase;
  readonly kept: readonly NamedColumn[];
  readonly faults: FaultCount;
  readonly stretches: readonly Stretch[];
  readonly tooShort: number;
  readonly nameOf: (field: number) => string;
}

/** Throws UserError('input') with the first five places where more than 1 % of the rows cannot be read. */
export function refuseUnreadable(
  file: string,
  rows: number,
  faults: FaultCount,
  nameOf: (field: number) => string,
): void {
  if (faults.rows <= UNREADABLE_SHARE * rows) return;
  const places = faults.first.map(({ line, field, text }) =>
    field < 0 ? `row ${line}: wrong number of fields, "${text}"` : `row ${line}, column "${nameOf(field)}": "${text}"`,
  );
  const share = percent(faults.rows / rows);
  throw new UserError(
    'input',
    `${file}: ${count(faults.rows)} of ${count(rows)} rows (${share}) cannot be read, the first ones being ${places.join('; ')}; mend them or export the recording again.`,
  );
}

/** Every repair and oddity in one sentence each, with its count and first place. */
export function notes(findings: Findings): Note[] {
  return [
    ...unitNotes(findings),
    ...gapNotes(findings),
    ...evennessNotes(findings),
    ...stampNotes(findings),
    ...valueNotes(findings),
  ];
}

function unitNotes({ survey, time }: Findings): Note[] {
  const { guess, name, kind } = survey.reading.time;
  if (guess === null) return [];
  const text = `The time column "${name}" has no unit; by ${guess} it is taken for ${kind}, which makes ${hertz(time.rateHz, 4)}; write the unit into the header, or give --rate, where that is wrong.`;
  return [warning(text)];
}

function gapNotes({ time: { gaps }, tooShort }: Findings): Note[] {
  const found: Note[] = [];
  if (gaps.length > 0) {
    const [{ row, atSeconds, lengthSeconds }] = gaps;
    const first = `${seconds(lengthSeconds)} before row ${row}, at ${seconds(atSeconds)}`;
    const one = gaps.length === 1;
    found.push(
      warning(
        `${plural(gaps.length, 'gap')} in time${one ? '' : ', the first'} of ${first}; nothing is computed across ${one ? 'it' : 'them'}.`,
      ),
    );
  }
  if (tooShort > 0) found.push(note(`${plural(tooShort, 'run')} of a single sample between gaps left out.`));
  return found;
}

function evennessNotes({ survey: { rule }, time }: Findings): Note[] {
  const { longest, rateHz, uneven, otherRate } = time;
  const jitter = seconds(longest.jitterSeconds);
  if (otherRate)
    return [
      warning(
        `The rate changes from ${hertz(rateHz, 4)} to ${hertz(1 / otherRate.periodSeconds, 4)} in the run at ${seconds(otherRate.firstSeconds)}; ${cost(rateHz)}.`,
      ),
    ];
  if (uneven)
    return [
      warning(
        `The stamps are uneven by ${jitter} (${percent(longest.jitterSeconds * rateHz)} of a period); ${cost(rateHz)}.`,
      ),
    ];
  if (rule.coarse)
    return [
      note(
        `The stamps are coarser (${seconds(rule.resolutionSeconds)}) than the sample period; the samples are spread along a straight line through them.`,
      ),
    ];
  if (longest.jitterSeconds * rateHz <= 1) return [];
  return [
    note(
      `The clock wanders by ${jitter} about a straight line while its steps stay even; the samples are taken as even.`,
    ),
  ];
}

function cost(rateHz: number): string {
  const loss = (ratio: number) => `${quantity(interpolationLossDb(ratio), 'dB', 2)} at ${hertz(ratio * rateHz)}`;
  return `the samples are interpolated onto an even ${hertz(rateHz, 4)}, which costs up to ${loss(0.1)} and ${loss(0.25)}`;
}

function stampNotes({ survey }: Findings): Note[] {
  const { repeated, filled, lost, wrapped } = survey.repairs;
  const sentence = ({ count: number, firstLine }: Repair, one: string, many: string) => {
    if (number === 0) return [];
    return [
      warning(
        number === 1 ? `Row ${firstLine} ${one}.` : `${count(number)} rows, the first being ${firstLine}, ${many}.`,
      ),
    ];
  };
  const times = wrapped.count === 1 ? 'once, in' : `${count(wrapped.count)} times, first in`;
  return [
    ...sentence(
      repeated,
      'repeated the time stamp before and was dropped',
      'repeated the time stamp before and were dropped',
    ),
    ...sentence(
      filled,
      'had no time stamp and was placed one period behind the row before',
      'had no time stamp and were placed one period behind the row before',
    ),
    ...sentence(
      lost,
      'had no time stamp, could not be placed and was dropped',
      'had no time stamp, could not be placed and were dropped',
    ),
    ...(wrapped.count === 0
      ? []
      : [note(`The clock started again from zero ${times} row ${wrapped.firstLine}; the time was carried on.`)]),
  ];
}

function valueNotes({ survey, kept, faults, stretches, nameOf }: Findings): Note[] {
  const found: Note[] = [];
  if (faults.rows > 0) {
    const [{ line, field, text }] = faults.first;
    const where = field < 0 ? `row ${line}: "${text}"` : `row ${line}, column "${nameOf(field)}": "${text}"`;
    found.push(
      warning(
        `${plural(faults.rows, 'row')} could not be read and ${faults.rows === 1 ? 'counts' : 'count'} as missing, the first being ${where}.`,
      ),
    );
  }
  for (const { name, fold } of kept) {
    if (fold.bridged > 0)
      found.push(
        note(
          `Channel "${name}": ${plural(fold.bridged, 'missing value')} bridged by a straight line, the first in row ${fold.firstBridgedLine}.`,
        ),
      );
  }
  if (stretches.length > 0) {
    const first = stretches.reduce((a, b) => (b.fromRow < a.fromRow ? b : a));
    found.push(
      warning(
        `${plural(stretches.length, 'stretch', 'stretches')} of more than ${LONGEST_BRIDGE} missing values, the first from row ${first.line}; the recording is cut there.`,
      ),
    );
  }
  if (survey.faults.incompleteLine > 0)
    found.push(note(`The last row, ${survey.faults.incompleteLine}, is incomplete and was dropped.`));
  return found;
}

function plural(number: number, one: string, many = `${one}s`): string {
  return `${count(number)} ${number === 1 ? one : many}`;
}

function note(text: string): Note {
  return { severity: 'note', text };
}

function warning(text: string): Note {
  return { severity: 'warning', text };
}
