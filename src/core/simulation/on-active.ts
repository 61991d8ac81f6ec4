import type { DiscreteFilter } from '../filter/filter.ts';
import { FilterFold } from '../filter/run.ts';
import type { Recording, UniformBlock } from '../recording/recording.ts';
import { segmentLengths } from '../spectrum/levels.ts';
import { mergeLevels } from '../spectrum/merge.ts';
import type { Spectrum } from '../spectrum/spectrum.ts';
import { WelchFold } from '../spectrum/welch.ts';
import type { Simulation } from '../study-result.ts';
import { InsetFold, type InsetPlace } from './inset.ts';
import { ThinFold } from './thin.ts';

/** Filter and places of one channel; `index` counts the recording's channels. */
export interface SimulatedChannel {
  readonly index: number;
  readonly filter: DiscreteFilter;
  readonly insets: readonly InsetPlace[];
}

/** Takes raw and filtered samples of the simulated channels, block by block; awaited, so that a slow writer holds the reading back. */
export type FilteredSink = (
  block: UniformBlock,
  before: readonly Float64Array[],
  after: readonly Float64Array[],
) => void | Promise<void>;

const COLUMNS = 1200;

/**
 * Runs each channel's discrete filter over the active recording in one pass, starting every run in the steady state of its
 * first sample; gives the thinned traces, the insets and the spectrum behind the filter, in the order of `channels`.
 */
export async function simulateOnActive(
  recording: Recording,
  channels: readonly SimulatedChannel[],
  sink?: FilteredSink,
): Promise<{ simulation: Simulation; spectrum: Spectrum }[]> {
  const folds = channels.map((channel) => new ChannelFold(recording, channel));
  for await (const block of recording.blocks()) {
    const before = channels.map((channel) => block.channels[channel.index]);
    const after = folds.map((fold, i) => fold.push(block, before[i]));
    if (sink) await sink(block, before, after);
  }
  return folds.map((fold) => fold.result());
}

class ChannelFold {
  private readonly filter: FilterFold;
  private readonly before: ThinFold;
  private readonly after: ThinFold;
  private readonly insets: readonly InsetFold[];
  private readonly welch: WelchFold;

  constructor(recording: Recording, channel: SimulatedChannel) {
    const { rateHz, durationSeconds, longestRunSamples } = recording.facts;
    const samples = Math.round(durationSeconds * rateHz);
    const columns = Math.max(1, Math.min(COLUMNS, Math.floor(samples / 2)));
    this.filter = new FilterFold(channel.filter);
    this.before = new ThinFold({ columns, durationSeconds, rateHz });
    this.after = new ThinFold({ columns, durationSeconds, rateHz });
    this.insets = channel.insets.map((place) => new InsetFold(place, rateHz));
    this.welch = new WelchFold({
      rateHz,
      segmentSamples: segmentLengths(longestRunSamples),
      expectedSamples: samples,
      groups: 1,
    });
  }

  push(block: UniformBlock, samples: Float64Array): Float64Array {
    const startsRun = block.firstSample === 0;
    const filtered = this.filter.push(samples, startsRun);
    this.before.push(samples, block.startSeconds);
    this.after.push(filtered, block.startSeconds);
    for (const inset of this.insets) inset.push(block, samples, filtered);
    this.welch.push(filtered, startsRun);
    return filtered;
  }

  result(): { simulation: Simulation; spectrum: Spectrum } {
    return {
      simulation: {
        before: this.before.result(),
        after: this.after.result(),
        insets: this.insets.map((inset) => inset.result()),
      },
      spectrum: mergeLevels(this.welch.result()),
    };
  }
}
