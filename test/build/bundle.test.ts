import { execFile } from 'node:child_process';
import { cp, mkdir, mkdtemp, readdir, readFile, rm, stat, symlink } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { promisify } from 'node:util';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import manifest from '../../package.json' with { type: 'json' };

const run = promisify(execFile);
const root = fileURLToPath(new URL('../..', import.meta.url));

/** The program as somebody has it who installed the package: dist and the run-time dependencies, nothing of ours around it. */
let folder: string;

beforeAll(async () => {
  await run('node', ['src/build/bundle.mjs'], { cwd: root });
  folder = await mkdtemp(join(tmpdir(), 'quietcorner-installed-'));
  await cp(join(root, 'dist'), join(folder, 'dist'), { recursive: true });
  await cp(join(root, 'package.json'), join(folder, 'package.json'));
  for (const name of Object.keys(manifest.dependencies)) {
    const place = join(folder, 'node_modules', name);
    await mkdir(dirname(place), { recursive: true });
    await symlink(join(root, 'node_modules', name), place);
  }
}, 60_000);

afterAll(() => rm(folder, { recursive: true, force: true }));

describe('the bundle', () => {
  it('is a program that can be called by its name', async () => {
    const program = join(folder, 'dist', 'quietcorner.js');
    expect((await stat(program)).mode & 0o111).toBe(0o111);
    expect((await run(program, ['--version'])).stdout.trim()).toBe(manifest.version);
  });

  it('does the main job with nothing installed but its run-time dependencies', async () => {
    const pair = ['cabin-quiet.csv', 'cabin-active.csv'].map((name) => join(root, 'samples', name));
    await run('node', [join(folder, 'dist', 'quietcorner.js'), 'advise', ...pair, '--out', 'made'], { cwd: folder });
    const made = await readdir(join(folder, 'made'));
    expect(made.sort()).toEqual(['cabin-active.plan.json', 'cabin-active.report.html']);
    expect(await readFile(join(folder, 'made', 'cabin-active.report.html'), 'utf8')).toContain(
      'data:image/png;base64,iVBORw0KGgo',
    );
  });

  it('carries the licences of what it carries', async () => {
    const licences = await readFile(join(folder, 'dist', 'LICENSES.txt'), 'utf8');
    for (const name of ['chart.js', 'commander', 'fft.js', 'papaparse']) {
      expect(licences).toContain(`\n${name} `);
    }
  });

  it('makes the same files from the same sources', async () => {
    const files = async () => (await readdir(join(root, 'dist'), { recursive: true })).sort();
    const before = await files();
    await run('node', ['src/build/bundle.mjs'], { cwd: root });
    expect(await files()).toEqual(before);
  });
});
