import type { DiscreteFilter, Section } from './filter.ts';

/**
 * Fold that filters samples block by block through second-order sections in transposed direct form II
 * (Oppenheim & Schafer, Discrete-Time Signal Processing, §6.3.3). At the start of a run every section stands in the steady
 * state of the run's first sample, so that there is no start-up thump. Block size changes no bit of the result.
 */
export class FilterFold {
  private readonly sections: readonly Section[];
  /** Two state values per section. */
  private readonly state: Float64Array;

  constructor(filter: DiscreteFilter) {
    this.sections = filter.sections;
    this.state = new Float64Array(2 * filter.sections.length);
  }

  /** Filters consecutive samples into a fresh array of the same length; `startsRun` where the first of them starts a run. */
  push(samples: Float64Array, startsRun: boolean): Float64Array {
    const output = Float64Array.from(samples);
    if (samples.length === 0) return output;
    if (startsRun) this.settle(samples[0]);
    this.sections.forEach((section, index) => {
      this.run(section, 2 * index, output);
    });
    return output;
  }

  /** Steady state of a constant input: y = x·Σb/Σa in every section, state = what keeps it there. */
  private settle(value: number): void {
    let input = value;
    this.sections.forEach(({ b0, b1, b2, a1, a2 }, index) => {
      const output = (input * (b0 + b1 + b2)) / (1 + a1 + a2);
      const second = b2 * input - a2 * output;
      this.state[2 * index] = b1 * input - a1 * output + second;
      this.state[2 * index + 1] = second;
      input = output;
    });
  }

  private run({ b0, b1, b2, a1, a2 }: Section, at: number, samples: Float64Array): void {
    let first = this.state[at];
    let second = this.state[at + 1];
    for (let i = 0; i < samples.length; i++) {
      const x = samples[i];
      const y = b0 * x + first;
      first = b1 * x - a1 * y + second;
      second = b2 * x - a2 * y;
      samples[i] = y;
    }
    this.state[at] = first;
    this.state[at + 1] = second;
  }
}
