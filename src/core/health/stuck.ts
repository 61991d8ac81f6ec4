import { count, hertz, percent, quantity, seconds } from '../figure.ts';
import { type ClippingFigures, clippedEnds } from './clipping.ts';
import { type Finding, inRecording, type Subject } from './finding.ts';

/** Equal samples in a row. */
interface EqualRun {
  readonly samples: number;
  readonly value: number;
  readonly startSeconds: number;
  /** Largest difference between neighbours within the five samples that led to it, in the channel's unit. */
  readonly approach: number;
}

/** How long samples stay exactly equal. */
export interface StuckFigures {
  /** Number of runs of each length: index 1 for samples unlike both neighbours; the last holds all longer ones too. */
  readonly lengths: Float64Array;
  /** The longest runs of eight samples or more, in the order of time. */
  readonly longest: readonly EqualRun[];
  /** Mean size of the steps between runs, in the channel's unit. */
  readonly meanStep: number;
}

/** Equal samples in a row that can be a stuck sensor. */
const FEWEST = 8;
const LENGTHS = 129;
const MOST_RUNS = 32;
/** Chance at which rounding explains a run no longer. */
const CHANCE = 1e-3;
/** Runs that a length must have been reached by before the chance of going on is read from it. */
const ENOUGH_RUNS = 50;
/** Steps by which the signal must have moved just before: at rest or at its turn it stays equal for good reason. */
const MOVING_STEPS = 3;
/** Part of the runs that must be of one length for the logger to be faster than the sensor. */
const HELD = 0.8;
/** Parts of all samples from which stuck ones are worth a warning, or too many. */
const WARN = 1e-3;
const REFUSE = 0.5;

/** Fold over runs of exactly equal samples. Block size changes nothing. */
export class StuckFold {
  private readonly rateHz: number;
  private readonly lengths = new Float64Array(LENGTHS);
  private readonly longest: EqualRun[] = [];
  private value = Number.NaN;
  private inRow = 0;
  private startSeconds = 0;
  private approach = 0;
  /** The last four differences between neighbours, the newest first. */
  private readonly steps = new Float64Array(4);
  private sumOfSteps = 0;
  /** Runs of the recording that have ended: each has one step fewer than it has runs of equal samples. */
  private gridRuns = 0;

  constructor(options: { readonly rateHz: number }) {
    this.rateHz = options.rateHz;
  }

  /** Takes the next samples; where `startsRun` is true they start a new run, at `startSeconds` in either case. */
  push(samples: Float64Array, startsRun: boolean, startSeconds: number): void {
    if (startsRun) this.close();
    const { rateHz } = this;
    let { value, inRow, sumOfSteps } = this;
    let singles = 0;
    let step1 = this.steps[0];
    let step2 = this.steps[1];
    let step3 = this.steps[2];
    let step4 = this.steps[3];
    for (let i = 0; i < samples.length; i++) {
      const next = samples[i];
      if (next === value) {
        if (inRow++ === 1) this.begin(Math.max(step1, step2, step3, step4), startSeconds + (i - 1) / rateHz);
        continue;
      }
      if (inRow === 1) singles++;
      else if (inRow > 0) this.end(value, inRow);
      step4 = step3;
      step3 = step2;
      step2 = step1;
      // The first sample of a run is reached from nowhere.
      step1 = inRow > 0 ? Math.abs(next - value) : 0;
      sumOfSteps += step1;
      value = next;
      inRow = 1;
    }
    this.lengths[1] += singles;
    this.value = value;
    this.inRow = inRow;
    this.sumOfSteps = sumOfSteps;
    this.steps.set([step1, step2, step3, step4]);
  }

  /** Ends the last run. */
  result(): StuckFigures {
    this.close();
    const { lengths, longest, sumOfSteps, gridRuns } = this;
    const runs = lengths.reduce((sum, each) => sum + each, 0);
    return { lengths, longest, meanStep: sumOfSteps / Math.max(1, runs - gridRuns) };
  }

  private close(): void {
    if (this.inRow > 0) {
      this.end(this.value, this.inRow);
      this.gridRuns++;
    }
    this.value = Number.NaN;
    this.inRow = 0;
    this.steps.fill(0);
  }

  /** Notes what led to a run whose first pair is found: most samples make none. */
  private begin(approach: number, startSeconds: number): void {
    this.approach = approach;
    this.startSeconds = startSeconds;
  }

  /** Counts a run and keeps it if it is among the longest; of equals the first. */
  private end(value: number, samples: number): void {
    const { longest, startSeconds, approach } = this;
    this.lengths[Math.min(samples, LENGTHS - 1)]++;
    if (samples < FEWEST) return;
    longest.push({ samples, value, startSeconds, approach });
    if (longest.length <= MOST_RUNS) return;
    const shortest = longest.reduce((least, run, i) => (run.samples <= longest[least].samples ? i : least), 0);
    longest.splice(shortest, 1);
  }
}

/**
 * Runs of equal samples that rounding does not explain: reached from a moving signal, and longer than the chance of going on, as read
 * from all runs, would leave one in a thousand recordings. `step` is the quantisation step, null where there is none.
 */
function stuckRuns({ lengths, longest }: StuckFigures, step: number | null): EqualRun[] {
  const runs = lengths.reduce((sum, each) => sum + each, 0);
  let [reached, goesOn, at] = [runs, 0, 1];
  for (let length = 1; length < LENGTHS - 1; length++) {
    if (reached < ENOUGH_RUNS) break;
    const further = reached - lengths[length];
    goesOn = Math.max(goesOn, further / reached);
    reached = further;
    at = length + 1;
  }
  const expected = (samples: number) =>
    samples <= at ? runs : Math.max(reached, 1) * Math.min(1, Math.max(goesOn, 1 / runs)) ** (samples - at);
  return longest.filter(
    (run) => run.approach > (MOVING_STEPS - 0.5) * (step ?? 0) && run.approach > 0 && expected(run.samples) < CHANCE,
  );
}

/** Samples for which every value is held, where nearly all runs are of one length of two or more; else 1. */
function heldSamples({ lengths, meanStep }: StuckFigures, step: number | null): number {
  const runs = lengths.reduce((sum, each) => sum + each, 0);
  const usual = lengths.reduce((best, each, length) => (each > lengths[best] ? length : best), 1);
  if (runs < ENOUGH_RUNS || usual < 2 || usual === LENGTHS - 1 || lengths[usual] < HELD * runs) return 1;
  // A slow ramp climbs by one step after as many samples each; values that are held change by more.
  return meanStep > MOVING_STEPS * (step ?? 0) ? usual : 1;
}

/** Stuck values as a finding; null where there are none. Flat tops at an extreme are clipping, and do not count. */
export function stuckFinding(
  figures: StuckFigures,
  { clipping, step }: { readonly clipping: ClippingFigures; readonly step: number | null },
  { channel, role, samples }: Subject,
): Finding | null {
  const ends = clippedEnds(clipping, step).map((end) => end.value);
  const stuck = stuckRuns(figures, step).filter((run) => !ends.includes(run.value));
  if (stuck.length === 0) return null;
  const total = stuck.reduce((sum, run) => sum + run.samples, 0);
  const longest = stuck.reduce((a, b) => (b.samples > a.samples ? b : a));
  const share = total / samples;
  const many =
    stuck.length === 1
      ? 'A stretch'
      : `${stuck.length === MOST_RUNS ? 'At least ' : ''}${count(stuck.length)} stretches`;
  const where = `${stuck.length === 1 ? '' : 'the longest '}${count(longest.samples)} samples at ${quantity(longest.value, channel.unit, 4)}, from ${seconds(longest.startSeconds)}`;
  return {
    kind: 'stuck values',
    severity: share >= REFUSE && role !== 'active' ? 'refusal' : share >= WARN ? 'warning' : 'note',
    channel: channel.name,
    what: `${many}${inRecording(role)} with exactly equal samples, longer than rounding explains: ${where}; ${percent(share)} of all samples.`,
    effect:
      'There is no noise in it and its ends are jumps, so the noise is read wrong and the floor rises at all frequencies.',
    advice: 'Look for a sensor, bus or logger that stops delivering; cut these stretches out, or record again.',
  };
}

/** Values that are repeated because the logger is faster than the sensor, as a finding; null where they are not. */
export function heldFinding(
  figures: StuckFigures,
  step: number | null,
  { channel, role, rateHz }: Subject,
): Finding | null {
  const held = heldSamples(figures, step);
  if (held === 1) return null;
  return {
    kind: 'held values',
    severity: 'warning',
    channel: channel.name,
    what: `Every value${inRecording(role)} stands in ${count(held)} samples in a row: the logger takes ${hertz(rateHz, 4)}, the sensor delivers ${hertz(rateHz / held, 4)}.`,
    effect: `Above ${hertz(rateHz / held / 2, 3)} the spectra hold only images of what lies below, which may be taken for lines.`,
    advice: 'Log at the rate at which the sensor delivers, and record again.',
  };
}
