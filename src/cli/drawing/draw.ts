import { createRequire } from 'node:module';
import type { Plugin } from 'chart.js';
import { ChartJSNodeCanvas } from 'chartjs-node-canvas';
import { FONT_FAMILY } from '../../report/axis.ts';
import type { ChartSpec } from '../../report/chart-spec.ts';
import { type Pixels, palettePng } from './palette-png.ts';

/** Dots per pixel of the page: crisp on fine screens and on paper, at an acceptable size. */
const SCALE = 1.5;

const renderers = new Map<string, ChartJSNodeCanvas>();

/** Draws pictures as PNG, by id. One renderer per size is kept, as making one costs more than drawing. */
export async function drawPictures(specs: readonly ChartSpec[]): Promise<Map<string, Buffer>> {
  const pictures = new Map<string, Buffer>();
  for (const spec of specs) pictures.set(spec.id, await draw(spec));
  return pictures;
}

async function draw({ widthPx, heightPx, config }: ChartSpec): Promise<Buffer> {
  const taken: Pixels[] = [];
  const scaled = {
    ...config,
    options: { ...config.options, devicePixelRatio: SCALE },
    plugins: [...(config.plugins ?? []), taker(taken)],
  };
  const configuration = scaled as Parameters<ChartJSNodeCanvas['renderToBuffer']>[0];
  // Only the pixels are wanted: the renderer's PNG, in full colour, makes reports too large to mail, and its JPEG is made sooner.
  await rendererOf(widthPx, heightPx).renderToBuffer(configuration, 'image/jpeg');
  return palettePng(taken[taken.length - 1]);
}

/** Takes the pixels of the finished picture. */
function taker(taken: Pixels[]): Plugin<'line'> {
  return {
    id: 'taker',
    afterRender({ ctx }) {
      taken.push(ctx.getImageData(0, 0, ctx.canvas.width, ctx.canvas.height));
    },
  };
}

function rendererOf(width: number, height: number): ChartJSNodeCanvas {
  const key = `${width}×${height}`;
  const present = renderers.get(key);
  if (present) return present;
  const made = new ChartJSNodeCanvas({ width, height });
  registerFonts(made);
  renderers.set(key, made);
  return made;
}

/** The font comes with the program, since a machine without any would draw no text at all. */
function registerFonts(renderer: ChartJSNodeCanvas): void {
  const require = createRequire(import.meta.url);
  for (const weight of ['400', '700'])
    renderer.registerFont(require.resolve(`@fontsource/dejavu-sans/files/dejavu-sans-latin-${weight}-normal.woff2`), {
      family: FONT_FAMILY,
      weight,
    });
}
