import { prototypeSections } from '../filter/families.ts';
import type { Family, Filter } from '../filter/filter.ts';
import { cornerForGain, gainDb } from '../filter/response.ts';
import { stepFigures } from '../filter/step.ts';
import type { Band } from '../spectrum/spectrum.ts';
import type { LimitName, Limits, Rival } from './advice.ts';
import { leastErrorCorner, roundCorner } from './corner.ts';
import type { Evidence } from './evidence.ts';
import { expectedError } from './expected-error.ts';

/** What every rival is measured against. */
export interface Contest {
  readonly limits: Limits;
  readonly keepHighHz: number;
  /** First frequency to reject, Hz; null where there is none. */
  readonly firstLineHz: number | null;
  /** Highest corner that a digital filter at the recording's rate can have, Hz. */
  readonly highestCornerHz: number;
  /** True where a person gave both edges: round numbers stand for themselves, and a round corner between them is the answer. */
  readonly nominal: boolean;
  readonly evidence: Evidence;
}

/** Families and orders that compete, the simplest first; the order of this list ranks equals. */
const CONTESTANTS: readonly { readonly family: Family; readonly order: number }[] = [
  { family: 'rc', order: 1 },
  ...[2, 3, 4, 5, 6, 7, 8].flatMap((order) => [
    { family: 'butterworth' as const, order },
    { family: 'bessel' as const, order },
  ]),
];

/** Share of the noise power that a rounder corner may cost. */
const ROUNDING_COST = 0.0025;
/** What limits given by hand leave within this ratio is below what parts hold: there any corner serves. */
const NARROW_RATIO = 1.1;
/** Slack on limits for rounding in the last digits, dB. */
const LIMIT_SLACK_DB = 1e-6;

/**
 * Corners that the limits leave to a family and order, Hz: from the lowest that keeps the droop to the highest that keeps
 * the rejection. low > high where no corner keeps both.
 */
export function allowedCorners(contest: Omit<Contest, 'evidence' | 'nominal'>, family: Family, order: number): Band {
  const shape = { shape: 'low-pass', family, order } as const;
  const { keepHighHz, firstLineHz, limits, highestCornerHz } = contest;
  const lowHz = keepHighHz > 0 ? cornerForGain(shape, keepHighHz, limits.droopDb) : highestCornerHz / 1e4;
  const highHz = firstLineHz === null ? highestCornerHz : cornerForGain(shape, firstLineHz, limits.rejectionDb);
  return { lowHz, highHz: Math.min(highHz, highestCornerHz) };
}

/** The unrounded corner of least expected error for a family and order within what the limits leave, Hz. */
export function bestCorner(contest: Contest, family: Family, order: number): number {
  const sections = prototypeSections(family, order);
  const error = (corner: number) => expectedError(contest.evidence, sections, corner).errorPower;
  return leastErrorCorner(searched(contest, allowedCorners(contest, family, order)), error);
}

/** Every contestant at its best corner, in the order of `CONTESTANTS`. */
export function rivals(contest: Contest): Rival[] {
  return CONTESTANTS.map(({ family, order }) => {
    const sections = prototypeSections(family, order);
    const allowedHz = allowedCorners(contest, family, order);
    const error = (corner: number) => expectedError(contest.evidence, sections, corner).errorPower;
    const within = searched(contest, allowedHz);
    const best = leastErrorCorner(within, error);
    const narrow = contest.nominal && allowedHz.highHz <= allowedHz.lowHz * NARROW_RATIO;
    const tolerance = narrow ? Number.POSITIVE_INFINITY : ROUNDING_COST * contest.evidence.noisePower;
    const cornerHz = roundCorner(best, within, error, tolerance);
    return judge(contest, { shape: 'low-pass', family, order, cornerHz }, allowedHz);
  });
}

function judge(contest: Contest, filter: Filter, allowedHz: Band): Rival {
  const { evidence, limits, keepHighHz, firstLineHz } = contest;
  const expected = expectedError(evidence, prototypeSections(filter.family, filter.order), filter.cornerHz);
  const droopDb = keepHighHz > 0 ? -gainDb(filter, keepHighHz) : 0;
  const rejectionDb = firstLineHz === null ? null : -gainDb(filter, firstLineHz);
  const kept: Record<LimitName, boolean> = {
    droop: droopDb <= limits.droopDb + LIMIT_SLACK_DB,
    rejection: rejectionDb === null || rejectionDb >= limits.rejectionDb - LIMIT_SLACK_DB,
  };
  const names: LimitName[] = ['droop', 'rejection'];
  return {
    ...filter,
    ...stepFigures(filter),
    droopDb,
    rejectionDb,
    noiseAfterRms: Math.sqrt(expected.noisePower),
    errorPower: expected.errorPower,
    wienerRatio: evidence.wienerPower > 0 ? expected.errorPower / evidence.wienerPower : Number.POSITIVE_INFINITY,
    allowedHz,
    meets: names.filter((name) => kept[name]),
    fails: names.filter((name) => !kept[name]),
  };
}

/** Where to look for the corner: between the limits, also where they contradict each other, and no higher than the rate carries. */
function searched({ highestCornerHz }: Contest, { lowHz, highHz }: Band): Band {
  return { lowHz: Math.min(lowHz, highHz), highHz: Math.min(highestCornerHz, Math.max(lowHz, highHz)) };
}
