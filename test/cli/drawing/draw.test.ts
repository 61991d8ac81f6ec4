import { createCanvas, loadImage } from '@napi-rs/canvas';
import { describe, expect, it } from 'vitest';
import { drawPictures } from '../../../src/cli/drawing/draw.ts';
import { linearAxis } from '../../../src/report/axis.ts';
import { curve, curves } from '../../../src/report/chart-base.ts';
import type { ChartSpec, Point } from '../../../src/report/chart-spec.ts';
import { COLOURS } from '../../../src/report/colours.ts';

function chart(options: { id: string; points: Point[]; title?: string; width?: number; label?: string }): ChartSpec {
  const { id, points, title = 'time, s', width = 300, label = 'after' } = options;
  return {
    id,
    title: id,
    description: id,
    widthPx: width,
    heightPx: 200,
    config: curves([curve({ label, points, colour: COLOURS.after, width: 2 })], {
      x: linearAxis('bottom', title, { min: 0, max: 10 }),
      y: linearAxis('left', 'sway, g', { min: 0, max: 10 }),
    }),
  };
}

const flat = Array.from({ length: 11 }, (_, x) => ({ x, y: 5 }));

async function drawn(spec: ChartSpec) {
  const image = await loadImage((await drawPictures([spec])).get(spec.id) as Buffer);
  const context = createCanvas(image.width, image.height).getContext('2d');
  context.drawImage(image, 0, 0);
  const { data, width, height } = context.getImageData(0, 0, image.width, image.height);
  const wanted = [0x00, 0x72, 0xb2];
  /** Pixels of the curve's colour, as x and y. */
  const blue = Array.from({ length: width * height }, (_, i) => i)
    .filter((i) => wanted.every((part, k) => Math.abs(data[4 * i + k] - part) < 16))
    .map((i) => ({ x: i % width, y: Math.floor(i / width) }));
  return { data, width, height, blue };
}

describe('drawPictures', () => {
  it('draws each picture at one and a half dots per pixel, whatever the sizes and their order', async () => {
    const specs = [300, 520, 300, 520].map((width, i) => chart({ id: `p${i}`, points: flat, width }));
    const pictures = await drawPictures(specs);
    expect([...pictures.keys()]).toEqual(['p0', 'p1', 'p2', 'p3']);
    // Width and height stand behind the header chunk's name: PNG specification, 11.2.1.
    const sizes = [...pictures.values()].map((png) => [png.readUInt32BE(16), png.readUInt32BE(20)]);
    expect(sizes).toEqual([
      [450, 300],
      [780, 300],
      [450, 300],
      [780, 300],
    ]);
    expect(pictures.get('p2')).toEqual(pictures.get('p0'));
  });

  it('paints the paper', async () => {
    const { data } = await drawn(chart({ id: 'paper', points: [] }));
    expect([...data.slice(0, 4)]).toEqual([255, 255, 255, 255]);
  });

  it('draws text with the font it brings along, signs of our units among it', async () => {
    const pictureOf = async (title: string) => (await drawn(chart({ id: 'text', points: flat, title }))).data;
    const blank = await pictureOf(' ');
    for (const sign of ['s', 'µ', 'Ω', '√', '²', '≤', '−']) expect(await pictureOf(sign)).not.toEqual(blank);
    // A sign that the font lacks is drawn as an empty box: different signs would look the same.
    expect(await pictureOf('Ω')).not.toEqual(await pictureOf('√'));
  });

  it('breaks a curve where there is no value', async () => {
    const gap = flat.map(({ x, y }) => ({ x, y: x > 3 && x < 7 ? Number.NaN : y }));
    const unbroken = await drawn(chart({ id: 'whole', points: flat, label: '' }));
    const broken = await drawn(chart({ id: 'gap', points: gap, label: '' }));
    const across = ({ blue }: typeof broken) => new Set(blue.map(({ x }) => x)).size;
    expect(across(broken) / across(unbroken)).toBeCloseTo(0.6, 1);
  });
});
