import { discreteGainDb } from '../filter/discretise.ts';
import type { DiscreteFilter } from '../filter/filter.ts';
import { FilterFold } from '../filter/run.ts';
import type { Recording } from '../recording/recording.ts';
import type { LevelSpectrum, NoiseLine } from '../spectrum/spectrum.ts';
import { WelchFold } from '../spectrum/welch.ts';
import type { LineGain } from '../study-result.ts';
import { partsOf, type Stretch } from './stretches.ts';
import { VarianceFold } from './variance.ts';

/** One channel of the quiet recording with the filter to be tried on it. */
export interface QuietChannel {
  readonly index: number;
  readonly filter: DiscreteFilter;
  readonly settlingSeconds: number;
  readonly stretches: readonly Stretch[];
  readonly lines: readonly NoiseLine[];
  /** Spectrum before the filter at the segment length at which lines are measured. */
  readonly lineLevel: LevelSpectrum;
}

/** Noise measured before and behind the filter. */
export interface MeasuredNoise {
  /** RMS about the mean, in the channel's unit. */
  readonly beforeRms: number;
  readonly afterRms: number;
  readonly lineGains: readonly LineGain[];
}

/**
 * Runs each channel's discrete filter over the stationary stretches of the quiet recording and measures what is left:
 * RMS before and behind, once settled, and the gain at every noise line.
 */
export async function simulateOnQuiet(
  recording: Recording,
  channels: readonly QuietChannel[],
): Promise<MeasuredNoise[]> {
  const folds = channels.map((channel) => new QuietFold(channel));
  for await (const block of recording.blocks()) {
    channels.forEach((channel, i) => {
      for (const { from, to, starts } of partsOf(block, channel.stretches))
        folds[i].push(block.channels[channel.index].subarray(from, to), starts);
    });
  }
  return folds.map((fold) => fold.result());
}

class QuietFold {
  private readonly channel: QuietChannel;
  private readonly filter: FilterFold;
  private readonly before: VarianceFold;
  private readonly after: VarianceFold;
  private readonly welch: WelchFold;

  constructor(channel: QuietChannel) {
    this.channel = channel;
    const { rateHz } = channel.filter;
    const longest = Math.max(...channel.stretches.map((stretch) => stretch.samples));
    const skip = Math.min(Math.ceil(channel.settlingSeconds * rateHz), Math.floor(longest / 5));
    this.filter = new FilterFold(channel.filter);
    this.before = new VarianceFold(skip);
    this.after = new VarianceFold(skip);
    this.welch = new WelchFold({
      rateHz,
      segmentSamples: [channel.lineLevel.segmentSamples],
      expectedSamples: channel.stretches.reduce((sum, stretch) => sum + stretch.samples, 0),
      groups: 1,
    });
  }

  push(samples: Float64Array, starts: boolean): void {
    const filtered = this.filter.push(samples, starts);
    this.before.push(samples, starts);
    this.after.push(filtered, starts);
    this.welch.push(filtered, starts);
  }

  result(): MeasuredNoise {
    const { lines, filter, lineLevel } = this.channel;
    const [behind] = this.welch.result();
    return {
      beforeRms: this.before.result(),
      afterRms: this.after.result(),
      lineGains: lines.map(({ frequencyHz }) => ({
        frequencyHz,
        computedDb: discreteGainDb(filter, frequencyHz),
        measuredDb: behind ? ratioDb(lobePower(behind, frequencyHz), lobePower(lineLevel, frequencyHz)) : null,
      })),
    };
  }
}

/** Sum of densities over the Hann main lobe around a frequency. */
function lobePower(level: LevelSpectrum, frequencyHz: number): number {
  const centre = Math.round((frequencyHz * level.segmentSamples) / level.rateHz);
  const from = Math.max(1, centre - 2);
  const to = Math.min(level.density.length, centre + 3);
  return level.density.subarray(from, to).reduce((sum, density) => sum + density, 0);
}

function ratioDb(after: number, before: number): number | null {
  return after > 0 && before > 0 ? 10 * Math.log10(after / before) : null;
}
