import { corner, decibels, hertz, percent, quantity, seconds, significant } from '../figure.ts';
import { filterName } from '../filter/name.ts';
import type { Band, NoiseLine } from '../spectrum/spectrum.ts';
import type { KeepBand, Rival } from './advice.ts';
import type { Contest } from './rivals.ts';
import type { Choice } from './verdict.ts';

/** What the words are made from. */
export interface Findings {
  readonly unit: string;
  readonly keep: KeepBand;
  readonly lines: readonly NoiseLine[];
  readonly inUse: readonly Band[];
  readonly noiseGainPower: number;
  readonly rateHz: number;
  readonly contest: Contest;
  readonly rivals: readonly Rival[];
  readonly choice: Choice;
}

/** The advice in plain sentences with their figures: why this filter, what it costs, what it cannot do. */
export function reasons(findings: Findings): string[] {
  return [
    keepSentence(findings),
    roomSentence(findings),
    choiceSentence(findings),
    intervalSentence(findings),
    ...overlapSentences(findings),
    costSentence(findings),
    gainSentence(findings),
    boundSentence(findings),
    ...inUseSentences(findings),
  ].filter((sentence) => sentence !== '');
}

function keepSentence({ keep, choice }: Findings): string {
  if (choice.overlap === 'no signal')
    return 'Nothing in the active recording exceeds the quiet one beyond chance: there is no measured keep band.';
  const how = keep.source === 'given' ? 'as given' : 'where 99 % of the power lies that active has beyond quiet';
  return `Keep band: ${keep.lowHz > 0 ? `${hertz(keep.lowHz)} to ` : 'up to '}${hertz(keep.highHz, 3)}, ${how}.`;
}

function roomSentence({ contest, keep }: Findings): string {
  const { firstLineHz } = contest;
  if (firstLineHz === null)
    return 'No noise line stands above the keep band: only the broadband noise decides the corner.';
  if (keep.highHz <= 0) return `First noise line: ${hertz(firstLineHz, 3)}.`;
  return `First noise line above it: ${hertz(firstLineHz, 3)}, a room of ${significant(firstLineHz / keep.highHz, 2)} to 1.`;
}

function choiceSentence({ choice, rivals, contest }: Findings): string {
  const { rival } = choice;
  const { limits } = contest;
  const asked = `droop of at most ${decibels(limits.droopDb)}${contest.firstLineHz === null ? '' : ` and rejection of at least ${decibels(limits.rejectionDb)}`}`;
  if (rival.fails.length === 0) {
    const simpler = rivals.filter((other) => other.order < rival.order);
    const beaten = simpler.length === 0 ? 'the simplest of all' : 'nothing simpler does';
    return `${capital(filterName(rival))} keeps the limits (${asked}); ${beaten}.`;
  }
  return `No filter up to order 8 keeps the limits (${asked}); ${filterName(rival)} comes nearest with the least error: ${shortfalls(rival, contest)}.`;
}

function shortfalls(rival: Rival, { limits }: Contest): string {
  const parts: string[] = [];
  if (rival.fails.includes('droop'))
    parts.push(`droop ${decibels(rival.droopDb)}, ${decibels(rival.droopDb - limits.droopDb)} too much`);
  if (rival.fails.includes('rejection') && rival.rejectionDb !== null)
    parts.push(`rejection ${decibels(rival.rejectionDb)}, ${decibels(limits.rejectionDb - rival.rejectionDb)} short`);
  return parts.join('; ');
}

function intervalSentence({ choice: { rival }, contest }: Findings): string {
  if (rival.fails.length > 0) return '';
  const { lowHz, highHz } = rival.allowedHz;
  const upper =
    contest.firstLineHz === null
      ? `${hertz(highHz, 3)} (what the sampling rate carries)`
      : `${hertz(highHz, 3)} (rejection)`;
  return `Between ${hertz(lowHz, 3)} (droop) and ${upper}, ${corner(rival.cornerHz)} is the round corner of least expected error.`;
}

function overlapSentences({ choice, lines, keep, contest, unit }: Findings): string[] {
  const cures =
    'What could still be done: a notch where the trouble is one line, faster sampling, mechanical isolation or moving the source of the noise, or accepting the loss.';
  switch (choice.overlap) {
    case null:
      return [];
    case 'no signal':
      return ['Check that the second recording was made in use, and that the channel carries what is to be measured.'];
    case 'line within': {
      const within = lines.filter((line) => line.frequencyHz <= keep.highHz);
      const names = within
        .map((line) => `${hertz(line.frequencyHz, 3)} (${quantity(line.amplitude, unit)})`)
        .join(', ');
      return [`Noise lines stand inside the keep band, where no low-pass can reach them: ${names}.`, cures];
    }
    case 'noise within': {
      const { noiseInBandPower, signalPower } = contest.evidence;
      return [
        `Noise inside the keep band holds ${percent(noiseInBandPower / signalPower)} of the signal's power there.`,
        cures,
      ];
    }
    case 'band full': {
      const { noiseInBandPower, signalPower } = contest.evidence;
      return [
        `The signal reaches up to ${hertz(keep.highHz, 3)}, all but what the sampling rate carries: no low-pass has room above it. Noise within it holds ${percent(noiseInBandPower / signalPower)} of the signal's power; leaving the recording unfiltered costs no more than that.`,
        'What could still be done: sample faster, or name the part of the band that matters with --keep.',
      ];
    }
    case 'line too near':
      return [`The first noise line stands too near the keep band for any filter here to part them.`, cures];
  }
}

function costSentence({ choice: { rival }, contest, unit }: Findings): string {
  const before = Math.sqrt(contest.evidence.noisePower);
  const step = `a step arrives ${seconds(rival.delaySeconds)} late and is within 1 % after ${seconds(rival.settlingSeconds)}`;
  return `Noise in use falls from ${quantity(before, unit)} to ${quantity(rival.noiseAfterRms, unit)} RMS; the price is a droop of ${decibels(rival.droopDb)} at the keep-band edge, and ${step}.`;
}

/** From this share of the noise left on, a filter is hardly worth its delay: half the power. */
const HARDLY_LESS = Math.SQRT1_2;

function gainSentence({ choice: { rival }, contest }: Findings): string {
  const left = rival.noiseAfterRms / Math.sqrt(contest.evidence.noisePower);
  if (!(left > HARDLY_LESS)) return '';
  return `That is little: ${percent(left)} of the noise stays, as any lower corner would take more from the signal than from the noise. These recordings call for hardly any filter.`;
}

function boundSentence({ choice: { rival, overlap }, contest, unit }: Findings): string {
  const { wienerPower, signalPower } = contest.evidence;
  if (overlap === 'no signal' || wienerPower <= 0) return '';
  const rms = (power: number) => quantity(Math.sqrt(power), unit, 2);
  return `Against the delayed signal an error of ${rms(rival.errorPower)} RMS is expected, ${percent(Math.sqrt(rival.errorPower / signalPower))} of the signal's RMS; no linear filter, knowing all past and future, comes below ${rms(wienerPower)} (Wiener bound).`;
}

function inUseSentences({ inUse, noiseGainPower }: Findings): string[] {
  const sentences: string[] = [];
  if (inUse.length > 0) {
    const bands = inUse.map((band) => `${hertz(band.lowHz, 3)} to ${hertz(band.highHz, 3)}`).join(', ');
    sentences.push(`Present only in use, and taken as noise: ${bands}. If this is signal, say so with --keep.`);
  }
  const gain = Math.sqrt(noiseGainPower);
  if (Math.abs(gain - 1) > 0.1)
    sentences.push(
      `In use the noise is ${significant(gain, 2)} times as strong as when quiet; the figures allow for it.`,
    );
  return sentences;
}

function capital(text: string): string {
  return text.charAt(0).toUpperCase() + text.slice(1);
}
