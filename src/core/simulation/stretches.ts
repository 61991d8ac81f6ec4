import type { UniformBlock } from '../recording/recording.ts';

/** Consecutive samples of one run. */
export interface Stretch {
  readonly run: number;
  readonly firstSample: number;
  readonly samples: number;
}

/** Part of a block that lies within a stretch. */
export interface Part {
  /** Offsets within the block, `to` exclusive. */
  readonly from: number;
  readonly to: number;
  /** True where the stretch starts with this part. */
  readonly starts: boolean;
}

/** The parts of a block that lie within `stretches`, in order. */
export function partsOf(block: UniformBlock, stretches: readonly Stretch[]): Part[] {
  const parts: Part[] = [];
  for (const stretch of stretches) {
    if (stretch.run !== block.run) continue;
    const from = Math.max(0, stretch.firstSample - block.firstSample);
    const to = Math.min(block.length, stretch.firstSample + stretch.samples - block.firstSample);
    if (to > from) parts.push({ from, to, starts: block.firstSample + from === stretch.firstSample });
  }
  return parts;
}
