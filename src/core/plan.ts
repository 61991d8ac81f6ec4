import type { KeepBand, Limits } from './advice/advice.ts';
import type { DiscreteFilter, Filter } from './filter/filter.ts';
import type { ChannelStudy, Study } from './study-result.ts';

export const PLAN_SCHEMA = 'quietcorner/plan@1';

/** One channel's chosen filter with what it was chosen for. */
export interface PlannedChannel {
  readonly name: string;
  readonly unit: string;
  readonly verdict: ChannelStudy['advice']['verdict'];
  readonly filter: Filter;
  readonly cornerRangeHz: readonly [number, number];
  readonly keep: KeepBand;
  readonly firstLineHz: number | null;
  readonly lines: readonly { readonly frequencyHz: number; readonly amplitude: number }[];
  readonly noiseBeforeRms: number;
  readonly noiseAfterRms: number;
  /** The equivalent discrete filter at the active recording's rate. */
  readonly discrete: DiscreteFilter;
}

/** The file that carries the chosen filters from advice to parts, firmware, apply and proof. */
export interface Plan {
  readonly schema: typeof PLAN_SCHEMA;
  readonly version: string;
  readonly quiet: { readonly file: string; readonly sha256: string };
  readonly active: { readonly file: string; readonly sha256: string };
  readonly limits: Limits;
  readonly channels: readonly PlannedChannel[];
  /** SHA-256 of the plan's JSON text without this field, so that an edit is noticed. */
  readonly hash: string;
}

/** The plan of a study as JSON text ending in a newline. `sha256` gives the lower-case hexadecimal digest of a text. */
export async function writePlan(study: Study, sha256: (text: string) => Promise<string> | string): Promise<string> {
  const body: Omit<Plan, 'hash'> = {
    schema: PLAN_SCHEMA,
    version: study.version,
    quiet: { file: study.quiet.file, sha256: study.quiet.sha256 },
    active: { file: study.active.file, sha256: study.active.sha256 },
    limits: { droopDb: study.settings.droopDb, rejectionDb: study.settings.rejectionDb },
    channels: study.channels.map(plannedChannel),
  };
  const plan: Plan = { ...body, hash: await sha256(JSON.stringify(body)) };
  return `${JSON.stringify(plan, null, 2)}\n`;
}

function plannedChannel({ channel, advice, keep, lines, discrete }: ChannelStudy): PlannedChannel {
  const { shape, family, order, cornerHz } = advice;
  return {
    name: channel.name,
    unit: channel.unit,
    verdict: advice.verdict,
    filter: { shape, family, order, cornerHz },
    cornerRangeHz: advice.cornerRangeHz,
    keep,
    firstLineHz: advice.firstLineHz,
    lines: lines.map(({ frequencyHz, amplitude }) => ({ frequencyHz, amplitude })),
    noiseBeforeRms: advice.noiseBeforeRms,
    noiseAfterRms: advice.noiseAfterRms,
    discrete,
  };
}
