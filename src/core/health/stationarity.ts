import { percent, seconds } from '../figure.ts';
import type { StationaryPart } from '../spectrum/stationary.ts';
import type { Finding, Subject } from './finding.ts';

/** A quiet recording that is not alike throughout, as a finding; null where it is, and for active ones, which need not be. */
export function stationarityFinding(part: StationaryPart, { channel, role, rateHz }: Subject): Finding | null {
  const { reason, usedSamples, totalSamples } = part;
  if (reason === null || role === 'active') return null;
  const used = `${seconds(usedSamples / rateHz)} of ${seconds(totalSamples / rateHz)} (${percent(usedSamples / totalSamples)})`;
  const quiet = role === 'quiet';
  return {
    kind: 'not stationary',
    severity: quiet ? 'warning' : 'note',
    channel: channel.name,
    what: `The ${quiet ? 'quiet ' : ''}recording is not stationary (${reason}).`,
    effect: quiet
      ? `Only ${used} are used for the noise figures.`
      : `As a quiet recording only ${used} of it would be used for the noise figures; as an active one all of it.`,
    advice: quiet
      ? 'Record again with nothing moving, or see that the part used is the typical one.'
      : 'Where it was meant to be quiet, record again with nothing moving.',
  };
}
