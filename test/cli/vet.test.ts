import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { seededRandom } from '../campaign/seeded-random.ts';
import { buildProgram, quietcorner, root } from './program.ts';

const sample = (name: string) => join(root, 'samples', name);

let folder: string;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'quietcorner-vet-'));
  await buildProgram();
}, 60_000);

afterAll(() => rm(folder, { recursive: true, force: true }));

const vet = (...words: string[]) => quietcorner(root, 'vet', ...words);

/** Noise that clips at 2, is stuck for 200 samples from 10 s on, and has a spike at 30 s. */
async function faulty(): Promise<string> {
  const random = seededRandom(6);
  const rows = Array.from({ length: 5000 }, (_, i) => {
    const value = i >= 1000 && i < 1200 ? 0.77 : i === 3000 ? -60 : Math.min(2, random.normal());
    return `${(i / 100).toFixed(2)},${value.toFixed(3)},${random.normal().toFixed(3)}\n`;
  });
  const path = join(folder, 'faulty.csv');
  await writeFile(path, `time [s],load [N],other [N]\n${rows.join('')}`);
  return path;
}

describe('vet', () => {
  it('prints what was understood, the figures and the findings, the worst first', async () => {
    const outcome = await vet(await faulty());
    expect(outcome).toMatchObject({ code: 0, stderr: '' });
    const { stdout } = outcome;
    expect(stdout).toContain('5,000 rows, 100.0 Hz, 50.0 s, comma-separated');
    expect(stdout).toMatch(/load +−60\.000 N +2\.0000 N +0\.9\d+ N +0\.00100 N/);
    const words = stdout.replace(/\s+/g, ' ');
    expect(words).toMatch(
      /warning load: clipping 2\.5 % of the samples.* at the highest value, 2\.000 N.* Effect: .* Do: /,
    );
    expect(words).toMatch(/warning load: stuck values .*: 200 samples at 0\.7700 N, from 10\.0 s/);
    expect(words).toMatch(/warning load: spikes One spike, −\d\d\.\d N at 30\.0 s.* It spreads .* and raises/);
    expect(words).toMatch(/warning load: spikes .* note load: not stationary .* 3 warnings, 1 note\. $/);
    expect(Math.max(...stdout.split('\n').map((line) => line.length))).toBeLessThanOrEqual(100);
  });

  it('has no warning for the sample pair', async () => {
    const { code, stdout, stderr } = await vet(sample('cabin-quiet.csv'), sample('cabin-active.csv'));
    expect({ code, stderr }).toEqual({ code: 0, stderr: '' });
    expect(stdout).not.toMatch(/warning|refusal/);
    expect(stdout.match(/mains\n/g)?.length).toBeGreaterThan(2);
  });

  it('prints one JSON document with a refusal for a file that cannot be used, vets the others, and exits with 3', async () => {
    const missing = join(folder, 'missing.csv');
    const path = await faulty();
    const { code, stdout, stderr } = await vet(missing, path, '--json', '--channel', 'load');
    expect(code).toBe(3);
    expect(stderr).toMatch(/^quietcorner: .*missing\.csv: there is no such file.*\n$/);
    const document = JSON.parse(stdout);
    expect(document).toMatchObject({ schema: 'quietcorner/health@1', version: expect.stringMatching(/^\d+\.\d+/) });
    expect(document.files).toHaveLength(2);
    const [bad, good] = document.files;
    expect(Object.keys(bad)).toEqual(Object.keys(good));
    expect(bad).toMatchObject({
      file: missing,
      sha256: null,
      findings: [{ kind: 'unreadable', severity: 'refusal', channel: null }],
    });
    expect(good).toMatchObject({ file: path, rows: 5000, rateHz: 100, sha256: expect.stringMatching(/^[\da-f]{64}$/) });
    expect(good.channels).toEqual([expect.objectContaining({ name: 'load', unit: 'N', step: 0.001 })]);
    expect(good.findings.map(({ kind }: { kind: string }) => kind)).toEqual(
      expect.arrayContaining(['clipping', 'stuck values', 'spikes']),
    );
    for (const finding of good.findings)
      expect(Object.keys(finding)).toEqual(['kind', 'severity', 'channel', 'what', 'effect', 'advice']);
  });

  it('takes a rate for a file without time', async () => {
    const random = seededRandom(7);
    const path = join(folder, 'untimed.csv');
    await writeFile(path, `a\n${Array.from({ length: 500 }, () => `${random.normal().toFixed(4)}\n`).join('')}`);
    expect((await vet(path)).code).toBe(3);
    const { code, stdout } = await vet(path, '--rate', '250');
    expect(code).toBe(0);
    expect(stdout).toContain('250.0 Hz, 2.00 s');
    expect(stdout).toContain('Nothing wrong was found.');
  });

  it.each([
    [[], /missing required argument/],
    [[sample('cabin-quiet.csv'), '--channel', 'nope'], /no channel "nope" in .*choose from "sway_x"/],
    [[sample('cabin-quiet.csv'), '--rate', '-1'], /--rate needs a number above zero/],
    [[sample('cabin-quiet.csv'), '--colour', 'red'], /unknown option/],
  ])('takes %j for wrong use: exit 2', async (words, says) => {
    const outcome = await vet(...words);
    expect(outcome.stderr).toMatch(says);
    expect(outcome).toMatchObject({ code: 2, stdout: '' });
  });
});
