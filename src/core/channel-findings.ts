import type { Answer } from './advice/advise.ts';
import { decibels, hertz, percent, significant } from './figure.ts';
import { sampleFindings } from './health/channel-health.ts';
import { bySeverity, type Finding } from './health/finding.ts';
import { jitterFinding } from './health/jitter.ts';
import { mainsFindings } from './health/mains.ts';
import { stationarityFinding } from './health/stationarity.ts';
import type { ActiveEvidence, QuietEvidence } from './listening.ts';
import { interpolationLossDb } from './recording/interpolation.ts';
import type { Channel, RecordingFacts } from './recording/recording.ts';
import type { NoiseLine } from './spectrum/spectrum.ts';

/** All that a channel's findings are drawn from. */
export interface ChannelEvidence {
  readonly channel: Channel;
  readonly quiet: QuietEvidence;
  readonly active: ActiveEvidence;
  readonly lines: readonly NoiseLine[];
  readonly answer: Answer;
  readonly activeFacts: RecordingFacts;
}

/** Power of the quiet recording over that of the active one from which it is asked whether they are swapped. */
const LOUDER = 1.5;
/** Noise in the keep band, as a part of the signal's power there, that is worth a word. */
const NOISE_IN_BAND = 0.01;

/** Findings of both recordings of a channel and of the two together, the worst first. */
export function channelFindings(evidence: ChannelEvidence): Finding[] {
  const { quiet, active, lines, answer } = evidence;
  const { subject } = quiet.judged;
  return bySeverity(
    [
      swapped(evidence),
      stationarityFinding(quiet.stationary, subject),
      ...sampleFindings(quiet.judged, quiet.part.stretches),
      ...mainsFindings(lines, answer.keep.highHz, subject),
      ...sampleFindings(active.judged),
      interpolation(evidence),
      jitter(evidence),
      noiseInBand(evidence),
    ].filter((finding) => finding !== null),
  );
}

function swapped({ channel, answer: { quietSpectrum, activeSpectrum } }: ChannelEvidence): Finding | null {
  const ratio = totalPower(quietSpectrum) / totalPower(activeSpectrum);
  if (!(ratio > LOUDER)) return null;
  return {
    kind: 'swapped',
    severity: 'warning',
    channel: channel.name,
    what: `It is louder in the quiet recording than in the active one, by ${decibels(10 * Math.log10(ratio))}.`,
    effect: 'Where the two are swapped, signal is taken for noise and the advice is wrong.',
    advice: 'Are the two swapped, or was quiet not quiet? Give the quiet recording first.',
  };
}

function totalPower({ density, widthHz }: Answer['quietSpectrum']): number {
  return density.reduce((sum, value, i) => sum + value * widthHz[i], 0);
}

function interpolation({ channel, answer: { keep }, activeFacts }: ChannelEvidence): Finding | null {
  const { resampled, rateHz } = activeFacts;
  if (!resampled || keep.highHz <= 0) return null;
  const lossDb = interpolationLossDb(keep.highHz / rateHz);
  const cost = lossDb < 0.01 ? 'less than 0.01' : `up to ${significant(lossDb, 2)}`;
  return {
    kind: 'interpolation',
    severity: 'note',
    channel: channel.name,
    what: `The samples of the active recording stand unevenly; interpolating them costs ${cost} dB at the keep-band edge of ${hertz(keep.highHz, 3)}.`,
    effect: 'The signal is read too low by that, and noise near half the rate by more.',
    advice: 'Let a timer start each sample, or log faster.',
  };
}

function jitter({ channel, answer: { keep, contest }, activeFacts }: ChannelEvidence): Finding | null {
  if (keep.highHz <= 0) return null;
  const rms = Math.sqrt(contest.evidence.signalPower);
  return jitterFinding(activeFacts, 'active', {
    channel: channel.name,
    frequencyHz: keep.highHz,
    place: 'the keep-band edge',
    signal: rms > 0 ? { rms, unit: channel.unit } : null,
  });
}

function noiseInBand({ channel, answer: { contest } }: ChannelEvidence): Finding | null {
  const { noiseInBandPower, signalPower } = contest.evidence;
  const share = noiseInBandPower / signalPower;
  if (!(Number.isFinite(share) && share > NOISE_IN_BAND)) return null;
  return {
    kind: 'noise in the keep band',
    severity: 'note',
    channel: channel.name,
    what: `Noise within the keep band amounts to ${percent(share)} of the signal's power there.`,
    effect: 'No filter of this kind removes it.',
    advice: 'Look for its cause: mounting, supply, or a sensor with less noise of its own.',
  };
}
