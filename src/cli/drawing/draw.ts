import { createRequire } from 'node:module';
import { ChartJSNodeCanvas } from 'chartjs-node-canvas';
import { FONT_FAMILY } from '../../report/axis.ts';
import type { ChartSpec } from '../../report/chart-spec.ts';

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
  const scaled = { ...config, options: { ...config.options, devicePixelRatio: SCALE } };
  return rendererOf(widthPx, heightPx).renderToBuffer(scaled as Parameters<ChartJSNodeCanvas['renderToBuffer']>[0]);
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
