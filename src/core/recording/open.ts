import { count } from '../figure.ts';
import { UserError } from '../user-error.ts';
import { readHead } from './bytes.ts';
import type { Stretch } from './column-fold.ts';
import { type Column, readColumns } from './columns.ts';
import { HEAD_BYTES, readDialect } from './dialect.ts';
import { Grid, type GridPlan } from './grid.ts';
import { FEWEST_SAMPLES, type Findings, type NamedColumn, notes, refuseUnreadable } from './health.ts';
import type { ByteSource, ReadingOptions, Recording, RecordingFacts, UniformBlock } from './recording.ts';
import { gridRuns } from './runs.ts';
import { placedBatches, type Reading, type Survey, survey } from './survey.ts';
import { findTime } from './time-values.ts';

const BLOCK_ROWS = 65_536;
const MEMORY_BYTES = 96 * 1024 * 1024;
/** A column with values in fewer of its rows is no channel. */
const SPARSE_SHARE = 0.5;

/**
 * Surveys a recording in a first pass over the source and gives its facts and a replay of its samples on a uniform grid.
 * Needs a source that can be read again: for its head, its opening rows, the survey, and each replay that does not fit into
 * `memoryBytes`. Throws UserError('input'), one sentence that names the file, where it cannot be used.
 */
export async function openRecording(source: ByteSource, options: ReadingOptions = {}): Promise<Recording> {
  const { bytes, whole } = await readHead(source, HEAD_BYTES);
  const head = readDialect(source.name, bytes, whole);
  const columns = readColumns(head);
  const time = findTime(source.name, head, columns, options.rateHz);
  const apart = new Set([time.field, ...time.others]);
  const valueFields = columns.filter(({ field, numeric }) => numeric && !apart.has(field)).map(({ field }) => field);
  const reading: Reading = {
    source,
    layout: {
      file: source.name,
      dialect: head.dialect,
      firstDataLine: head.firstDataLine,
      fields: head.fields,
      stampField: time.field,
      stampForm: time.form,
      valueFields,
    },
    time,
    rateHz: options.rateHz,
    quoted: head.quoted,
    blockRows: options.blockRows ?? BLOCK_ROWS,
    memoryBytes: options.memoryBytes ?? MEMORY_BYTES,
    onProgress: options.onProgress,
  };
  return recordingOf(await survey(reading), columns, await source.sha256());
}

/** A value column and what became of it. */
interface Judged extends NamedColumn {
  readonly column: Column;
  readonly place: number;
  /** Why it is no channel; null where it is one. */
  readonly why: string | null;
}

function recordingOf(found: Survey, columns: readonly Column[], sha256: string): Recording {
  const { layout, time: timeColumn, source } = found.reading;
  const nameOf = (field: number) => columns[field].name;
  const judged = judge(found, columns);
  const kept = judged.filter(({ why }) => why === null);
  const readable = judged.filter(({ fold }) => fold.present > 0).map(({ column }) => column.field);
  const faults = found.faults.of(timeColumn.field < 0 ? readable : [timeColumn.field, ...readable]);
  refuseUnreadable(layout.file, found.rows, faults, nameOf);
  refuseEmpty(found, judged);
  const time = found.time!;
  const stretches: Stretch[] = kept.flatMap(({ fold }) => fold.stretches);
  const { runs, tooShort } = gridRuns(time, stretches);
  const longestRunSamples = runs.reduce((longest, run) => Math.max(longest, run.samples), 0);
  if (longestRunSamples < FEWEST_SAMPLES)
    throw new UserError(
      'input',
      `${layout.file}: the longest stretch without a gap has ${count(longestRunSamples)} samples; at least ${FEWEST_SAMPLES} are needed.`,
    );
  const findings: Findings = { survey: found, time, kept, faults, stretches, tooShort, nameOf };
  const last = runs[runs.length - 1];
  const facts: RecordingFacts = {
    file: layout.file,
    sizeBytes: found.bytes,
    sha256,
    rows: found.rows,
    dialect: layout.dialect,
    timeKind: timeColumn.kind,
    timeName: timeColumn.name,
    rateHz: time.rateHz,
    jitterSeconds: timeColumn.kind === 'none' ? 0 : time.longest.jitterSeconds,
    stampResolutionSeconds: timeColumn.kind === 'none' ? 0 : found.rule.resolutionSeconds,
    resampled: time.uneven,
    durationSeconds: last.startSeconds + last.samples / time.rateHz,
    longestRunSamples,
    gaps: time.gaps,
    channels: kept.map(({ column }) => ({ name: column.name, unit: column.unit, column: column.field + 1 })),
    leftOut: leftOut(found, columns, judged),
    notes: notes(findings),
  };
  const plan: GridPlan = {
    runs,
    rateHz: time.rateHz,
    interpolate: time.uneven,
    places: kept.map(({ place }) => place),
    blockRows: found.reading.blockRows,
  };
  return { facts, blocks: () => replay(found, plan, source.name) };
}

function judge(found: Survey, columns: readonly Column[]): Judged[] {
  const { valueFields } = found.reading.layout;
  return valueFields.map((field, place) => {
    const column = columns[field];
    const fold = found.columns[place];
    return { column, name: column.name, fold, place, why: whyNot(found, field, place) };
  });
}

function whyNot(found: Survey, field: number, place: number): string | null {
  const fold = found.columns[place];
  if (fold.present === 0)
    return found.faults.of([field]).first.some((fault) => fault.field === field) ? 'text' : 'empty';
  if (fold.constant) return `constant at ${fold.lowest}`;
  if (fold.present < SPARSE_SHARE * found.keptRows)
    return `only ${count(fold.present)} of ${count(found.keptRows)} rows hold a value`;
  return null;
}

function refuseEmpty({ reading, rows, keptRows }: Survey, judged: readonly Judged[]): void {
  const { file } = reading.layout;
  const refuse = (found: string) => {
    throw new UserError('input', `${file} ${found}`);
  };
  const numeric = judged.filter(({ fold }) => fold.present > 0);
  if (numeric.length === 0) refuse('has no numeric column besides time; give a recording of a sensor.');
  if (rows < FEWEST_SAMPLES)
    refuse(`has ${rows === 1 ? 'one row' : `${rows} rows`} of data; at least ${FEWEST_SAMPLES} samples are needed.`);
  if (keptRows === 0) refuse('has no readable time stamp; write the times as numbers or as ISO 8601, or give --rate.');
  if (numeric.every(({ fold }) => fold.constant))
    refuse('holds nothing but equal samples: every numeric column is constant; is the sensor connected?');
  if (judged.every(({ why }) => why !== null))
    refuse(`has no channel that can be used: ${judged.map(({ name, why }) => `"${name}" (${why})`).join(', ')}.`);
}

function leftOut(found: Survey, columns: readonly Column[], judged: readonly Judged[]): RecordingFacts['leftOut'] {
  const { layout, time } = found.reading;
  const reason = (column: Column): string | null => {
    if (column.field === layout.stampField) return null;
    if (time.others.includes(column.field))
      return time.kind === 'none'
        ? 'tells time or counts samples, overruled by the given rate'
        : 'tells time or counts samples';
    if (!column.numeric) return 'text';
    return judged.find((other) => other.column === column)?.why ?? null;
  };
  return columns.flatMap((column) => {
    const why = reason(column);
    return why === null ? [] : [{ name: column.name, column: column.field + 1, why }];
  });
}

async function* replay(found: Survey, plan: GridPlan, file: string): AsyncGenerator<UniformBlock> {
  const grid = new Grid(plan, found.reading.blockRows);
  let rows = 0;
  for await (const batch of found.batches ?? placedBatches(found)) {
    rows += batch.length;
    yield* grid.push(batch);
  }
  if (rows !== found.keptRows)
    throw new UserError('input', `${file} changed while it was read; wait until the logger has closed it.`);
}
