import { createHash } from 'node:crypto';
import { mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { truth } from '../../samples/make-samples.ts';
import { buildProgram, quietcorner, root } from './program.ts';

/** One call of the bundled program on the sample pair with everything it can write. */
describe('advise --filtered --json on the sample pair', () => {
  let folder: string;
  let document: {
    schema: string;
    quiet: { sha256: string; rows: number; gaps: unknown[] };
    channels: { name: string; advice: { verdict: string; cornerHz: number; cornerRangeHz: number[] } }[];
    files: { report: string; plan: string; filtered: string };
  };

  beforeAll(async () => {
    await buildProgram();
    folder = await mkdtemp(join(tmpdir(), 'quietcorner-'));
    const words = [
      'advise',
      'samples/cabin-quiet.csv',
      'samples/cabin-active.csv',
      '--filtered',
      '--json',
      '--out',
      folder,
    ];
    const { stdout } = await quietcorner(root, ...words);
    document = JSON.parse(stdout);
  }, 60_000);

  afterAll(() => rm(folder, { recursive: true, force: true }));

  it('prints one JSON document and nothing else, and names the files it wrote', async () => {
    expect(document.schema).toBe('quietcorner/study@1');
    expect((await readdir(folder)).sort()).toEqual([
      'cabin-active.filtered.csv',
      'cabin-active.plan.json',
      'cabin-active.report.html',
    ]);
    expect(Object.values(document.files).every((path) => path.startsWith(folder))).toBe(true);
  });

  it('tells the SHA-256 of the very files', async () => {
    const bytes = await readFile(join(root, 'samples', 'cabin-quiet.csv'));
    expect(document.quiet.sha256).toBe(createHash('sha256').update(bytes).digest('hex'));
    expect(document.quiet).toMatchObject({ rows: truth.quietSeconds * truth.rateHz, gaps: [] });
  });

  it('writes a plan whose hash is that of its own content', async () => {
    const { hash, ...body } = JSON.parse(await readFile(document.files.plan, 'utf8'));
    expect(hash).toBe(createHash('sha256').update(JSON.stringify(body)).digest('hex'));
    expect(body.schema).toBe('quietcorner/plan@1');
    body.channels.forEach(
      (channel: { filter: { cornerHz: number }; discrete: { sections: { b0: number }[] } }, i: number) => {
        expect(channel.filter.cornerHz).toBe(document.channels[i].advice.cornerHz);
        expect(channel.discrete.sections.length).toBeGreaterThan(0);
      },
    );
  });

  it('writes time, raw and filtered values of every sample, starting without a thump', async () => {
    const [header, ...rows] = (await readFile(document.files.filtered, 'utf8')).trimEnd().split('\n');
    const named = truth.channels.flatMap(({ name, unit }) => [`${name} [${unit}]`, `${name} filtered [${unit}]`]);
    expect(header).toBe(['time [s]', ...named].join(','));
    expect(rows).toHaveLength(truth.activeSeconds * truth.rateHz);
    const logged = (await readFile(join(root, 'samples', 'cabin-active.csv'), 'utf8')).trimEnd().split('\n').slice(3);
    for (const row of [0, 1, 777, rows.length - 1]) {
      const values = rows[row].split(',').map(Number);
      const raw = logged[row].split(',').map(Number);
      expect(values).toHaveLength(7);
      expect(values[0]).toBeCloseTo(raw[0], 9);
      expect([values[1], values[3], values[5]]).toEqual(raw.slice(1));
      for (const value of values) expect(Number.isFinite(value)).toBe(true);
    }
    const first = rows[0].split(',').map(Number);
    expect([first[2], first[4], first[6]]).toEqual([first[1], first[3], first[5]]);
  });

  it('quietens the filtered values and keeps their mean', async () => {
    const rows = (await readFile(document.files.filtered, 'utf8')).trimEnd().split('\n').slice(1);
    const column = (index: number) => rows.map((row) => Number(row.split(',')[index]));
    const mean = (values: number[]) => values.reduce((sum, value) => sum + value, 0) / values.length;
    const roughness = (values: number[]) =>
      Math.sqrt(mean(values.slice(2).map((value, i) => (value - 2 * values[i + 1] + values[i]) ** 2)));
    truth.channels.forEach((_, i) => {
      const raw = column(1 + 2 * i);
      const filtered = column(2 + 2 * i);
      expect(Math.abs(mean(filtered) - mean(raw))).toBeLessThan(2e-3);
      expect(roughness(filtered)).toBeLessThan(0.1 * roughness(raw));
    });
  });

  it('leaves the same report but for its pictures and time when run again', async () => {
    const again = join(folder, 'again');
    const words = ['advise', 'samples/cabin-quiet.csv', 'samples/cabin-active.csv', '--out', again];
    await quietcorner(root, ...words);
    const figures = async (path: string) =>
      (await readFile(path, 'utf8')).replace(/data:image\/png;base64,[^"]+/g, '').replace(/<code>[^<]*<\/code>/g, '');
    expect(await figures(join(again, 'cabin-active.report.html'))).toBe(await figures(document.files.report));
  });
});
