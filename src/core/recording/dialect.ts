import { UserError } from '../user-error.ts';
import type { Dialect } from './recording.ts';
import { stampForm } from './stamp.ts';
import { isComment, splitFields } from './text-lane.ts';
import { readToken } from './token.ts';

/** Bytes of the file from which its layout is read. */
export const HEAD_BYTES = 1 << 16;
/** Delimiters tried, the likelier first: among equals the first wins. */
const DELIMITERS = [',', ';', '\t', '|', ' '];
/** Share of control bytes from which a file is no text. */
const CONTROL_SHARE = 0.01;

/** What the first 64 KiB tell: the dialect, the words above the data, and the rows themselves as text. */
export interface Head {
  readonly dialect: Dialect;
  /** Names and units as written; empty where there is no such line. */
  readonly names: readonly string[];
  readonly units: readonly string[];
  /** 1-based line of the first data row. */
  readonly firstDataLine: number;
  /** Fields of a data row. */
  readonly fields: number;
  /** Data rows of the head with as many fields. */
  readonly rows: readonly (readonly string[])[];
  /** True where quotes occur, so that the text lane is needed. */
  readonly quoted: boolean;
}

/** One record of the head and the line it starts on. */
interface Line {
  readonly line: number;
  readonly fields: string[];
}

/**
 * Reads the dialect from the first bytes of a file: encoding, delimiter, decimal sign, line ends, preamble, header, row of units.
 * `whole` says that the bytes are the whole file. Throws UserError('input') where it is empty, not text, or holds no numbers.
 */
export function readDialect(file: string, bytes: Uint8Array, whole: boolean): Head {
  if (bytes.length === 0) throw new UserError('input', `${file} is empty; record again or give another file.`);
  const encoding = encodingOf(file, bytes);
  const text = headText(bytes, encoding, whole);
  if (text.trim() === '')
    throw new UserError('input', `${file} is empty but for blank lines; record again or give another file.`);
  const newline = newlineOf(text);
  const candidates = DELIMITERS.map((delimiter) => candidate(text, delimiter, newline));
  const best = candidates.reduce((a, b) => (b.score > a.score ? b : a));
  const start = best.lines.findIndex((line) => isData(line, best));
  if (best.score === 0 || start < 0) throw noNumbers(file, best.lines);
  const { header, units } = headerOf(best, start);
  const firstDataLine = best.lines[start].line;
  const words = header?.line ?? firstDataLine;
  return {
    dialect: {
      encoding,
      newline,
      delimiter: best.delimiter,
      decimal: best.decimal,
      preambleLines: words - 1,
      headerLine: header?.line ?? null,
      unitsLine: units?.line ?? null,
    },
    names: (header?.fields ?? []).map((name) => name.trim()),
    units: (units?.fields ?? []).map((unit) => unit.trim()),
    firstDataLine,
    fields: best.fields,
    rows: best.lines.slice(start).flatMap(({ fields }) => (fields.length >= best.fields ? [fields] : [])),
    quoted: text.includes('"'),
  };
}

function encodingOf(file: string, bytes: Uint8Array): Dialect['encoding'] {
  if (bytes[0] === 0xff && bytes[1] === 0xfe) return 'utf-16le';
  if (bytes[0] === 0xfe && bytes[1] === 0xff) return 'utf-16be';
  const control = bytes.reduce((sum, byte) => sum + (byte < 32 && (byte < 9 || byte > 13) ? 1 : 0), 0);
  if (bytes.indexOf(0) >= 0 || control > CONTROL_SHARE * bytes.length)
    throw new UserError('input', `${file} is not a text file (${binaryKind(bytes)}); export it as CSV first.`);
  try {
    new TextDecoder('utf-8', { fatal: true }).decode(bytes, { stream: true });
    return 'utf-8';
  } catch {
    return 'latin1';
  }
}

function binaryKind(bytes: Uint8Array): string {
  if (bytes[0] === 0x1f && bytes[1] === 0x8b) return 'it is packed with gzip';
  if (bytes[0] === 0x50 && bytes[1] === 0x4b) return 'it is a zip archive or a spreadsheet';
  return 'it holds binary data';
}

/** The head as text, cut at its last line end where the file goes on. */
function headText(bytes: Uint8Array, encoding: Dialect['encoding'], whole: boolean): string {
  const text = new TextDecoder(encoding === 'latin1' ? 'windows-1252' : encoding).decode(bytes, { stream: !whole });
  if (whole) return text;
  const end = Math.max(text.lastIndexOf('\n'), text.lastIndexOf('\r'));
  return end < 0 ? text : text.slice(0, end + 1);
}

function newlineOf(text: string): Dialect['newline'] {
  const lf = text.indexOf('\n');
  if (lf < 0) return text.includes('\r') ? '\r' : '\n';
  return text[lf - 1] === '\r' ? '\r\n' : '\n';
}

/** The head split at one delimiter. */
interface Candidate {
  readonly delimiter: string;
  readonly decimal: Dialect['decimal'];
  readonly lines: readonly Line[];
  /** Fields of most lines that hold numbers. */
  readonly fields: number;
  /** Fields that hold numbers or stamps in most of those lines. */
  readonly numeric: ReadonlySet<number>;
  readonly score: number;
}

function candidate(text: string, delimiter: string, newline: Dialect['newline']): Candidate {
  const lines = linesOf(text, delimiter, newline);
  const decimals: Dialect['decimal'][] = delimiter === ',' ? ['.'] : ['.', ','];
  return decimals.map((decimal) => scored(lines, delimiter, decimal)).reduce((a, b) => (b.score > a.score ? b : a));
}

function linesOf(text: string, delimiter: string, newline: Dialect['newline']): Line[] {
  let line = 1;
  return splitFields(text, delimiter, newline).map((fields) => {
    const start = line;
    line += 1 + fields.reduce((ends, field) => ends + field.split(newline).length - 1, 0);
    return { line: start, fields };
  });
}

/** Scores by the numbers in the lines of the commonest shape, weighted by their share of the fields. */
function scored(lines: readonly Line[], delimiter: string, decimal: Dialect['decimal']): Candidate {
  const counts = lines.map(({ fields }) => fields.filter((field) => holdsNumber(field, decimal)).length);
  const rows = lines.filter(({ fields }, i) => counts[i] > 0 && !isComment(fields[0]));
  const shapes = new Map<number, number>();
  for (const { fields } of rows) shapes.set(fields.length, (shapes.get(fields.length) ?? 0) + 1);
  const shape = [...shapes].reduce((a, b) => (b[1] > a[1] ? b : a), [0, 0])[0];
  const shaped = rows.filter(({ fields }) => fields.length === shape);
  const fields = lines.some((line) => line.fields.length === shape && !endsEmpty(line.fields)) ? shape : shape - 1;
  const numbers = shaped.reduce(
    (sum, line) => sum + line.fields.filter((field) => holdsNumber(field, decimal)).length,
    0,
  );
  const tokens = shaped.reduce((sum, line) => sum + line.fields.filter((field) => field.trim() !== '').length, 0);
  return {
    delimiter,
    decimal,
    lines,
    fields,
    numeric: numericFields(shaped, fields, decimal),
    score: tokens === 0 ? 0 : (numbers * numbers) / tokens,
  };
}

function endsEmpty(fields: readonly string[]): boolean {
  return fields.length > 1 && fields[fields.length - 1].trim() === '';
}

/** True where a line has as many fields as a row, an empty one behind the last delimiter not counted. */
function fits(line: readonly string[], fields: number): boolean {
  return line.length === fields || (line.length === fields + 1 && endsEmpty(line));
}

function numericFields(lines: readonly Line[], fields: number, decimal: Dialect['decimal']): Set<number> {
  const numeric = Array.from({ length: fields }, (_, field) => field).filter((field) => {
    const filled = lines.filter((line) => readToken(line.fields[field], decimal) !== 'missing');
    const numbers = filled.filter((line) => holdsNumber(line.fields[field], decimal));
    return numbers.length > 0 && 2 * numbers.length >= filled.length;
  });
  return new Set(numeric);
}

function holdsNumber(field: string, decimal: Dialect['decimal']): boolean {
  return typeof readToken(field, decimal) === 'number' || (field.includes(':') && stampForm(field, decimal) !== null);
}

/** A data row has the commonest shape and nothing but numbers, or nothing, where most rows have numbers. */
function isData({ fields }: Line, { fields: wanted, numeric, decimal }: Candidate): boolean {
  if (!fits(fields, wanted) || isComment(fields[0])) return false;
  const tokens = [...numeric].map((field) => fields[field]);
  return (
    tokens.some((token) => holdsNumber(token, decimal)) &&
    tokens.every((token) => holdsNumber(token, decimal) || readToken(token, decimal) === 'missing')
  );
}

/** The words above the data: the nearest line of the same shape is the header, or the row of units below it. */
function headerOf({ lines, fields }: Candidate, start: number): { header: Line | null; units: Line | null } {
  const above = lines
    .slice(0, start)
    .filter((line) => line.fields.some((field) => field.trim() !== ''))
    .slice(-2)
    .map(({ line, fields: [first, ...rest] }) => ({
      line,
      fields: [first.replace(/^\s*(?:#|%|\/\/)+\s*/, ''), ...rest],
    }))
    .map((line) => (fits(line.fields, fields) ? line : null));
  const nearest = above.at(-1) ?? null;
  const next = above.length > 1 ? above[0] : null;
  return nearest && next && isUnits(nearest.fields)
    ? { header: next, units: nearest }
    : { header: nearest, units: null };
}

const UNIT =
  /^[[(]?(?:s|ms|us|µs|μs|ns|min|sec|seconds?|m?g|gs|m\/s\^?[2²]?|m\/s\/s|ms-2|mm\/s\^?2?|[mkµ]?V|[mµ]?A|k?N|[kMh]?Pa|m?bar|psi|°?[CFK]|degC|deg(?:\/s)?|°(?:\/s)?|rad(?:\/s)?|dps|[kM]?Hz|rpm|%|[mcµk]?m|k?W|[kM]?Ohm|Ω|1|-|[µu]?T|kg)[\])]?$/;

/** A row of units: every word a unit or nothing, one at the least a unit. */
function isUnits(words: readonly string[]): boolean {
  const filled = words.map((word) => word.trim()).filter((word) => word !== '');
  return filled.length > 0 && filled.every((word) => UNIT.test(word) || /^\[.*\]$|^\(.*\)$/.test(word));
}

function noNumbers(file: string, lines: readonly Line[]): UserError {
  const filled = lines.filter(({ fields }) => fields.some((field) => field.trim() !== '') && !isComment(fields[0]));
  if (filled.length <= 1)
    return new UserError(
      'input',
      `${file} holds a header only and no rows of data; record again or give another file.`,
    );
  return new UserError(
    'input',
    `${file} has no numeric column in its first ${filled.length} rows; export the recording with a row of numbers per sample.`,
  );
}
