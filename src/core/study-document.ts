import type { RecordingFacts } from './recording/recording.ts';
import type { ChannelStudy, Study } from './study-result.ts';

const STUDY_SCHEMA = 'quietcorner/study@1';

/** Where the products of a study were written; null for what was not asked for. */
export interface StudyFiles {
  readonly report: string | null;
  readonly plan: string | null;
  readonly filtered: string | null;
}

/**
 * The stable JSON document of a study (schema quietcorner/study@1): frequencies in Hz, times in seconds,
 * amplitudes and RMS in the channel's unit. Infinite figures become null, as JSON has none.
 */
export function studyDocument(study: Study, files: StudyFiles) {
  return {
    schema: STUDY_SCHEMA,
    version: study.version,
    settings: study.settings,
    quiet: recordingDocument(study.quiet),
    active: recordingDocument(study.active),
    channels: study.channels.map(channelDocument),
    findings: study.findings,
    files,
  };
}

function recordingDocument(facts: RecordingFacts) {
  const { file, sha256, rows, rateHz, jitterSeconds, gaps, notes } = facts;
  return { file, sha256, rows, rateHz, jitterSeconds, gaps, notes };
}

function channelDocument({ channel, lines, keep, advice, rivals, findings }: ChannelStudy) {
  return {
    name: channel.name,
    unit: channel.unit,
    lines: lines.map(({ frequencyHz, amplitude, aboveFloorDb, family }) => ({
      frequencyHz,
      amplitude,
      aboveFloorDb,
      family,
    })),
    keep: { lowHz: keep.lowHz, highHz: keep.highHz, source: keep.source },
    advice: {
      verdict: advice.verdict,
      shape: advice.shape,
      family: advice.family,
      order: advice.order,
      cornerHz: advice.cornerHz,
      cornerRangeHz: advice.cornerRangeHz,
      droopDb: advice.droopDb,
      rejectionDb: advice.rejectionDb,
      noiseBeforeRms: advice.noiseBeforeRms,
      noiseAfterRms: advice.noiseAfterRms,
      delaySeconds: advice.delaySeconds,
      settlingSeconds: advice.settlingSeconds,
      wienerRatio: Number.isFinite(advice.wienerRatio) ? advice.wienerRatio : null,
      reasons: advice.reasons,
    },
    rivals: rivals.map(
      ({ shape, family, order, cornerHz, droopDb, rejectionDb, noiseAfterRms, delaySeconds, meets, fails }) => ({
        shape,
        family,
        order,
        cornerHz,
        droopDb,
        rejectionDb,
        noiseAfterRms,
        delaySeconds,
        meets,
        fails,
      }),
    ),
    findings,
  };
}
