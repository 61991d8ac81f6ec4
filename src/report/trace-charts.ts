import { corner, percent, quantity, seconds } from '../core/figure.ts';
import type { ChannelStudy, Inset, ThinnedTrace } from '../core/study-result.ts';
import { linearAxis } from './axis.ts';
import { curve, curves, envelope } from './chart-base.ts';
import type { ChartSpec } from './chart-spec.ts';
import { COLOURS } from './colours.ts';

/** The whole active recording before and behind the filter, every peak kept. */
export function overviewChart(study: ChannelStudy, id: string): ChartSpec {
  const { before, after } = study.simulation;
  const { name, unit } = study.channel;
  const end = before.seconds[before.seconds.length - 1];
  return {
    id,
    title: `${name}: the active recording, before and after`,
    description: `The active recording of ${name} over ${seconds(end)}. Before the filter it ranges from ${range(before, unit)}; after it from ${range(after, unit)}.`,
    widthPx: 1120,
    heightPx: 300,
    config: curves(
      [
        ...envelope({ label: 'before (smallest to largest)', ...before, colour: COLOURS.before, order: 2 }),
        ...envelope({ label: 'after', ...after, colour: COLOURS.after, order: 1 }),
      ],
      {
        x: linearAxis('bottom', 'time from the first sample, s', { min: 0, max: end }),
        y: linearAxis('left', axisTitle(name, unit)),
      },
    ),
  };
}

/** A few seconds at full resolution. */
export function insetChart(study: ChannelStudy, inset: Inset, id: string): ChartSpec {
  const { name, unit } = study.channel;
  const from = inset.seconds[0];
  const to = inset.seconds[inset.seconds.length - 1];
  const points = (values: Float64Array) => Array.from(values, (y, i) => ({ x: inset.seconds[i], y }));
  const left = spread(inset.after) / spread(inset.before);
  return {
    id,
    title: `${name}: ${inset.title.toLowerCase()}`,
    description: `${inset.title} of ${name}, ${seconds(from)} to ${seconds(to)}, every sample before and after the filter; peak to peak ${quantity(spread(inset.before), unit)} before, ${quantity(spread(inset.after), unit)} after (${percent(left)}). The delay of ${seconds(study.advice.delaySeconds)} is visible; corner ${corner(study.advice.cornerHz)}.`,
    widthPx: 552,
    heightPx: 270,
    config: curves(
      [
        curve({ label: 'before', points: points(inset.before), colour: COLOURS.before, width: 1, order: 2 }),
        curve({ label: 'after', points: points(inset.after), colour: COLOURS.after, width: 2.5, order: 1 }),
      ],
      {
        x: linearAxis('bottom', 'time, s', { min: from, max: to }),
        y: linearAxis('left', axisTitle(name, unit)),
      },
    ),
  };
}

/** Longest title that an axis of these heights holds, characters. */
const LONGEST_TITLE = 22;

function axisTitle(name: string, unit: string): string {
  if (unit === '') return shortened(name, LONGEST_TITLE);
  const short = shortened(unit, LONGEST_TITLE / 2);
  return `${shortened(name, LONGEST_TITLE - short.length - 2)}, ${short}`;
}

/** Leaves out the middle, since names often differ at their ends. */
function shortened(text: string, longest: number): string {
  if (text.length <= longest) return text;
  const head = Math.ceil((longest - 1) / 2);
  return `${text.slice(0, head)}…${text.slice(text.length - (longest - 1 - head))}`;
}

function range({ low, high }: ThinnedTrace, unit: string): string {
  const known = (values: Float64Array) => values.filter((value) => !Number.isNaN(value));
  const smallest = known(low).reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  const largest = known(high).reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY);
  return `${quantity(smallest, unit)} to ${quantity(largest, unit)}`;
}

function spread(values: Float64Array): number {
  return (
    values.reduce((a, b) => Math.max(a, b), Number.NEGATIVE_INFINITY) -
    values.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY)
  );
}
