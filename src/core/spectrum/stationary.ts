import { seconds, significant } from '../figure.ts';
import { LineFit } from './line-fit.ts';
import { chiSquareQuantile, fQuantile } from './quantiles.ts';

/** Stretch of one run in which activity was measured. */
export interface ActivityWindow {
  /** Number of the run, from 0, in the order the runs were pushed. */
  readonly run: number;
  /** Index of the first sample within its run. */
  readonly firstSample: number;
  readonly samples: number;
  /** Time of the first sample, seconds from the first sample of the recording. */
  readonly startSeconds: number;
  readonly mean: number;
  /** Mean variance about straight lines through 64 samples each, unit²: slow drift does not count, however long the window is. */
  readonly variance: number;
}

/** Consecutive samples of one run. */
export interface StationaryStretch {
  readonly run: number;
  readonly firstSample: number;
  readonly samples: number;
}

/** The part of a recording that is alike throughout. */
export interface StationaryPart {
  /** In order; at least one. */
  readonly stretches: readonly StationaryStretch[];
  readonly usedSamples: number;
  readonly totalSamples: number;
  /** Why something was left out, as part of a sentence; null where all is used. */
  readonly reason: string | null;
}

const WINDOW_SAMPLES = 64;
const MOST_WINDOWS = 4096;

/**
 * Fold of mean and variance over windows of 64 samples, which double in length whenever there are more than 4096 of them: memory
 * is bounded, but for one window a run. Results do not depend on how the samples are cut into blocks.
 */
export class ActivityFold {
  private readonly rateHz: number;
  private windows: ActivityWindow[] = [];
  private windowSamples = WINDOW_SAMPLES;
  private limit = MOST_WINDOWS;
  private run = -1;
  private runStartSeconds = 0;
  private runSamples = 0;
  private readonly line = new LineFit();

  constructor(options: { readonly rateHz: number }) {
    this.rateHz = options.rateHz;
  }

  /** Takes the next samples; where `startsRun` is true they start a new run at `startSeconds`. */
  push(samples: Float64Array, startsRun: boolean, startSeconds: number): void {
    if (startsRun || this.run < 0) this.startRun(startSeconds);
    for (let from = 0; from < samples.length; ) {
      const to = Math.min(samples.length, from + WINDOW_SAMPLES - this.line.count);
      this.line.add(samples, from, to);
      if (this.line.count === WINDOW_SAMPLES) this.closeWindow();
      from = to;
    }
  }

  /** Windows in order of time; a run's last one may be shorter. Ends the last run. */
  result(): ActivityWindow[] {
    this.closeWindow();
    return this.windows;
  }

  private startRun(startSeconds: number): void {
    this.closeWindow();
    this.run++;
    this.runStartSeconds = startSeconds;
    this.runSamples = 0;
  }

  private closeWindow(): void {
    if (this.line.count === 0) return;
    const window = {
      run: this.run,
      firstSample: this.runSamples,
      samples: this.line.count,
      startSeconds: this.runStartSeconds + this.runSamples / this.rateHz,
      mean: this.line.mean(),
      variance: this.line.variance(),
    };
    this.runSamples += this.line.count;
    this.line.clear();
    const last = this.windows.at(-1);
    // Windows are aligned to the start of their run, so that a longer one is made of whole shorter ones.
    if (last && last.run === window.run && window.firstSample % this.windowSamples !== 0)
      this.windows[this.windows.length - 1] = join(last, window);
    else this.windows.push(window);
    if (this.windows.length > this.limit) this.doubleWindows();
  }

  private doubleWindows(): void {
    this.windowSamples *= 2;
    const joined: ActivityWindow[] = [];
    for (const window of this.windows) {
      const last = joined.at(-1);
      if (last && last.run === window.run && window.firstSample % this.windowSamples !== 0)
        joined[joined.length - 1] = join(last, window);
      else joined.push(window);
    }
    this.windows = joined;
    // Many short runs cannot be joined: do not try again at every window.
    this.limit = Math.max(MOST_WINDOWS, Math.ceil(1.5 * joined.length));
  }
}

function join(a: ActivityWindow, b: ActivityWindow): ActivityWindow {
  const samples = a.samples + b.samples;
  return {
    run: a.run,
    firstSample: a.firstSample,
    samples,
    startSeconds: a.startSeconds,
    mean: (a.mean * a.samples + b.mean * b.samples) / samples,
    variance: (a.variance * a.samples + b.variance * b.samples) / samples,
  };
}

/** Cells into which a recording is cut: short enough to find a disturbance, long enough to average over beating lines. */
const CELLS = 64;
/** Factor in variance by which a cell must depart from the median before it is disturbed, however sure the difference is. */
const PRACTICAL_RATIO = 4;
/** The same for cells that are fainter: two lines that beat fade now and then, a sensor that fell silent differs by more. */
const PRACTICAL_FAINT_RATIO = 50;
/** The same for jumps of the mean, which slow noise makes scatter more: five standard deviations. */
const PRACTICAL_JUMP_RATIO = 25;
const CHANCE = 1e-4;
/** Coloured noise and beating lines leave a variance this part of the degrees of freedom that white noise would. */
const DOF_SHARE = 0.25;
/** Cells that together add less than this to the noise power stay in: cutting them out would cost more. */
const TOLERATED = 0.1;
/** Stretches shorter than this part of the longest are not worth keeping. */
const USEFUL_SHARE = 1 / 8;

interface Cell extends StationaryStretch {
  readonly windows: number;
  /** unit² */
  readonly variance: number;
  /** Mean square of (previous − 2·this + next)/√6 over the window means, unit²; null at the edges of a run. */
  readonly jump: number | null;
}

/**
 * The longest part, or parts, of a quiet recording that is stationary. `windows` come from an ActivityFold, `rateHz` is its rate.
 * A cell (a 64th of the recording, one window at the least) is disturbed where its variance departs from the median by more than
 * chance (F test) and by a factor of four (fifty, where it is fainter), or where the mean jumps; a few that hardly change the noise
 * power stay in.
 * Kept are the undisturbed stretches: the longest, and those of an eighth of it or more. Throws RangeError without a window.
 */
export function stationaryStretches(windows: readonly ActivityWindow[], rateHz: number): StationaryPart {
  if (windows.length === 0) throw new RangeError('A recording without a sample has no stationary part');
  const cells = cellsOf(windows);
  const cut = disturbedCells(cells);
  const totalSamples = samplesOf(cells);
  const calm = joinCells(cells.filter((cell) => !cut.has(cell)));
  if (cut.size === 0 || calm.length === 0)
    return { stretches: joinCells(cells), usedSamples: totalSamples, totalSamples, reason: null };
  const longest = Math.max(...calm.map((stretch) => stretch.samples));
  const stretches = calm.filter((stretch) => stretch.samples >= USEFUL_SHARE * longest);
  return { stretches, usedSamples: samplesOf(stretches), totalSamples, reason: reasonFor(cut, cells, rateHz) };
}

/** Groups windows into cells that do not cross a run. */
function cellsOf(windows: readonly ActivityWindow[]): Cell[] {
  const each = Math.ceil(windows.length / CELLS);
  const cells: Cell[] = [];
  for (let first = 0; first < windows.length; ) {
    const { run, firstSample } = windows[first];
    let end = first + 1;
    while (end < windows.length && end < first + each && windows[end].run === run) end++;
    const members = windows.slice(first, end);
    const samples = samplesOf(members);
    const variance = members.reduce((sum, window) => sum + window.variance * window.samples, 0) / samples;
    cells.push({ run, firstSample, samples, variance, windows: end - first, jump: meanJump(windows, first, end) });
    first = end;
  }
  return cells;
}

function meanJump(windows: readonly ActivityWindow[], first: number, end: number): number | null {
  let sum = 0;
  let count = 0;
  for (let i = Math.max(1, first); i < Math.min(end, windows.length - 1); i++) {
    const [before, here, after] = [windows[i - 1], windows[i], windows[i + 1]];
    if (before.run !== after.run || before.samples !== here.samples || here.samples !== after.samples) continue;
    sum += (before.mean - 2 * here.mean + after.mean) ** 2 / 6;
    count++;
  }
  return count > 0 ? sum / count : null;
}

/** Cells to cut out: disturbed, and not among the few weak ones that may stay. */
function disturbedCells(cells: readonly Cell[]): Set<Cell> {
  const typical = weightedMedian(cells, (cell) => cell.variance);
  const cut = new Set(jumpingCells(cells));
  if (typical === 0) return cut;
  const referenceDof = dofOf(samplesOf(cells));
  const unlike = cells.filter((cell) => {
    const ratio = cell.variance / typical;
    const dof = dofOf(cell.samples);
    return ratio > 1
      ? ratio > Math.max(PRACTICAL_RATIO, fQuantile(1 - CHANCE, dof, referenceDof))
      : 1 / Math.max(ratio, 1e-300) > Math.max(PRACTICAL_FAINT_RATIO, fQuantile(1 - CHANCE, referenceDof, dof));
  });
  const change = (cell: Cell) => (Math.abs(cell.variance - typical) * cell.samples) / (typical * samplesOf(cells));
  let tolerated = 0;
  for (const cell of unlike.sort((a, b) => change(a) - change(b))) {
    tolerated += change(cell);
    if (tolerated > TOLERATED) cut.add(cell);
  }
  return cut;
}

/** Cells in which the mean leaves the straight line through its neighbours far more than it mostly does. */
function jumpingCells(cells: readonly Cell[]): Cell[] {
  const judged = cells.filter((cell) => cell.jump !== null);
  if (judged.length === 0) return [];
  const dofOfJump = (cell: Cell) => Math.max(1, 2 * DOF_SHARE * cell.windows);
  const dof = dofOfJump(judged[0]);
  const typical = (weightedMedian(judged, (cell) => cell.jump ?? 0) * dof) / chiSquareQuantile(0.5, dof);
  if (typical === 0) return [];
  const referenceDof = Math.max(1, dof * judged.length * DOF_SHARE);
  return judged.filter((cell) => {
    const least = Math.max(PRACTICAL_JUMP_RATIO, fQuantile(1 - CHANCE, dofOfJump(cell), referenceDof));
    return (cell.jump ?? 0) > least * typical;
  });
}

function dofOf(samples: number): number {
  return Math.max(1, DOF_SHARE * (samples - 2 * Math.ceil(samples / WINDOW_SAMPLES)));
}

function samplesOf(stretches: readonly { readonly samples: number }[]): number {
  return stretches.reduce((sum, stretch) => sum + stretch.samples, 0);
}

/** Value that half of the samples lie at or below. */
function weightedMedian(cells: readonly Cell[], value: (cell: Cell) => number): number {
  const sorted = [...cells].sort((a, b) => value(a) - value(b));
  let below = 0;
  const middle = sorted.find((cell) => {
    below += cell.samples;
    return 2 * below >= samplesOf(cells);
  });
  return value(middle ?? sorted[0]);
}

/** Joins cells that follow on from each other. */
function joinCells(cells: readonly Cell[]): StationaryStretch[] {
  const stretches: StationaryStretch[] = [];
  for (const { run, firstSample, samples } of cells) {
    const last = stretches.at(-1);
    if (last && last.run === run && last.firstSample + last.samples === firstSample)
      stretches[stretches.length - 1] = { ...last, samples: last.samples + samples };
    else stretches.push({ run, firstSample, samples });
  }
  return stretches;
}

/** Says what was found, to stand within a sentence. */
function reasonFor(cut: ReadonlySet<Cell>, cells: readonly Cell[], rateHz: number): string {
  const typical = weightedMedian(cells, (cell) => cell.variance);
  const loudest = Math.sqrt(Math.max(...[...cut].map((cell) => cell.variance)) / typical);
  const length = seconds(samplesOf([...cut]) / rateHz);
  if (loudest >= 2) return `${length} of it are up to ${significant(loudest, 2)} times as loud as the rest`;
  const jumps = jumpingCells(cells).length > 0;
  return jumps ? `its mean jumps within ${length}` : `${length} of it are fainter than the rest`;
}
