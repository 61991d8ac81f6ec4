import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { mkdtemp, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { expect, test } from 'vitest';

const outputFiles = pathToFileURL(join(import.meta.dirname, '../../src/cli/output-files.ts')).href;

test.each([
  ['SIGINT', 130],
  ['SIGTERM', 143],
] as const)(
  '%s leaves no partial file behind and ends with exit code %i',
  async (signal, code) => {
    const folder = await mkdtemp(join(tmpdir(), 'quietcorner-'));
    try {
      const program = `
      import { GrowingFile } from ${JSON.stringify(outputFiles)};
      await new GrowingFile('growing.csv').write('half a f');
      process.stdout.write('begun');
      setInterval(() => {}, 1000);`;
      const child = spawn('node', ['--import', import.meta.resolve('tsx'), '--input-type=module', '-e', program], {
        cwd: folder,
        stdio: ['ignore', 'pipe', 'inherit'],
      });
      const ended = once(child, 'exit');
      await once(child.stdout, 'data');
      expect(await readdir(folder)).toHaveLength(1);
      child.kill(signal);
      expect(await ended).toEqual([code, null]);
      expect(await readdir(folder)).toEqual([]);
    } finally {
      await rm(folder, { recursive: true });
    }
  },
  30_000,
);
