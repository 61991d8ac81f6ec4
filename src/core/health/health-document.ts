import { understood } from '../recording/understood.ts';
import type { UserError } from '../user-error.ts';
import type { Finding } from './finding.ts';
import type { RecordingHealth } from './recording-health.ts';

const HEALTH_SCHEMA = 'quietcorner/health@1';

/** A file that was examined, or why it could not be. */
export type Examined =
  | { readonly file: string; readonly health: RecordingHealth }
  | { readonly file: string; readonly unusable: UserError };

/** A file that cannot be used, as a finding. */
function unreadableFinding({ message }: UserError): Finding {
  return {
    kind: 'unreadable',
    severity: 'refusal',
    channel: null,
    what: message,
    effect: 'Nothing can be said of this recording.',
    advice: 'Do what the sentence says, and try again.',
  };
}

/**
 * The stable JSON document of examined files (schema quietcorner/health@1): frequencies in Hz, times in seconds, values in the channel's
 * unit; null for what is not known. `findings` of a file hold those of all its channels.
 */
export function healthDocument(examined: readonly Examined[], version: string) {
  return { schema: HEALTH_SCHEMA, version, files: examined.map(fileDocument) };
}

function fileDocument(each: Examined) {
  if ('unusable' in each)
    return {
      file: each.file,
      sha256: null,
      rows: null,
      rateHz: null,
      durationSeconds: null,
      jitterSeconds: null,
      gaps: [],
      understood: null,
      notes: [],
      channels: [],
      findings: [unreadableFinding(each.unusable)],
    };
  const { facts, channels, findings } = each.health;
  const { sha256, rows, rateHz, durationSeconds, jitterSeconds, gaps, notes } = facts;
  return {
    file: each.file,
    sha256,
    rows,
    rateHz,
    durationSeconds,
    jitterSeconds,
    gaps,
    understood: understood(facts),
    notes,
    channels: channels.map(({ channel, lowest, highest, noiseRms, step, effectiveBits, driftPerMinute }) => ({
      name: channel.name,
      unit: channel.unit,
      lowest,
      highest,
      noiseRms,
      step,
      effectiveBits: Number.isFinite(effectiveBits) ? effectiveBits : null,
      driftPerMinute,
    })),
    findings: [...findings, ...channels.flatMap((channel) => channel.findings)],
  };
}
