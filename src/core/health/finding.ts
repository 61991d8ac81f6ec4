import { percent, significant } from '../figure.ts';
import type { Channel } from '../recording/recording.ts';

/** `note`: good to know; `warning`: the advice leans on it; `refusal`: figures drawn from this cannot be trusted. */
export type Severity = 'note' | 'warning' | 'refusal';

/** What a finding is about. */
export type FindingKind =
  | 'unreadable'
  | 'clipping'
  | 'stuck values'
  | 'held values'
  | 'rounding'
  | 'missing samples'
  | 'jitter'
  | 'interpolation'
  | 'spikes'
  | 'drift'
  | 'mains'
  | 'not stationary'
  | 'noise in the keep band'
  | 'rates differ'
  | 'units differ'
  | 'swapped'
  | 'no partner';

/** Something wrong, or odd, about a recording or a pair of them. */
export interface Finding {
  readonly kind: FindingKind;
  readonly severity: Severity;
  /** Name of the channel; null where it concerns the whole recording, or the pair. */
  readonly channel: string | null;
  /** One sentence with the measured figure and where it was found. */
  readonly what: string;
  /** What it does to the advice. */
  readonly effect: string;
  /** What the user can do. */
  readonly advice: string;
}

/** What a recording is for; null where nobody said. */
export type Role = 'quiet' | 'active' | null;

/** The channel that figures belong to, and what they are measured against. */
export interface Subject {
  readonly channel: Channel;
  readonly role: Role;
  /** Samples on the uniform grid, and their rate, Hz. */
  readonly samples: number;
  readonly rateHz: number;
  /** Noise of the recording, see `noiseRms`, in the channel's unit. */
  readonly noiseRms: number;
}

const ORDER: readonly Severity[] = ['refusal', 'warning', 'note'];

/** The worst first; among equals as they come. */
export function bySeverity(findings: readonly Finding[]): Finding[] {
  return ORDER.flatMap((severity) => findings.filter((finding) => finding.severity === severity));
}

/** ` in the quiet recording`, or nothing where the role is not known; to stand behind a noun. */
export function inRecording(role: Role): string {
  return role === null ? '' : ` in the ${role} recording`;
}

/** A finding and its effect in one line, for where there is no room for a table. */
export function inOneLine({ channel, what, effect }: Finding): string {
  return `${channel === null ? '' : `${channel}: `}${what} ${effect}`;
}

/** `81 % of the noise power`, or `12 times the noise power`. */
export function ofNoisePower(ratio: number): string {
  return ratio < 2 ? `${percent(ratio)} of the noise power` : `${significant(ratio, 2)} times the noise power`;
}
