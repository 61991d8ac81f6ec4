import type { Channel } from '../recording/recording.ts';
import type { ActivityWindow } from '../spectrum/stationary.ts';
import { type ClippingFigures, ClippingFold, clippingFinding } from './clipping.ts';
import { type DriftFigures, driftFinding, driftOf } from './drift.ts';
import type { Finding, Role, Subject } from './finding.ts';
import { noiseRms } from './noise-rms.ts';
import { QuantisationFold, quantisationFinding } from './quantisation.ts';
import { type SpikeFigures, SpikeFold, spikeFinding, type UsedStretch } from './spikes.ts';
import { heldFinding, type StuckFigures, StuckFold, stuckFinding } from './stuck.ts';

/** What the health folds measured on one channel. */
export interface ChannelFigures {
  readonly samples: number;
  readonly clipping: ClippingFigures;
  readonly stuck: StuckFigures;
  /** Quantisation step, in the channel's unit; null where none shows. */
  readonly step: number | null;
  readonly spikes: SpikeFigures;
}

/**
 * Health of one channel as one fold. What hangs on exact values is read from the rows as logged, spikes from the samples on the
 * uniform grid. Block size changes nothing.
 */
export class ChannelHealthFold {
  private readonly clipping: ClippingFold;
  private readonly stuck: StuckFold;
  private readonly quantisation = new QuantisationFold();
  private readonly spikes: SpikeFold;
  private samples = 0;

  constructor(options: { readonly rateHz: number }) {
    this.clipping = new ClippingFold(options);
    this.stuck = new StuckFold(options);
    this.spikes = new SpikeFold(options);
  }

  /** Takes the next samples and the rows logged with them; where `startsRun` is true they start a new run. */
  push(samples: Float64Array, rows: Float64Array, startsRun: boolean, startSeconds: number): void {
    this.clipping.push(rows, startsRun, startSeconds);
    this.stuck.push(rows, startsRun, startSeconds);
    this.quantisation.push(rows, startsRun);
    this.spikes.push(samples, startsRun, startSeconds);
    this.samples += samples.length;
  }

  /** Ends the last run. */
  result(): ChannelFigures {
    const step = this.quantisation.result();
    return {
      samples: this.samples,
      clipping: this.clipping.result(),
      stuck: this.stuck.result(),
      step,
      spikes: this.spikes.result(step),
    };
  }
}

/** A channel with all that its findings are judged by. */
export interface Judged {
  readonly subject: Subject;
  readonly figures: ChannelFigures;
  readonly drift: DriftFigures;
}

/** Puts a channel's figures beside its noise and drift, which come from its activity windows; `rateHz` is their rate. */
export function judge(
  figures: ChannelFigures,
  windows: readonly ActivityWindow[],
  { channel, role, rateHz }: { readonly channel: Channel; readonly role: Role; readonly rateHz: number },
): Judged {
  return {
    subject: { channel, role, rateHz, samples: figures.samples, noiseRms: noiseRms(windows) },
    figures,
    drift: driftOf(windows, rateHz),
  };
}

/**
 * What the samples of a channel themselves show, in a fixed order. `used` are the stretches that carry the noise figures, null where all
 * of the recording does.
 */
export function sampleFindings(
  { subject, figures, drift }: Judged,
  used: readonly UsedStretch[] | null = null,
): Finding[] {
  const { clipping, stuck, step, spikes } = figures;
  return [
    clippingFinding(clipping, step, subject),
    stuckFinding(stuck, { clipping, step }, subject),
    heldFinding(stuck, step, subject),
    quantisationFinding(step, clipping.high.value - clipping.low.value, subject),
    spikeFinding(spikes, used, subject),
    driftFinding(drift, subject),
  ].filter((finding) => finding !== null);
}
