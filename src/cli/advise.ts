import { createHash } from 'node:crypto';
import { basename, extname, join } from 'node:path';
import { type PairedChannel, pairChannels } from '../core/pair.ts';
import { writePlan } from '../core/plan.ts';
import { openRecording } from '../core/recording/open.ts';
import type { Band } from '../core/spectrum/spectrum.ts';
import { type StudyInput, study } from '../core/study.ts';
import { type StudyFiles, studyDocument } from '../core/study-document.ts';
import type { Study, StudySettings } from '../core/study-result.ts';
import { studyWarnings } from '../core/study-warnings.ts';
import { reportCharts } from '../report/charts.ts';
import { renderReport } from '../report/html.ts';
import { drawPictures } from './drawing/draw.ts';
import { EXIT } from './exit.ts';
import { fileSource } from './file-source.ts';
import { filteredCsv } from './filtered-csv.ts';
import { inkFor } from './ink.ts';
import { prepareFolder, writeWhole } from './output-files.ts';
import { summary } from './summary.ts';
import { VERSION } from './version.ts';

/** Options of `advise` as commander hands them over. */
export interface AdviseOptions {
  readonly keep?: Band;
  readonly reject?: number;
  readonly droop: number;
  readonly rejection: number;
  readonly channel?: readonly string[];
  readonly rate?: number;
  readonly out: string;
  readonly filtered?: boolean;
  readonly json?: boolean;
  readonly strict?: boolean;
}

/** The main job on two files: report, plan and, where asked for, the filtered recording; gives the exit code. */
export async function advise(quietPath: string, activePath: string, options: AdviseOptions): Promise<number> {
  const settings = settingsOf(options);
  const reading = options.rate === undefined ? {} : { rateHz: options.rate };
  const quiet = await openRecording(fileSource(quietPath), reading);
  const active = await openRecording(fileSource(activePath), reading);
  const { channels } = pairChannels(quiet.facts, active.facts, settings);
  const files = filesOf(activePath, options);
  await prepareFolder(options.out);
  const done = await studyAndFilter({ quiet, active, settings, version: VERSION }, channels, files);
  await writeWhole(
    files.plan as string,
    await writePlan(done, (text) => createHash('sha256').update(text).digest('hex')),
  );
  await writeWhole(files.report as string, await reportOf(done));
  for (const { severity, text } of studyWarnings(done)) process.stderr.write(`${severity}: ${text}\n`);
  if (options.json) process.stdout.write(`${JSON.stringify(studyDocument(done, files), null, 2)}\n`);
  else process.stdout.write(summary(done, files, inkFor(process.stdout, process.env)));
  const refused = options.strict && done.channels.some((channel) => channel.advice.verdict === 'inseparable');
  return refused ? EXIT.no : EXIT.done;
}

function settingsOf(options: AdviseOptions): StudySettings {
  return {
    droopDb: options.droop,
    rejectionDb: options.rejection,
    keepHz: options.keep ?? null,
    rejectHz: options.reject ?? null,
    channels: options.channel ?? null,
    rateHz: options.rate ?? null,
  };
}

function filesOf(activePath: string, options: AdviseOptions): StudyFiles {
  const stem = basename(activePath, extname(activePath));
  return {
    report: join(options.out, `${stem}.report.html`),
    plan: join(options.out, `${stem}.plan.json`),
    filtered: options.filtered ? join(options.out, `${stem}.filtered.csv`) : null,
  };
}

async function studyAndFilter(
  input: StudyInput,
  channels: readonly PairedChannel[],
  files: StudyFiles,
): Promise<Study> {
  if (files.filtered === null) return study(input);
  const { file, sink } = filteredCsv(
    files.filtered,
    channels.map(({ channel }) => channel),
    input.active.facts.rateHz,
  );
  try {
    const done = await study({ ...input, sink });
    await file.keep();
    return done;
  } catch (error) {
    await file.drop();
    throw error;
  }
}

async function reportOf(done: Study): Promise<string> {
  const drawn = await drawPictures(reportCharts(done));
  const pictures = [...drawn].map(([id, png]) => ({ id, png: `data:image/png;base64,${png.toString('base64')}` }));
  return renderReport(done, pictures, { commandLine: commandLine(), madeAt: madeAt() });
}

/** The call as it would be typed again. */
function commandLine(): string {
  const quoted = process.argv
    .slice(2)
    .map((word) => (/^[\w./:=,+-]+$/.test(word) ? word : `'${word.replaceAll("'", "'\\''")}'`));
  return ['quietcorner', ...quoted].join(' ');
}

/** Now, or what SOURCE_DATE_EPOCH says (reproducible-builds.org), as ISO 8601 without fractions. */
function madeAt(): string {
  const fixed = process.env['SOURCE_DATE_EPOCH'];
  const date = fixed ? new Date(Number(fixed) * 1000) : new Date();
  return date.toISOString().replace(/\.\d+Z$/, 'Z');
}
