import { mkdtemp, readdir, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildProgram, root, quietcorner as start } from './program.ts';

const quiet = join(root, 'samples', 'cabin-quiet.csv');
const active = join(root, 'samples', 'cabin-active.csv');

let folder: string;

beforeAll(async () => {
  await buildProgram();
  folder = await mkdtemp(join(tmpdir(), 'quietcorner-'));
}, 60_000);

afterAll(() => rm(folder, { recursive: true, force: true }));

const quietcorner = (...words: string[]) => start(folder, ...words);

async function fixture(name: string, content: string | Buffer): Promise<string> {
  const path = join(folder, name);
  await writeFile(path, content);
  return path;
}

const rows = (count: number, row: (i: number) => string) =>
  Array.from({ length: count }, (_, i) => `${row(i)}\n`).join('');
const wave = (i: number) => (Math.sin(i / 3) + Math.cos(i * 7.1)).toFixed(4);

describe('advise on input that cannot be used: one clear sentence, exit 3, nothing written', () => {
  const good = () => fixture('good.csv', `time [s],a\n${rows(200, (i) => `${i / 100},${wave(i)}`)}`);
  const cases: [title: string, bad: () => Promise<string>, says: RegExp][] = [
    ['no such file', async () => join(folder, 'missing.csv'), /missing\.csv.*(no such|does not exist|not found)/i],
    ['an empty file', () => fixture('empty.csv', ''), /empty\.csv.*empty/i],
    ['a directory', async () => folder, /(folder|directory)/i],
    ['a header only', () => fixture('header.csv', 'time [s],a\n'), /header\.csv.*(no|header)/i],
    [
      'no numeric column',
      () => fixture('text.csv', `name,colour\n${rows(100, () => 'x,red')}`),
      /text\.csv.*(numeric|number)/i,
    ],
    ['one row', () => fixture('one.csv', 'time [s],a\n0,1\n'), /one\.csv.*(row|sample)/i],
    [
      'equal samples',
      () => fixture('flat.csv', `time [s],a\n${rows(200, (i) => `${i / 100},3`)}`),
      /flat\.csv.*(equal|constant)/i,
    ],
    [
      'no common channel',
      () => fixture('other.csv', `time [s],b\n${rows(200, (i) => `${i / 100},${wave(i)}`)}`),
      /in common/,
    ],
    [
      'time running backwards',
      () => fixture('back.csv', `time [s],a\n${rows(200, (i) => `${(200 - i) / 100},${wave(i)}`)}`),
      /back\.csv.*back/i,
    ],
    [
      'under 64 samples',
      () => fixture('short.csv', `time [s],a\n${rows(63, (i) => `${i / 100},${wave(i)}`)}`),
      /short\.csv.*6[34]/,
    ],
    [
      'binary rubbish',
      () => fixture('rubbish.csv', Buffer.from(Array.from({ length: 4096 }, (_, i) => (i * 7919) % 251))),
      /rubbish\.csv/,
    ],
  ];

  it.each(cases)('%s', async (_title, bad, says) => {
    const path = await bad();
    for (const pair of [
      [path, await good()],
      [await good(), path],
    ]) {
      const out = join(folder, 'untouched');
      const outcome = await quietcorner('advise', ...pair, '--out', out, '--json', '--filtered');
      expect(outcome.stderr).toMatch(says);
      expect(outcome.stderr.trim().split('\n')).toHaveLength(1);
      expect(outcome.stderr).not.toMatch(/\bat .*:\d+:\d+/);
      expect(outcome.code).toBe(3);
      expect(outcome.stdout).toBe('');
      expect(await readdir(folder)).not.toContain('untouched');
    }
  });
});

describe('advise', () => {
  it('says with exit 4 that the output folder cannot be written', async () => {
    const blocked = await fixture('blocked', 'a file where a folder should be');
    const outcome = await quietcorner('advise', quiet, active, '--out', join(blocked, 'reports'));
    expect(outcome).toMatchObject({ code: 4, stdout: '' });
    expect(outcome.stderr).toMatch(/Cannot write .*blocked/);
  });

  it.each([
    [['advise', quiet], /missing required argument/],
    [['advise', quiet, active, '--keep', '3-1'], /--keep needs two frequencies/],
    [['advise', quiet, active, '--droop', '0'], /--droop needs a number above zero/],
    [['advise', quiet, active, '--channel', 'nope'], /no channel "nope"/],
    [['advise', quiet, active, '--keep', '0-150'], /carry up to 100 Hz/],
    [['advise', quiet, active, '--keep', '0-20', '--reject', '10'], /lies within the keep band/],
    [['advise', quiet, active, '--colour', 'red'], /unknown option/],
    [['advice'], /unknown command/],
  ])('takes %j for wrong use: exit 2', async (words, says) => {
    const outcome = await quietcorner(...words);
    expect(outcome.stderr).toMatch(says);
    expect(outcome).toMatchObject({ code: 2, stdout: '' });
  });
});
