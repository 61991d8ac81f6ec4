import { beforeAll, describe, expect, it } from 'vitest';
import { study } from '../../src/core/study.ts';
import type { Study } from '../../src/core/study-result.ts';
import type { Point } from '../../src/report/chart-spec.ts';
import { reportCharts } from '../../src/report/charts.ts';
import { renderReport } from '../../src/report/html.ts';
import { spectrumChart } from '../../src/report/spectrum-chart.ts';
import { overviewChart } from '../../src/report/trace-charts.ts';
import { madeRecording } from '../made-recording.ts';

const HOSTILE = '<script>alert(1)</script>"onload=\'=cmd|';
const PIXEL = 'data:image/png;base64,iVBORw0KGgo=';
const SETTINGS = { droopDb: 0.5, rejectionDb: 20, keepHz: null, rejectHz: null, channels: null, rateHz: null };
const CONTEXT = { commandLine: `quietcorner advise ${HOSTILE}`, madeAt: '2026-01-01T00:00:00Z' };

function uniform(start: number): () => number {
  let state = start;
  return () => {
    state = (16807 * state) % 2147483647;
    return state / 2147483647 - 0.5;
  };
}

/** One channel with a line at 20 Hz, 100 Hz sampled; in use it moves below 1 Hz, with a gap and one lone peak. */
async function madeStudy(withLine: boolean, rejectionDb = 20): Promise<Study> {
  const draw = uniform(77);
  const noise = (i: number) => draw() + (withLine ? Math.sin((2 * Math.PI * 30 * i) / 100) : 0);
  const quiet = Float64Array.from({ length: 12000 }, (_, i) => noise(i));
  const moving = Float64Array.from({ length: 12000 }, (_, i) => noise(i) + 5 * Math.sin(i / 40) + 3 * Math.sin(i / 17));
  moving[7001] = 99;
  const options = { rateHz: 100, channels: [{ name: HOSTILE, unit: HOSTILE }], file: `${HOSTILE}.csv` };
  const active = madeRecording({
    ...options,
    runs: [
      { startSeconds: 0, samples: [moving.slice(0, 8000)] },
      { startSeconds: 200, samples: [moving.slice(8000)] },
    ],
  });
  const made = { ...options, runs: [{ startSeconds: 0, samples: [quiet] }] };
  return study({ quiet: madeRecording(made), active, settings: { ...SETTINGS, rejectionDb }, version: '0.0.0' });
}

const pagesOf = (found: Study) =>
  renderReport(
    found,
    reportCharts(found).map(({ id }) => ({ id, png: PIXEL })),
    CONTEXT,
  );

/** The last column of the rivals. */
const limitsOf = (page: string) =>
  [...page.matchAll(/<td class="text">((?:chosen, )?(?:keeps|misses)[^<]*)</g)].map((match) => match[1]);

describe('the report', () => {
  let found: Study;
  let page: string;
  beforeAll(async () => {
    found = await madeStudy(true);
    page = pagesOf(found);
  });

  it('holds no script and no address, under a policy that forbids every request', () => {
    expect(page).not.toMatch(/<script/i);
    expect(page).not.toMatch(/https?:\/\//);
    expect(page).toContain(`http-equiv="Content-Security-Policy" content="default-src &#39;none&#39;; img-src data:`);
  });

  it('shows hostile names as text', () => {
    expect(page).toContain('&lt;script&gt;alert(1)&lt;/script&gt;&quot;onload=&#39;=cmd|');
    expect(page).not.toMatch(/<[^>]*onload=(?!&)[^&"]*>/);
  });

  it('comes in the order of what an engineer asks', () => {
    const headings = [...page.matchAll(/<h2[^>]*>([^<]+)</g)].map((match) => match[1]);
    expect(headings).toEqual([
      'Which filter',
      'Why, and what it costs',
      'Before and after',
      'Spectra, keep band and noise lines',
      'Rivals',
      'Health of the recordings',
      'Cautions',
      'How to reproduce it',
      'Signed',
    ]);
  });

  it('gives every picture a text with figures', () => {
    const texts = [...page.matchAll(/<img [^>]*alt="([^"]+)"/g)].map((match) => match[1]);
    expect(texts).toHaveLength(reportCharts(found).length);
    for (const text of texts) expect(text).toMatch(/\d/);
  });

  it('says how to repeat it', () => {
    expect(page).toContain(found.quiet.sha256);
    expect(page).toContain('2026-01-01T00:00:00Z');
    expect(page).toContain('Quietcorner 0.0.0');
  });

  it('always stands by its cautions', () => {
    for (const word of [
      'control or protection loop',
      'alarm',
      'Mains-connected and medical',
      'local codes',
      'qualified person',
    ])
      expect(page).toContain(word);
  });

  it('marks the chosen rival and no other', () => {
    expect(page.match(/<tr class="chosen">/g)).toHaveLength(1);
  });

  it('puts rivals that keep every limit first, and says by how much the others miss', async () => {
    const some = await madeStudy(true, 50);
    const missing = some.channels[0].rivals.filter((rival) => rival.fails.length > 0);
    const rows = limitsOf(pagesOf(some));
    expect(missing.length).toBeGreaterThan(0);
    expect(rows.filter((row) => /^misses .*by \d/.test(row))).toHaveLength(missing.length);
    expect(rows[0]).toBe('chosen, keeps all');
    expect(rows.findIndex((row) => row.startsWith('misses'))).toBe(rows.length - missing.length);
  });

  it('puts the chosen rival first where none keeps every limit', async () => {
    const none = pagesOf(await madeStudy(true, 400));
    expect(none).toContain('None keeps every limit');
    expect(limitsOf(none)[0]).toMatch(/^chosen, misses .*rejection by \d/);
  });

  it('refuses to leave a picture out', () => {
    expect(() => renderReport(found, [], CONTEXT)).toThrow(/picture/);
  });

  it('keeps a one-sample peak in the overview, and breaks the curve in the gap', () => {
    const [overview] = reportCharts(found);
    const points = overview.config.data.datasets[0].data as unknown as Point[];
    expect(Math.max(...points.map(({ y }) => y).filter((y) => !Number.isNaN(y)))).toBe(99);
    const inGap = points.filter(({ x }) => x > 85 && x < 195);
    expect(inGap.length).toBeGreaterThan(100);
    expect(inGap.every(({ y }) => Number.isNaN(y))).toBe(true);
  });

  it('draws a column that stands alone between gaps as a bar', () => {
    const [channel] = found.channels;
    const alone = Float64Array.of(1, Number.NaN, 5, Number.NaN, 2, 2);
    const trace = { seconds: Float64Array.of(1, 2, 3, 4, 5, 6), low: alone, high: alone };
    const lonely = { ...channel, simulation: { ...channel.simulation, before: trace } };
    const points = overviewChart(lonely, 'a').config.data.datasets[0].data as unknown as Point[];
    expect(points.filter(({ y }) => y === 5).map(({ x }) => x)).toEqual([2.5, 3.5]);
    expect(points.filter(({ y }) => y === 2).map(({ x }) => x)).toEqual([5, 6]);
  });

  it('gives amplitude densities their unit, and long names room on the axes', () => {
    const [channel] = found.channels;
    const titleOf = (name: string, unit: string, draw: typeof overviewChart) => {
      const { config } = draw({ ...channel, channel: { name, unit, column: 2 } }, 'a');
      return (config.options?.scales?.['y'] as { title: { text: string } } | undefined)?.title.text;
    };
    expect(titleOf('a', 'm/s²', spectrumChart)).toBe('amplitude density, (m/s²)/√Hz');
    expect(titleOf('a', 'V', spectrumChart)).toBe('amplitude density, V/√Hz');
    expect(titleOf('a', '', spectrumChart)).toBe('amplitude density, 1/√Hz');
    expect(titleOf('sway_x', 'm/s²', overviewChart)).toBe('sway_x, m/s²');
    expect(titleOf('raw_acceleration_x_gs', 'g', overviewChart)).toBe('raw_accel…tion_x_gs, g');
    expect(titleOf('n'.repeat(99), 'u'.repeat(99), overviewChart)).toHaveLength(22);
  });

  it('names the strongest lines beside a picture of many', () => {
    const [channel] = found.channels;
    const lines = Array.from({ length: 30 }, (_, i) => ({ ...channel.lines[0], frequencyHz: i + 1, amplitude: i + 1 }));
    const { description } = spectrumChart({ ...channel, lines }, 'a');
    expect(description).toContain('30.0 Hz at 30.0 ');
    expect(description).toContain('and 20 weaker');
    expect(description).not.toMatch(/\b3\.00 Hz at/);
  });

  it('says where the quiet recording was used, which jitter matters, and what mains could have folded', () => {
    const [channel] = found.channels;
    const quietPart = { usedSeconds: 9, totalSeconds: 12, stretches: [{ fromSeconds: 1, toSeconds: 10 }] };
    const line = { ...channel.lines[0], frequencyHz: 50, foldedFrom: [{ frequencyHz: 150, mains: 'mains 50 Hz × 3' }] };
    const odd = {
      ...found,
      quiet: { ...found.quiet, jitterSeconds: 1e-9, notes: [{ severity: 'warning', text: 'loud <b>' }] },
      active: { ...found.active, jitterSeconds: 1e-3 },
      channels: [{ ...channel, quietPart, lines: [line], lineGains: [channel.lineGains[0]] }],
    } as Study;
    const text = pagesOf(odd).replaceAll('\u00a0', ' ');
    expect(text).toContain('9.00 s of 12.0 s of the quiet recording carry the noise figures (1.00 s to 10.0 s)');
    expect(text).toContain('show no jitter (under 0.001 % of a period)');
    expect(text).toContain('Jitter of the stamps 1.00 ms (10 % of a period)');
    expect(text).toMatch(/Lines that mains could have folded into: 50.00 Hz of .* \(mains 50 Hz × 3 at 150.0 Hz\)/);
    expect(text).toMatch(/Mind this:<\/strong> .*loud &lt;b&gt;/);
  });

  it('prints sensibly where there is no noise line', async () => {
    const without = pagesOf(await madeStudy(false));
    expect(without).toContain('no line');
    expect(without).not.toMatch(/NaN|undefined|null|Infinity/);
    expect(page).not.toMatch(/NaN|undefined|null|Infinity/);
  });

  it('prints sensibly where signal and noise are inseparable', async () => {
    const draw = uniform(5);
    const recording = () =>
      madeRecording({
        rateHz: 100,
        channels: [{ name: 'a', unit: 'g' }],
        runs: [{ startSeconds: 0, samples: [Float64Array.from({ length: 5000 }, draw)] }],
      });
    const nothing = pagesOf(
      await study({ quiet: recording(), active: recording(), settings: SETTINGS, version: '0.0.0' }),
    );
    expect(nothing).toContain('no corner can be defended');
    expect(nothing).not.toMatch(/NaN|undefined|null|Infinity/);
  });
});
