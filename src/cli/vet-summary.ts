import { count, quantity } from '../core/figure.ts';
import { bySeverity, type Finding, type Severity } from '../core/health/finding.ts';
import type { ChannelHealth, RecordingHealth } from '../core/health/recording-health.ts';
import type { Note } from '../core/recording/recording.ts';
import { understood } from '../core/recording/understood.ts';
import type { Ink } from './ink.ts';
import { wrap } from './wrap.ts';

const INDENT = '      ';

/** What was understood of a recording, its channels' figures, and its findings, the worst first; for people. Ends in a newline. */
export function vetSummary({ facts, channels, findings }: RecordingHealth, ink: Ink): string {
  const all = bySeverity([...findings, ...channels.flatMap((channel) => channel.findings)]);
  const blocks = [
    [ink.bold(facts.file), ...wrap(understood(facts)), ...facts.leftOut.flatMap(leftOut)],
    channelTable(channels),
    ...facts.notes.map((note) => readingLines(note, ink)),
    ...all.map((finding) => findingLines(finding, ink)),
    wrap(conclusion([...facts.notes, ...all])),
  ];
  return `\n${blocks
    .filter((lines) => lines.length > 0)
    .map((lines) => lines.join('\n'))
    .join('\n\n')}\n`;
}

function leftOut({ name, column, why }: RecordingHealth['facts']['leftOut'][number]): string[] {
  return wrap(`Column ${column}, "${name}", left out: ${why}.`);
}

function readingLines({ severity, text }: Note, ink: Ink): string[] {
  return [`  ${tint(severity, ink)}  reading`, ...wrap(text, INDENT)];
}

/** One line for each channel, columns aligned. */
function channelTable(channels: readonly ChannelHealth[]): string[] {
  const head = ['channel', 'lowest', 'highest', 'noise RMS', 'step', 'drift a minute'];
  const rows = channels.map(({ channel, lowest, highest, noiseRms, step, driftPerMinute }) => [
    channel.name,
    quantity(lowest, channel.unit, 5),
    quantity(highest, channel.unit, 5),
    quantity(noiseRms, channel.unit),
    step === null ? 'none seen' : quantity(step, channel.unit),
    quantity(driftPerMinute, channel.unit, 2),
  ]);
  const widths = head.map((title, c) => Math.max(title.length, ...rows.map((row) => row[c].length)));
  const line = (cells: readonly string[]) =>
    `  ${cells.map((cell, c) => (c === 0 ? cell.padEnd(widths[c]) : cell.padStart(widths[c]))).join('  ')}`;
  return [line(head), ...rows.map(line)];
}

function findingLines({ severity, kind, channel, what, effect, advice }: Finding, ink: Ink): string[] {
  return [
    `  ${tint(severity, ink)}  ${channel === null ? '' : `${channel}: `}${kind}`,
    ...wrap(what, INDENT),
    ...wrap(`Effect: ${effect}`, INDENT),
    ...wrap(`Do: ${advice}`, INDENT),
  ];
}

function tint(severity: Severity, ink: Ink): string {
  if (severity === 'refusal') return ink.bad(ink.bold(severity));
  return severity === 'warning' ? ink.careful(severity) : ink.faint(severity);
}

function conclusion(findings: readonly { readonly severity: Severity }[]): string {
  const parts = (['refusal', 'warning', 'note'] as const).flatMap((severity) => {
    const number = findings.filter((finding) => finding.severity === severity).length;
    return number === 0 ? [] : [`${count(number)} ${severity}${number > 1 ? 's' : ''}`];
  });
  return parts.length === 0 ? 'Nothing wrong was found.' : `${parts.join(', ')}.`;
}
