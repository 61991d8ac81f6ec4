import { decibels, hertz, percent, quantity } from '../figure.ts';
import type { NoiseLine } from '../spectrum/spectrum.ts';
import { type Finding, inRecording, type Subject } from './finding.ts';

/** Part of the noise power from which pick-up is worth a warning. */
const WARN = 0.5;

/**
 * Mains pick-up as a finding, one for each network that shows among the noise lines. `keepHighHz` is the edge of the keep band, 0 where
 * none is known: pick-up within it cannot be filtered out.
 */
export function mainsFindings(lines: readonly NoiseLine[], keepHighHz: number, subject: Subject): Finding[] {
  const networks = new Map<string, NoiseLine[]>();
  for (const line of lines) {
    const name = /^mains (.*) ×/.exec(line.family ?? '')?.[1];
    if (name !== undefined) networks.set(name, [...(networks.get(name) ?? []), line]);
  }
  return [...networks].map(([name, members]) => networkFinding(name, members, keepHighHz, subject));
}

function networkFinding(name: string, lines: readonly NoiseLine[], keepHighHz: number, subject: Subject): Finding {
  const { channel, role, noiseRms } = subject;
  const strongest = lines.reduce((a, b) => (b.amplitude > a.amplitude ? b : a));
  const share = lines.reduce((sum, line) => sum + line.amplitude ** 2 / 2, 0) / noiseRms ** 2;
  const inKeep = lines.filter((line) => line.frequencyHz <= keepHighHz);
  const others = lines.length > 1 ? `, and ${lines.length - 1} harmonic${lines.length > 2 ? 's' : ''} of it` : '';
  return {
    kind: 'mains',
    severity: inKeep.length > 0 || share >= WARN ? 'warning' : 'note',
    channel: channel.name,
    what: `Pick-up from ${name} mains${inRecording(role)}: ${quantity(strongest.amplitude, channel.unit)} at ${hertz(strongest.frequencyHz, 3)}, ${decibels(strongest.aboveFloorDb)} above the floor${others}; ${percent(Math.min(1, share))} of the noise power.`,
    effect:
      inKeep.length > 0
        ? `At ${hertz(inKeep[0].frequencyHz, 3)} it lies within the keep band, where no low-pass removes it.`
        : 'The filter must reject it like any other noise line; harmonics above half the rate fold down unseen.',
    advice: 'Twist and screen the leads, earth at one point, keep away from motors and supplies; then record again.',
  };
}
