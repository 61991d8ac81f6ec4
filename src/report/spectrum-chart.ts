import type { Plugin } from 'chart.js';
import { corner, count, decibels, hertz, quantity } from '../core/figure.ts';
import { gainDb } from '../core/filter/response.ts';
import type { NoiseLine, Spectrum } from '../core/spectrum/spectrum.ts';
import type { ChannelStudy } from '../core/study-result.ts';
import { FONT_FAMILY, linearAxis, logarithmicAxis, TEXT_PX } from './axis.ts';
import { curve, curves } from './chart-base.ts';
import type { ChartSpec, Point } from './chart-spec.ts';
import { COLOURS } from './colours.ts';

/** Lowest gain drawn, dB. */
const LOWEST_GAIN_DB = -100;
/** Strongest lines that get a label; all get a tick. */
const LABELLED_LINES = 6;
/** Strongest lines that the text beside the picture names. */
const DESCRIBED_LINES = 10;

/** Spectra of both recordings and behind the filter, with keep band, noise lines, corner and the filter's gain over them. */
export function spectrumChart(study: ChannelStudy, id: string): ChartSpec {
  const { channel, quietSpectrum, activeSpectrum, filteredSpectrum, advice } = study;
  const minHz = Math.min(quietSpectrum.frequencyHz[0], activeSpectrum.frequencyHz[0]);
  const maxHz = Math.max(quietSpectrum.rateHz, activeSpectrum.rateHz) / 2;
  const range = amplitudeRange(study);
  return {
    id,
    title: `${channel.name}: spectra, and the filter's gain over them`,
    description: describe(study),
    widthPx: 1120,
    heightPx: 440,
    config: curves(
      [
        curve({
          label: 'active',
          points: points(activeSpectrum),
          colour: COLOURS.before,
          // Wider than what covers it, so that it shows on both sides.
          width: 4,
          order: 4,
        }),
        curve({
          label: 'quiet',
          points: points(quietSpectrum),
          colour: COLOURS.quiet,
          width: 1.5,
          order: 3,
        }),
        curve({
          label: 'noise floor',
          points: floorPoints(study),
          colour: COLOURS.floor,
          width: 1.5,
          dash: [2, 3],
          order: 2,
        }),
        curve({
          label: 'active, filtered',
          points: points(filteredSpectrum),
          colour: COLOURS.after,
          width: 2,
          order: 1,
        }),
        curve({
          label: 'gain (right)',
          points: gainPoints(study, minHz, maxHz),
          colour: COLOURS.gain,
          width: 1.5,
          dash: [9, 5],
          axis: 'gain',
          order: 0,
        }),
      ],
      {
        x: logarithmicAxis('bottom', 'frequency, Hz', { min: minHz, max: maxHz }),
        y: logarithmicAxis('left', `amplitude density, ${perRootHertz(channel.unit)}`, range),
        gain: linearAxis('right', 'gain, dB', { min: LOWEST_GAIN_DB, max: 10, grid: false }),
      },
      [marks(study, `corner ${corner(advice.cornerHz)}`)],
    ),
  };
}

function describe({ channel, lines, keep, advice }: ChannelStudy): string {
  const strongest = strongestOf(lines, DESCRIBED_LINES);
  const named = strongest.map((line) => `${hertz(line.frequencyHz, 3)} at ${quantity(line.amplitude, channel.unit)}`);
  if (lines.length > named.length) named.push(`and ${count(lines.length - named.length)} weaker`);
  const kept =
    keep.highHz > 0 ? `Keep band ${hertz(keep.lowHz)} to ${hertz(keep.highHz, 3)}` : 'No keep band was found';
  const rejected = advice.rejectionDb === null ? '' : `, rejection ${decibels(advice.rejectionDb)} at the first line`;
  return `Amplitude densities of quiet, active and filtered recording of ${channel.name} over frequency. ${kept}. Noise lines: ${named.length > 0 ? named.join('; ') : 'none'}. Corner ${corner(advice.cornerHz)}: droop ${decibels(advice.droopDb)}${rejected}.`;
}

function perRootHertz(unit: string): string {
  if (unit === '') return '1/√Hz';
  return unit.includes('/') ? `(${unit})/√Hz` : `${unit}/√Hz`;
}

function strongestOf(lines: readonly NoiseLine[], most: number): NoiseLine[] {
  return [...lines].sort((a, b) => b.amplitude - a.amplitude).slice(0, most);
}

/** What lies below the picture is clipped at its edge. */
function points({ frequencyHz, density }: Spectrum): Point[] {
  return Array.from(frequencyHz, (x, i) => ({ x, y: Math.sqrt(density[i]) }));
}

function floorPoints({ quietSpectrum, floorDensity }: ChannelStudy): Point[] {
  return points({ ...quietSpectrum, density: floorDensity });
}

function gainPoints({ advice }: ChannelStudy, minHz: number, maxHz: number): Point[] {
  const count = 240;
  return Array.from({ length: count }, (_, i) => {
    const x = minHz * (maxHz / minHz) ** (i / (count - 1));
    return { x, y: gainDb(advice, x) };
  });
}

/** Whole decades that hold both recordings, and of the filtered one as much as lies within two decades below. */
function amplitudeRange({ quietSpectrum, activeSpectrum }: ChannelStudy): { min: number; max: number } {
  const all = [...quietSpectrum.density, ...activeSpectrum.density].filter((density) => density > 0);
  const lowest = all.reduce((a, b) => Math.min(a, b), Number.POSITIVE_INFINITY);
  const highest = all.reduce((a, b) => Math.max(a, b), 0);
  return {
    min: 10 ** Math.floor(Math.log10(Math.sqrt(lowest)) - 1),
    max: 10 ** Math.ceil(Math.log10(Math.sqrt(highest))),
  };
}

/** Shades the keep band, marks the corner, and labels the noise lines along the upper edge. */
function marks(study: ChannelStudy, cornerLabel: string): Plugin<'line'> {
  const { keep, lines, advice } = study;
  const strongest = strongestOf(lines, LABELLED_LINES);
  return {
    id: 'marks',
    beforeDatasetsDraw({ ctx, chartArea, scales }) {
      const { x } = scales;
      if (x === undefined || keep.highHz <= 0) return;
      const left = keep.lowHz > 0 ? x.getPixelForValue(keep.lowHz) : chartArea.left;
      ctx.save();
      ctx.fillStyle = COLOURS.keep;
      ctx.fillRect(left, chartArea.top, x.getPixelForValue(keep.highHz) - left, chartArea.height);
      ctx.fillStyle = COLOURS.ink;
      ctx.font = `${TEXT_PX}px '${FONT_FAMILY}'`;
      ctx.fillText(`keep band to ${hertz(keep.highHz, 3)}`, left + 8, chartArea.bottom - 10);
      ctx.restore();
    },
    afterDatasetsDraw({ ctx, chartArea, scales }) {
      const { x } = scales;
      if (x === undefined) return;
      ctx.save();
      ctx.font = `${TEXT_PX}px '${FONT_FAMILY}'`;
      ctx.textAlign = 'center';
      let taken = Number.NEGATIVE_INFINITY;
      let row = 0;
      for (const line of [...lines].sort((a, b) => a.frequencyHz - b.frequencyHz)) {
        const at = x.getPixelForValue(line.frequencyHz);
        ctx.fillStyle = COLOURS.quiet;
        triangle(ctx, at, chartArea.top + 2);
        if (!strongest.includes(line)) continue;
        const label = hertz(line.frequencyHz, 3);
        row = at - taken < ctx.measureText(label).width + 10 ? (row + 1) % 3 : 0;
        taken = at;
        ctx.fillStyle = COLOURS.ink;
        ctx.fillText(label, at, chartArea.top + 26 + 17 * row);
      }
      const corner = x.getPixelForValue(advice.cornerHz);
      ctx.strokeStyle = COLOURS.ink;
      ctx.lineWidth = 1;
      ctx.setLineDash([1, 3]);
      ctx.beginPath();
      ctx.moveTo(corner, chartArea.top);
      ctx.lineTo(corner, chartArea.bottom);
      ctx.stroke();
      const fits = corner + 6 + ctx.measureText(cornerLabel).width < chartArea.right;
      ctx.textAlign = fits ? 'left' : 'right';
      ctx.fillStyle = COLOURS.ink;
      ctx.fillText(cornerLabel, fits ? corner + 6 : corner - 6, chartArea.bottom - 28);
      ctx.restore();
    },
  };
}

function triangle(ctx: CanvasRenderingContext2D, x: number, top: number): void {
  ctx.beginPath();
  ctx.moveTo(x - 5, top);
  ctx.lineTo(x + 5, top);
  ctx.lineTo(x, top + 8);
  ctx.closePath();
  ctx.fill();
}
