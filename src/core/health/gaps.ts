import { count, percent, seconds } from '../figure.ts';
import type { RecordingFacts } from '../recording/recording.ts';
import { type Finding, inRecording, type Role } from './finding.ts';

/** Part of the recording from which missing samples are worth a warning. */
const WARN = 0.01;

/** Samples that are missing in gaps of the time base, as a finding; null where there are none. */
export function missingFinding(
  { gaps, rateHz, durationSeconds, longestRunSamples }: RecordingFacts,
  role: Role,
): Finding | null {
  if (gaps.length === 0) return null;
  // A gap is the step between two samples: one period of it is no loss.
  const missingSeconds = gaps.reduce((sum, gap) => sum + gap.lengthSeconds - 1 / rateHz, 0);
  const longest = gaps.reduce((a, b) => (b.lengthSeconds > a.lengthSeconds ? b : a));
  const share = missingSeconds / durationSeconds;
  return {
    kind: 'missing samples',
    severity: share >= WARN ? 'warning' : 'note',
    channel: null,
    what: `${percent(share)} of the time${inRecording(role)} is missing, about ${count(Math.round(missingSeconds * rateHz))} samples in ${count(gaps.length)} gap${gaps.length > 1 ? 's' : ''}, the longest ${seconds(longest.lengthSeconds)} at ${seconds(longest.atSeconds)}.`,
    effect: `Spectra never cross a gap: the longest stretch without one, ${seconds(longestRunSamples / rateHz)}, limits how fine a frequency can be told.`,
    advice: 'Look for a full buffer or a slow card in the logger; log slower or to a faster medium.',
  };
}
