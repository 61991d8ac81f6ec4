import type { ChartConfiguration, ChartDataset, ChartOptions, LegendItem, Plugin } from 'chart.js';
import { FONT_FAMILY, TEXT_PX } from './axis.ts';
import type { Point } from './chart-spec.ts';
import { COLOURS } from './colours.ts';

/** Legends name only curves with a label. */
const NAMELESS = '';

/** A chart of curves over common axes, still and without points, as every picture of the report is. */
export function curves(
  datasets: ChartDataset<'line', Point[]>[],
  scales: NonNullable<ChartOptions<'line'>['scales']>,
  plugins: Plugin<'line'>[] = [],
): ChartConfiguration<'line'> {
  return {
    type: 'line',
    data: { datasets: datasets as ChartDataset<'line'>[] },
    options: {
      responsive: false,
      animation: false,
      parsing: false,
      normalized: true,
      layout: { padding: { top: 4, right: 12, bottom: 4, left: 4 } },
      font: { family: FONT_FAMILY, size: TEXT_PX },
      scales,
      plugins: {
        legend: {
          position: 'top',
          align: 'start',
          labels: {
            color: COLOURS.ink,
            font: { size: TEXT_PX, family: FONT_FAMILY },
            // A short stretch of each curve, with its width and dashes.
            usePointStyle: true,
            pointStyleWidth: 34,
            generateLabels: ({ data }) => legendOf(data.datasets as ChartDataset<'line'>[]),
          },
        },
        tooltip: { enabled: false },
      },
    },
    plugins: [background(), ...plugins],
  };
}

function legendOf(datasets: readonly ChartDataset<'line'>[]): LegendItem[] {
  return datasets.flatMap((dataset, datasetIndex) =>
    dataset.label === NAMELESS
      ? []
      : [
          {
            text: dataset.label as string,
            datasetIndex,
            fontColor: COLOURS.ink,
            strokeStyle: dataset.borderColor as string,
            lineWidth: dataset.borderWidth as number,
            lineDash: dataset.borderDash as number[],
            pointStyle: 'line',
          },
        ],
  );
}

/** One curve. `dash` and `width` tell it apart where colour cannot. */
export function curve(options: {
  readonly label: string;
  readonly points: Point[];
  readonly colour: string;
  readonly width: number;
  readonly dash?: number[];
  readonly axis?: string;
  readonly fill?: ChartDataset<'line'>['fill'];
  readonly order?: number;
}): ChartDataset<'line', Point[]> {
  return {
    label: options.label,
    data: options.points,
    borderColor: options.colour,
    backgroundColor: options.colour,
    borderWidth: options.width,
    borderDash: options.dash ?? [],
    pointRadius: 0,
    tension: 0,
    spanGaps: false,
    yAxisID: options.axis ?? 'y',
    fill: options.fill ?? false,
    order: options.order ?? 0,
  };
}

/** Envelope of a thinned trace: its upper edge carries the label, its lower edge fills up to it. */
export function envelope(options: {
  readonly label: string;
  readonly seconds: Float64Array;
  readonly low: Float64Array;
  readonly high: Float64Array;
  readonly colour: string;
  readonly order: number;
}): ChartDataset<'line', Point[]>[] {
  const { label, colour, order, seconds } = options;
  const points = (values: Float64Array) => columns(seconds, values);
  return [
    curve({ label, points: points(options.high), colour, width: 1, order }),
    curve({ label: NAMELESS, points: points(options.low), colour, width: 1, order, fill: '-1' }),
  ];
}

/** Points of thinned columns; one alone between gaps becomes a short bar, as a curve of one point is not drawn. */
function columns(seconds: Float64Array, values: Float64Array): Point[] {
  const half = seconds.length > 1 ? (seconds[1] - seconds[0]) / 2 : 0;
  const missing = (i: number) => i < 0 || i >= values.length || Number.isNaN(values[i]);
  return Array.from(values).flatMap((y, i) => {
    const alone = !missing(i) && missing(i - 1) && missing(i + 1);
    const x = seconds[i];
    return alone
      ? [
          { x: x - half, y },
          { x: x + half, y },
        ]
      : [{ x, y }];
  });
}

/** Paints the paper; the drawing library's own option breaks a second size in one bundle. */
function background(): Plugin<'line'> {
  return {
    id: 'paper',
    beforeDraw({ ctx, width, height }) {
      ctx.save();
      ctx.fillStyle = COLOURS.paper;
      ctx.fillRect(0, 0, width, height);
      ctx.restore();
    },
  };
}
