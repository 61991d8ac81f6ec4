import type { Advice } from './advice/advice.ts';
import { type Answer, advise } from './advice/advise.ts';
import { expectedError } from './advice/expected-error.ts';
import { reasons } from './advice/reasons.ts';
import { channelFindings } from './channel-findings.ts';
import { discretise } from './filter/discretise.ts';
import { prototypeSections } from './filter/families.ts';
import type { DiscreteFilter } from './filter/filter.ts';
import { bySeverity } from './health/finding.ts';
import { missingFinding } from './health/gaps.ts';
import { effectiveBits } from './health/quantisation.ts';
import { type ActiveEvidence, listenActive, listenQuiet, type QuietEvidence } from './listening.ts';
import { type PairedChannel, pairChannels } from './pair.ts';
import type { Recording, RecordingFacts } from './recording/recording.ts';
import { chooseInsets, type InsetPlace } from './simulation/inset.ts';
import { type FilteredSink, simulateOnActive } from './simulation/on-active.ts';
import { type MeasuredNoise, simulateOnQuiet } from './simulation/on-quiet.ts';
import { noiseFloor } from './spectrum/floor.ts';
import { findLines } from './spectrum/lines.ts';
import type { NoiseLine } from './spectrum/spectrum.ts';
import type { ChannelStudy, Resolution, Study, StudySettings } from './study-result.ts';

/** What a study is made from. */
export interface StudyInput {
  readonly quiet: Recording;
  readonly active: Recording;
  readonly settings: StudySettings;
  /** Version of the program, for the record. */
  readonly version: string;
  /** Takes the filtered active recording as it is made. */
  readonly sink?: FilteredSink;
}

/** All that is known of a channel before the simulation. */
interface Worked {
  readonly paired: PairedChannel;
  readonly quiet: QuietEvidence;
  readonly active: ActiveEvidence;
  readonly lines: readonly NoiseLine[];
  readonly answer: Answer;
  readonly insets: readonly InsetPlace[];
}

/**
 * The main job: from two surveyed recordings to a filter for every common channel, chosen with evidence and tried on both.
 * Throws UserError where the recordings share no channel or the settings cannot be met.
 */
export async function study({ quiet, active, settings, version, sink }: StudyInput): Promise<Study> {
  const pair = pairChannels(quiet.facts, active.facts, settings);
  const worked = await workOut(quiet, active, settings, pair.channels);
  const filterAt = ({ answer }: Worked, rateHz: number): DiscreteFilter => discretise(answer.choice.rival, rateHz);
  const measured = await simulateOnQuiet(
    quiet,
    worked.map((work) => ({
      index: work.paired.quietIndex,
      filter: filterAt(work, quiet.facts.rateHz),
      settlingSeconds: work.answer.choice.rival.settlingSeconds,
      stretches: work.quiet.stretches,
      lines: work.lines,
      lineLevel: work.quiet.lineLevel,
    })),
  );
  const discrete = worked.map((work) => filterAt(work, active.facts.rateHz));
  const simulated = await simulateOnActive(
    active,
    worked.map((work, i) => ({ index: work.paired.activeIndex, filter: discrete[i], insets: work.insets })),
    sink,
  );
  const findings = bySeverity(
    [...pair.findings, missingFinding(quiet.facts, 'quiet'), missingFinding(active.facts, 'active')].filter(
      (finding) => finding !== null,
    ),
  );
  const channels = worked.map((work, i) => ({
    ...describe(work, measured[i], active.facts),
    filteredSpectrum: simulated[i].spectrum,
    discrete: discrete[i],
    simulation: simulated[i].simulation,
  }));
  return { version, settings, quiet: quiet.facts, active: active.facts, channels, findings };
}

async function workOut(
  quiet: Recording,
  active: Recording,
  settings: StudySettings,
  channels: readonly PairedChannel[],
): Promise<Worked[]> {
  const quietEvidence = await listenQuiet(
    quiet,
    channels.map((channel) => channel.quietIndex),
  );
  const activeEvidence = await listenActive(
    active,
    channels.map((channel) => channel.activeIndex),
  );
  return channels.map((paired, i) => {
    const { levels, lineLevel } = quietEvidence[i];
    const lines = findLines(lineLevel);
    const answer = advise({
      ...settings,
      limits: settings,
      quietLevels: levels,
      activeLevels: activeEvidence[i].levels,
      lines,
    });
    return {
      paired,
      quiet: quietEvidence[i],
      active: activeEvidence[i],
      lines,
      answer,
      insets: chooseInsets(activeEvidence[i].windows, insetSamples(answer, active.facts.rateHz)),
    };
  });
}

type Described = Omit<ChannelStudy, 'filteredSpectrum' | 'discrete' | 'simulation'>;

function describe(work: Worked, measured: MeasuredNoise, activeFacts: RecordingFacts): Described {
  const { answer, lines } = work;
  const { quietSpectrum, activeSpectrum, keep, inUse, rivals } = answer;
  return {
    channel: work.paired.channel,
    quietPart: work.quiet.part,
    quietSpectrum,
    floorDensity: noiseFloor(quietSpectrum),
    activeSpectrum,
    noiseGain: Math.sqrt(answer.noiseGainPower),
    lines,
    lineGains: measured.lineGains,
    keep,
    inUse,
    advice: adviceOf(work, measured, activeFacts.rateHz),
    rivals,
    findings: channelFindings({ ...work, channel: work.paired.channel, activeFacts }),
    resolution: resolution(work),
  };
}

function adviceOf({ answer, lines, paired }: Worked, measured: MeasuredNoise, rateHz: number): Advice {
  const { choice, contest, keep, inUse, noiseGainPower, rivals, cornerRangeHz } = answer;
  const { rival, verdict } = choice;
  const { firstLineHz } = contest;
  const expected = expectedError(contest.evidence, prototypeSections(rival.family, rival.order), rival.cornerHz);
  const { unit } = paired.channel;
  return {
    verdict,
    shape: rival.shape,
    family: rival.family,
    order: rival.order,
    cornerHz: rival.cornerHz,
    cornerRangeHz,
    droopDb: rival.droopDb,
    rejectionDb: rival.rejectionDb,
    firstLineHz,
    room: firstLineHz !== null && keep.highHz > 0 ? firstLineHz / keep.highHz : null,
    noiseBeforeRms: measured.beforeRms,
    noiseAfterRms: measured.afterRms,
    signalKept: expected.signalKept,
    wienerRatio: rival.wienerRatio,
    delaySeconds: rival.delaySeconds,
    riseSeconds: rival.riseSeconds,
    settlingSeconds: rival.settlingSeconds,
    overshoot: rival.overshoot,
    reasons: reasons({ unit, keep, lines, inUse, noiseGainPower, rateHz, contest, rivals, choice }),
  };
}

/** The step in which the quiet recording is written, and what its noise leaves of the range in use. */
function resolution({ quiet, active }: Worked): Resolution {
  const { low, high } = active.judged.figures.clipping;
  return {
    step: quiet.judged.figures.step,
    effectiveBits: effectiveBits(high.value - low.value, quiet.judged.subject.noiseRms),
  };
}

/** Some eight periods of the keep-band edge, so that a movement can be followed by eye, but no fewer samples than make a picture. */
function insetSamples({ keep, choice }: Answer, rateHz: number): number {
  const slowestHz = keep.highHz > 0 ? keep.highHz : choice.rival.cornerHz;
  return Math.round(Math.max(256, Math.min(4000, (8 / slowestHz) * rateHz)));
}
