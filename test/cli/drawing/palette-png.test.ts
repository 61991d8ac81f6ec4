import { createCanvas, loadImage } from '@napi-rs/canvas';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { type Pixels, palettePng } from '../../../src/cli/drawing/palette-png.ts';

/** Read back by the drawing library's own decoder, which checks every chunk. */
async function readBack(png: Buffer): Promise<Pixels> {
  const image = await loadImage(png);
  const context = createCanvas(image.width, image.height).getContext('2d');
  context.drawImage(image, 0, 0);
  return context.getImageData(0, 0, image.width, image.height);
}

function pixels(width: number, colours: readonly (readonly [number, number, number])[]): Pixels {
  const data = Uint8ClampedArray.from(colours.flatMap(([r, g, b]) => [r, g, b, 255]));
  return { width, height: colours.length / width, data };
}

const level = fc.integer({ min: 0, max: 255 });

describe('palettePng', () => {
  it('gives every pixel back within its cell of eight levels, up to 256 colours', async () => {
    const rows = fc.array(fc.array(fc.tuple(level, level, level), { minLength: 7, maxLength: 7 }), {
      minLength: 1,
      maxLength: 30,
    });
    await fc.assert(
      fc.asyncProperty(rows, async (picture) => {
        const made = pixels(7, picture.flat());
        const back = await readBack(await palettePng(made));
        expect([back.width, back.height]).toEqual([7, picture.length]);
        for (let i = 0; i < made.data.length; i++) expect(Math.abs(back.data[i] - made.data[i])).toBeLessThan(8);
      }),
      { numRuns: 40 },
    );
  });

  it('keeps few colours exactly', async () => {
    const made = pixels(
      40,
      Array.from({ length: 1600 }, (_, i) =>
        i % 3 === 0 ? ([255, 255, 255] as const) : i % 3 === 1 ? ([0, 114, 178] as const) : ([213, 94, 0] as const),
      ),
    );
    expect((await readBack(await palettePng(made))).data).toEqual(made.data);
  });

  it('gives rare colours of a crowded picture the nearest of the frequent ones', async () => {
    const paper = Array.from({ length: 4096 }, () => [255, 255, 255] as const);
    const crowd = Array.from(
      { length: 4096 },
      (_, i) => [(i % 16) * 16, (Math.floor(i / 16) % 16) * 16, Math.floor(i / 256) * 16] as const,
    );
    const made = pixels(64, [...paper, ...crowd]);
    const png = await palettePng(made);
    const { data } = await readBack(png);
    // Palette of 256 entries at the most: PNG specification, 11.2.2.
    expect(png.readUInt32BE(png.indexOf('PLTE') - 4)).toBe(768);
    expect([...data.slice(0, 4)]).toEqual([255, 255, 255, 255]);
    const colours = new Set(Array.from({ length: 8192 }, (_, i) => data.slice(4 * i, 4 * i + 3).join()));
    expect(colours.size).toBeLessThanOrEqual(256);
  });
});
