import { bySeverity, inOneLine } from './health/finding.ts';
import type { RecordingFacts } from './recording/recording.ts';
import type { Study } from './study-result.ts';

/** One thing that a user must know before trusting the advice. */
export interface StudyWarning {
  readonly severity: 'warning' | 'refusal';
  readonly text: string;
}

/** Warnings and refusals of a study, the worst first: findings of the pair and its channels, then what the reading of both files warns of. */
export function studyWarnings(study: Study): StudyWarning[] {
  const findings = bySeverity([...study.findings, ...study.channels.flatMap((channel) => channel.findings)]);
  const ofFile = ({ file, notes }: RecordingFacts) =>
    notes.map(({ severity, text }) => ({ severity, text: `${file}: ${text}` }));
  return [
    ...findings.map((finding) => ({ severity: finding.severity, text: inOneLine(finding) })),
    ...ofFile(study.quiet),
    ...ofFile(study.active),
  ].flatMap(({ severity, text }) => (severity === 'note' ? [] : [{ severity, text }]));
}
