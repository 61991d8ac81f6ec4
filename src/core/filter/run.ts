import type { DiscreteFilter, Section } from './filter.ts';

/**
 * Fold that filters samples block by block through second-order sections in transposed direct form II
 * (Oppenheim & Schafer, Discrete-Time Signal Processing, §6.3.3). Every run starts in the steady state of its first
 * sample, so that there is no start-up thump. Block size changes no bit of the result.
 */
export class FilterFold {
  private readonly sections: readonly Section[];
  /** Two state values per section. */
  private readonly state: Float64Array;
  /**
   * First sample of the run. Only what departs from it is filtered, the gain of a low-pass at 0 Hz being 1: the same as
   * sections in its steady state, but a large offset (gravity, a tare) costs no digits where the corner is far below the rate.
   */
  private level = 0;

  constructor(filter: DiscreteFilter) {
    this.sections = filter.sections;
    this.state = new Float64Array(2 * filter.sections.length);
  }

  /** Filters consecutive samples into a fresh array of the same length; `startsRun` where the first of them starts a run. */
  push(samples: Float64Array, startsRun: boolean): Float64Array {
    if (startsRun) {
      this.level = samples[0];
      this.state.fill(0);
    }
    const output = new Float64Array(samples.length);
    const last = this.sections.length - 1;
    this.sections.forEach((section, index) => {
      const input = index === 0 ? samples : output;
      this.run(section, 2 * index, input, index === 0 ? this.level : 0, output, index === last ? this.level : 0);
    });
    return output;
  }

  /** One section over all samples: `taken` is subtracted from its input, `given` added to its output. */
  private run(
    { b0, b1, b2, a1, a2 }: Section,
    at: number,
    input: Float64Array,
    taken: number,
    output: Float64Array,
    given: number,
  ): void {
    let first = this.state[at];
    let second = this.state[at + 1];
    for (let i = 0; i < input.length; i++) {
      const x = input[i] - taken;
      const y = b0 * x + first;
      // What does not wait for y comes first: a quarter faster.
      first = b1 * x + second - a1 * y;
      second = b2 * x - a2 * y;
      output[i] = y + given;
    }
    this.state[at] = first;
    this.state[at + 1] = second;
  }
}
