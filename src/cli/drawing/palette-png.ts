import { promisify } from 'node:util';
import { deflate } from 'node:zlib';

const squeeze = promisify(deflate);

/** Colours that one byte tells apart. */
const PALETTE_SIZE = 256;
/** Colours are counted in cells of 8 × 8 × 8 levels. */
const CELL_BITS = 5;
const CELLS = 1 << (3 * CELL_BITS);
const SIGNATURE = Buffer.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a);

/** Pixels row by row from the top, four bytes each: red, green, blue, opacity. */
export interface Pixels {
  readonly width: number;
  readonly height: number;
  readonly data: Uint8ClampedArray;
}

/**
 * Writes opaque pixels as a PNG with a palette of at most 256 colours: less than half the size of one in full colour, as a
 * chart has few colours and their blends. Source: Portable Network Graphics (PNG) Specification, 3rd edition, W3C 2025,
 * clauses 5.3 (chunks), 11.2 (IHDR, PLTE, IDAT, IEND) and 12.7 (no filter on indexed rows).
 */
export async function palettePng(pixels: Pixels): Promise<Buffer> {
  const { width, height, data } = pixels;
  const { colours, indexOfCell } = paletteOf(data);
  const rows = Buffer.alloc(height * (width + 1));
  for (let y = 0, at = 0, from = 0; y < height; y++) {
    rows[at++] = 0;
    for (let x = 0; x < width; x++, from += 4) rows[at++] = indexOfCell[cellOf(data, from)];
  }
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  // Bit depth 8, colour type 3: indexed.
  header.set([8, 3], 8);
  return Buffer.concat([
    SIGNATURE,
    chunk('IHDR', header),
    chunk('PLTE', colours),
    chunk('IDAT', await squeeze(rows)),
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

/** The mean colours of the fullest cells, and for each cell the palette's nearest colour. */
function paletteOf(data: Uint8ClampedArray): { colours: Buffer; indexOfCell: Uint8Array } {
  const counts = new Uint32Array(CELLS);
  const sums = new Float64Array(3 * CELLS);
  for (let from = 0; from < data.length; from += 4) {
    const cell = cellOf(data, from);
    counts[cell]++;
    for (let part = 0; part < 3; part++) sums[3 * cell + part] += data[from + part];
  }
  const used = Array.from(counts.keys()).filter((cell) => counts[cell] > 0);
  const fullest = used.sort((a, b) => counts[b] - counts[a]).slice(0, PALETTE_SIZE);
  const mean = (cell: number) => [0, 1, 2].map((part) => Math.round(sums[3 * cell + part] / counts[cell]));
  const colours = Buffer.from(fullest.flatMap(mean));
  const indexOfCell = new Uint8Array(CELLS);
  for (const cell of used) indexOfCell[cell] = nearest(colours, mean(cell));
  return { colours, indexOfCell };
}

function cellOf(data: Uint8ClampedArray, from: number): number {
  return ((data[from] >> 3) << (2 * CELL_BITS)) | ((data[from + 1] >> 3) << CELL_BITS) | (data[from + 2] >> 3);
}

function nearest(colours: Buffer, wanted: readonly number[]): number {
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let index = 0; 3 * index < colours.length; index++) {
    let distance = 0;
    for (let part = 0; part < 3; part++) distance += (colours[3 * index + part] - wanted[part]) ** 2;
    if (distance < least) {
      least = distance;
      best = index;
    }
  }
  return best;
}

function chunk(type: string, content: Buffer): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), content]);
  const length = Buffer.alloc(4);
  length.writeUInt32BE(content.length);
  const check = Buffer.alloc(4);
  check.writeUInt32BE(crc32(body));
  return Buffer.concat([length, body, check]);
}

/** Cyclic redundancy check of a chunk: ibidem, annex D. Node's own came only with 20.15. */
function crc32(bytes: Buffer): number {
  let crc = 0xffffffff;
  for (const byte of bytes) crc = CRC_TABLE[(crc ^ byte) & 0xff] ^ (crc >>> 8);
  return (crc ^ 0xffffffff) >>> 0;
}

const CRC_TABLE = Uint32Array.from({ length: 256 }, (_, byte) => {
  let crc = byte;
  for (let bit = 0; bit < 8; bit++) crc = crc & 1 ? 0xedb88320 ^ (crc >>> 1) : crc >>> 1;
  return crc;
});
