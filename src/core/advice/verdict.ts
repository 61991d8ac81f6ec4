import type { Rival, Verdict } from './advice.ts';
import type { Contest } from './rivals.ts';

/** Errors this much apart, as a share of the noise power, are the same error. */
const SAME_ERROR = 0.02;
/** A line within the keep band matters from this share of the noise power. */
const LINE_SHARE = 0.1;
/** Noise within the keep band overlaps with the signal from this share of the signal's power. */
const OVERLAP_SHARE = 0.25;
/** Beyond these the best compromise no longer parts signal from noise. */
const HOPELESS_DROOP_DB = 3;

/** The chosen rival and how good the choice is. */
export interface Choice {
  readonly rival: Rival;
  readonly verdict: Verdict;
  /** Why no low-pass can part signal and noise; null unless inseparable. */
  readonly overlap: 'no signal' | 'line within' | 'noise within' | 'line too near' | 'band full' | null;
}

/**
 * Chooses: the simplest rival that meets all limits, of equal order the one with less error; where none does, of
 * those with the least error the one that falls least short of the limits. `linesWithin` are powers (unit²) of noise lines in the keep band.
 */
export function choose(contest: Contest, rivals: readonly Rival[], linesWithin: readonly number[]): Choice {
  const meeting = rivals.filter((rival) => rival.fails.length === 0);
  const simplest = Math.min(...meeting.map((rival) => rival.order));
  const least = (some: readonly Rival[]) => some.reduce((a, b) => (b.errorPower < a.errorPower ? b : a));
  const rival = meeting.length > 0 ? least(meeting.filter((r) => r.order === simplest)) : nearLeast(contest, rivals);
  const overlap = overlapOf(contest, rivals, rival, linesWithin);
  if (overlap !== null) return { rival, verdict: 'inseparable', overlap };
  return { rival, verdict: meeting.length > 0 ? 'clear' : 'compromise', overlap: null };
}

/** Of the rivals whose error is least but for 2 % of the noise power, the one that falls least short of the limits. */
function nearLeast({ evidence, limits }: Contest, rivals: readonly Rival[]): Rival {
  const enough = Math.min(...rivals.map((rival) => rival.errorPower)) + SAME_ERROR * evidence.noisePower;
  const shortfallDb = ({ droopDb, rejectionDb }: Rival) =>
    Math.max(0, droopDb - limits.droopDb) + Math.max(0, limits.rejectionDb - (rejectionDb ?? limits.rejectionDb));
  return rivals
    .filter((rival) => rival.errorPower <= enough)
    .reduce((a, b) => (shortfallDb(b) < shortfallDb(a) ? b : a));
}

function overlapOf(
  contest: Contest,
  rivals: readonly Rival[],
  rival: Rival,
  linesWithin: readonly number[],
): Choice['overlap'] {
  const { evidence, limits, highestCornerHz } = contest;
  if (evidence.signalPower <= 0) return 'no signal';
  if (linesWithin.some((power) => power >= LINE_SHARE * evidence.noisePower)) return 'line within';
  if (evidence.noiseInBandPower > OVERLAP_SHARE * evidence.signalPower) return 'noise within';
  if (rivals.every(({ allowedHz }) => allowedHz.lowHz > highestCornerHz)) return 'band full';
  const tooNear = rival.rejectionDb !== null && rival.rejectionDb < limits.rejectionDb / 2;
  return tooNear || rival.droopDb > Math.max(HOPELESS_DROOP_DB, limits.droopDb) ? 'line too near' : null;
}
