/**
 * How long reading takes, as ratios within one run: the survey of a log and one pass over its blocks, against papaparse on the
 * whole text with numbers converted, and against `cat`. The rounds take turns, so that a busy machine slows all three alike.
 */
import { execFileSync } from 'node:child_process';
import { once } from 'node:events';
import { createWriteStream } from 'node:fs';
import { mkdtemp, readFile, rm, stat } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { finished } from 'node:stream/promises';
import Papa from 'papaparse';
import { fileSource } from '../../src/cli/file-source.ts';
import { openRecording } from '../../src/core/recording/open.ts';

const ROWS = 1_000_000;
const ROUNDS = 5;

const folder = await mkdtemp(join(tmpdir(), 'quietcorner-bench-'));
const path = join(folder, 'log.csv');
try {
  await writeLog(path);
  const ways = { ours: () => readOurs(path), papaparse: () => readPapaparse(path), cat: async () => readCat(path) };
  const seconds = { ours: [] as number[], papaparse: [] as number[], cat: [] as number[] };
  for (let round = 0; round < ROUNDS; round++) {
    for (const way of Object.keys(ways) as (keyof typeof ways)[]) seconds[way].push(await timed(ways[way]));
  }
  const megabytes = (await stat(path)).size / 1e6;
  process.stdout.write(
    `log of ${megabytes.toFixed(0)} MB, ${ROWS} rows of 4 columns; ${ROUNDS} rounds; median ratio (least to most)\n`,
  );
  process.stdout.write(`papaparse over ours: ${ratios(seconds.papaparse, seconds.ours)}\n`);
  process.stdout.write(`ours over cat: ${ratios(seconds.ours, seconds.cat)}\n`);
} finally {
  await rm(folder, { recursive: true });
}

/** A log like those of a sensor: time, three axes with a swing and noise. Noise by the linear congruence of Numerical Recipes, 2nd ed., 7.1. */
async function writeLog(target: string): Promise<void> {
  const stream = createWriteStream(target);
  let state = 1;
  const noise = () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32 - 0.5;
  };
  stream.write('time [s],x [m/s²],y [m/s²],z [m/s²]\n');
  for (let row = 0; row < ROWS; row++) {
    const swing = Math.sin(row / 300);
    const values = [swing, 0.5 * swing, 9.80665].map((value) => (value + 0.1 * noise()).toFixed(5));
    if (!stream.write(`${(row / 1000).toFixed(3)},${values.join(',')}\n`)) await once(stream, 'drain');
  }
  stream.end();
  await finished(stream);
}

async function readOurs(source: string): Promise<void> {
  const recording = await openRecording(fileSource(source), {});
  let rows = 0;
  for await (const block of recording.blocks()) rows += block.length;
  if (rows !== ROWS) throw new Error(`read ${rows} rows of ${ROWS}`);
}

async function readPapaparse(source: string): Promise<void> {
  const { data } = Papa.parse(await readFile(source, 'utf8'), {
    header: true,
    dynamicTyping: true,
    skipEmptyLines: true,
  });
  if (data.length !== ROWS) throw new Error(`read ${data.length} rows of ${ROWS}`);
}

function readCat(source: string): void {
  execFileSync('cat', [source], { stdio: 'ignore' });
}

async function timed(work: () => Promise<void>): Promise<number> {
  const start = performance.now();
  await work();
  return (performance.now() - start) / 1000;
}

/** Median, least and most of the ratios round by round. */
function ratios(over: readonly number[], under: readonly number[]): string {
  const sorted = over.map((value, round) => value / under[round]).sort((a, b) => a - b);
  return `${sorted[Math.floor(sorted.length / 2)].toFixed(1)} (${sorted[0].toFixed(1)} to ${sorted.at(-1)?.toFixed(1)})`;
}
