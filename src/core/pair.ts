import { count, hertz } from './figure.ts';
import type { Finding } from './health/finding.ts';
import type { Channel, RecordingFacts } from './recording/recording.ts';
import type { StudySettings } from './study-result.ts';
import { UserError } from './user-error.ts';

/** One channel that both recordings hold. */
export interface PairedChannel {
  readonly channel: Channel;
  /** Places among the recordings' channels. */
  readonly quietIndex: number;
  readonly activeIndex: number;
}

/** The channels to be studied and what is odd about the pair. */
export interface Pair {
  readonly channels: readonly PairedChannel[];
  readonly findings: readonly Finding[];
}

const RATE_TOLERANCE = 0.01;

/**
 * Matches the channels of the two recordings by name, case ignored, and checks the settings against both.
 * Throws UserError('input') where there is no common channel, UserError('usage') where the settings cannot be met.
 */
export function pairChannels(quiet: RecordingFacts, active: RecordingFacts, settings: StudySettings): Pair {
  const quietIndex = new Map(quiet.channels.map((channel, index) => [channel.name.toLowerCase(), index]));
  const common = active.channels.flatMap((channel, activeIndex) => {
    const index = quietIndex.get(channel.name.toLowerCase());
    return index === undefined ? [] : [{ channel, quietIndex: index, activeIndex }];
  });
  if (common.length === 0)
    throw new UserError(
      'input',
      `${quiet.file} and ${active.file} have no channel in common: ${names(quiet)} against ${names(active)}; give two recordings of the same sensor.`,
    );
  const channels =
    settings.channels === null ? common : [...new Set(settings.channels.map((name) => named(common, name)))];
  checkSettings(Math.min(quiet.rateHz, active.rateHz), settings);
  return {
    channels,
    findings: [
      ...rateFindings(quiet, active),
      ...unitFindings(quiet, active, channels),
      ...partnerFindings(quiet, active),
    ],
  };
}

function named(common: readonly PairedChannel[], name: string): PairedChannel {
  const found = common.find(({ channel }) => channel.name.toLowerCase() === name.toLowerCase());
  if (found) return found;
  const known = common.map(({ channel }) => `"${channel.name}"`).join(', ');
  throw new UserError('usage', `There is no channel "${name}" in both recordings; choose from ${known}.`);
}

function checkSettings(rateHz: number, { keepHz, rejectHz }: StudySettings): void {
  const nyquistHz = rateHz / 2;
  const beyond = `the recordings carry up to ${hertz(nyquistHz, 3)} (half of ${hertz(rateHz, 3)})`;
  if (keepHz && keepHz.highHz >= nyquistHz)
    throw new UserError('usage', `The keep band ends at ${hertz(keepHz.highHz, 3)}, but ${beyond}; give a lower edge.`);
  if (rejectHz !== null && rejectHz >= nyquistHz)
    throw new UserError('usage', `${hertz(rejectHz, 3)} is to be rejected, but ${beyond}; give a lower frequency.`);
  if (keepHz && rejectHz !== null && rejectHz <= keepHz.highHz)
    throw new UserError(
      'usage',
      `The frequency to reject, ${hertz(rejectHz, 3)}, lies within the keep band that ends at ${hertz(keepHz.highHz, 3)}; a low-pass can only reject above it.`,
    );
}

function rateFindings(quiet: RecordingFacts, active: RecordingFacts): Finding[] {
  if (Math.abs(quiet.rateHz / active.rateHz - 1) <= RATE_TOLERANCE) return [];
  return [
    {
      kind: 'rates differ',
      severity: 'warning',
      channel: null,
      what: `The recordings were sampled at different rates, ${hertz(quiet.rateHz, 4)} quiet and ${hertz(active.rateHz, 4)} active.`,
      effect: 'Noise above the lower Nyquist frequency is not compared, and folds down to other places in either.',
      advice: 'Record both at one rate, the one at which the filter will run.',
    },
  ];
}

function unitFindings(quiet: RecordingFacts, active: RecordingFacts, channels: readonly PairedChannel[]): Finding[] {
  return channels.flatMap(({ quietIndex, activeIndex }) => {
    const a = quiet.channels[quietIndex];
    const b = active.channels[activeIndex];
    if (a.unit === b.unit) return [];
    return [
      {
        kind: 'units differ' as const,
        severity: 'warning' as const,
        channel: b.name,
        what: `It is in "${a.unit}" when quiet and in "${b.unit}" in use.`,
        effect:
          'The two are compared as they stand: where their units are not of one size, noise and signal are weighed wrong.',
        advice: 'Make sure that both are the same quantity in the same unit.',
      },
    ];
  });
}

function partnerFindings(quiet: RecordingFacts, active: RecordingFacts): Finding[] {
  const lonely = (one: RecordingFacts, other: RecordingFacts) =>
    one.channels.filter((a) => !other.channels.some((b) => b.name.toLowerCase() === a.name.toLowerCase()));
  return [
    [quiet, active],
    [active, quiet],
  ].flatMap(([one, other]) => {
    const alone = lonely(one, other);
    if (alone.length === 0) return [];
    return [
      {
        kind: 'no partner' as const,
        severity: 'note' as const,
        channel: null,
        what: `${count(alone.length)} channel${alone.length > 1 ? 's' : ''} of ${one.file} without a partner in ${other.file}: ${alone.map((channel) => `"${channel.name}"`).join(', ')}.`,
        effect: 'They are left out.',
        advice: 'Give them the same name in both files, if they should be studied.',
      },
    ];
  });
}

function names(facts: RecordingFacts): string {
  return facts.channels.map((channel) => `"${channel.name}"`).join(', ');
}
