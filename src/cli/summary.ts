import { verdictSentence } from '../core/advice/sentence.ts';
import { corner, count, decibels, hertz, quantity, seconds } from '../core/figure.ts';
import type { RecordingFacts } from '../core/recording/recording.ts';
import { understood } from '../core/recording/understood.ts';
import type { NoiseLine } from '../core/spectrum/spectrum.ts';
import type { StudyFiles } from '../core/study-document.ts';
import type { ChannelStudy, Study } from '../core/study-result.ts';
import type { Ink } from './ink.ts';
import { wrap } from './wrap.ts';

const MOST_LINES = 4;

/** The one-screen summary of a study for people: advice, lines, cost and files. Ends in a newline. */
export function summary(study: Study, files: StudyFiles, ink: Ink): string {
  const blocks = [
    [recordingLine('quiet ', study.quiet, ink), recordingLine('active', study.active, ink)],
    ...study.channels.map((channel) => channelLines(channel, ink)),
    fileLines(files, ink),
  ];
  return `\n${blocks.map((lines) => lines.join('\n')).join('\n\n')}\n`;
}

function recordingLine(role: string, facts: RecordingFacts, ink: Ink): string {
  return `${ink.faint(role)}  ${facts.file}: ${understood(facts)}`;
}

function channelLines({ channel, keep, advice, lines }: ChannelStudy, ink: Ink): string[] {
  const tint = { clear: ink.good, compromise: ink.careful, inseparable: ink.bad }[advice.verdict];
  const [low, high] = advice.cornerRangeHz;
  const head = `${ink.bold(channel.name)}  ${tint(advice.verdict)}  corner ${ink.bold(corner(advice.cornerHz))} ${ink.faint(`(90 % interval ${hertz(low, 3)} to ${hertz(high, 3)})`)}`;
  return [
    head,
    ...wrap(verdictSentence(channel.unit, keep, advice)),
    ...wrap(
      `Cost: a step arrives ${seconds(advice.delaySeconds)} late and is within 1 % after ${seconds(advice.settlingSeconds)}.`,
    ),
    ...wrap(`Noise lines: ${lines.length === 0 ? 'none' : lineList(lines, channel.unit)}.`),
  ];
}

function lineList(lines: readonly NoiseLine[], unit: string): string {
  const strongest = [...lines].sort((a, b) => b.amplitude - a.amplitude).slice(0, MOST_LINES);
  const named = strongest.map(
    (line) =>
      `${hertz(line.frequencyHz, 3)} (${quantity(line.amplitude, unit, 2)}, ${decibels(line.aboveFloorDb)} above the floor${line.family ? `, ${line.family}` : ''})`,
  );
  const rest = lines.length - strongest.length;
  return `${named.join('; ')}${rest > 0 ? `; and ${count(rest)} weaker` : ''}`;
}

function fileLines(files: StudyFiles, ink: Ink): string[] {
  const rows: [string, string | null][] = [
    ['report  ', files.report],
    ['plan    ', files.plan],
    ['filtered', files.filtered],
  ];
  return rows.flatMap(([label, path]) => (path === null ? [] : [`${ink.faint(label)}  ${path}`]));
}
