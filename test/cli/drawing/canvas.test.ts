import Renderer from 'chartjs-node-canvas';
import { describe, expect, it } from 'vitest';

const chart = { type: 'line' as const, data: { labels: ['a', 'b'], datasets: [{ label: 'rising', data: [1, 2] }] } };

describe('the stand-in for canvas, as chartjs-node-canvas uses it', () => {
  it('draws a PNG of the size asked for', async () => {
    const png = await new Renderer.ChartJSNodeCanvas({ width: 320, height: 200 }).renderToBuffer(chart);
    // Signature and header chunk: PNG specification, 3rd edition, 5.2 and 11.2.1.
    expect([...png.subarray(0, 8)]).toEqual([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]);
    expect([png.readUInt32BE(16), png.readUInt32BE(20)]).toEqual([320, 200]);
  });

  it('hands out an SVG as its text', () => {
    const svg = new Renderer.ChartJSNodeCanvas({ width: 320, height: 200, type: 'svg' }).renderToBufferSync(
      chart,
      'image/svg+xml',
    );
    expect(svg.toString()).toMatch(/<svg[^>]* width="320"[^>]* height="200"/);
    expect(svg.toString()).toContain('</svg>');
  });
});
