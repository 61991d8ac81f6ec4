/**
 * The whole job on a pair of 2,000,000 rows of four columns, as ratios within one run against plain-script.py: `advise` with and
 * without the filtered CSV, seconds and peak resident memory. Needs `npm run build`, and Debian's python3-pandas, python3-scipy,
 * python3-matplotlib and time; says so where they are missing.
 */
import { spawnSync } from 'node:child_process';
import { mkdtemp, open, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';

const ROWS = 2_000_000;
const ROUNDS = 3;
const PYTHON = '/usr/bin/python3';
const TIME = '/usr/bin/time';

interface Cost {
  readonly seconds: number;
  readonly megabytes: number;
}

const script = join(import.meta.dirname, 'plain-script.py');
const program = join(import.meta.dirname, '../../dist/quietcorner.js');
const folder = await mkdtemp(join(tmpdir(), 'quietcorner-bench-'));
const quiet = join(folder, 'big-quiet.csv');
const active = join(folder, 'big-active.csv');
try {
  const ready = spawnSync(TIME, ['-f', '%M', PYTHON, '-c', 'import pandas, scipy, matplotlib']).status === 0;
  if (!ready)
    process.stdout.write(
      'whole job: not measured; install python3-pandas, python3-scipy, python3-matplotlib and time\n',
    );
  else {
    await writeLog(quiet, 0, 1);
    await writeLog(active, 1, 7);
    for (const extra of [[], ['--filtered']]) compare(extra);
  }
} finally {
  await rm(folder, { recursive: true });
}

function compare(extra: readonly string[]): void {
  const ours: Cost[] = [];
  const plain: Cost[] = [];
  for (let round = 0; round < ROUNDS; round++) {
    ours.push(costOf(['node', program, 'advise', quiet, active, '--out', folder, ...extra]));
    plain.push(costOf([PYTHON, script, quiet, active, folder, ...extra]));
  }
  const [us, them] = [medianOf(ours), medianOf(plain)];
  process.stdout.write(
    `whole job${extra.length > 0 ? ' with the filtered CSV' : ''}: plain script over ours ${(them.seconds / us.seconds).toFixed(1)} ` +
      `(${them.seconds.toFixed(1)} s, ${us.seconds.toFixed(1)} s); peak memory, ours over plain script ` +
      `${(us.megabytes / them.megabytes).toFixed(2)} (${us.megabytes.toFixed(0)} MB, ${them.megabytes.toFixed(0)} MB)\n`,
  );
}

/** Seconds by the clock and peak resident memory of one run of a command. */
function costOf(command: readonly string[]): Cost {
  const start = performance.now();
  const { status, stderr } = spawnSync(TIME, ['-f', '%M', ...command], { encoding: 'utf8' });
  const seconds = (performance.now() - start) / 1000;
  if (status !== 0) throw new Error(`${command.join(' ')} ended with ${status}: ${stderr}`);
  return { seconds, megabytes: Number(stderr.trim().split('\n').at(-1)) / 1000 };
}

function medianOf(costs: readonly Cost[]): Cost {
  const middle = (values: number[]) => values.sort((a, b) => a - b)[Math.floor(values.length / 2)];
  return { seconds: middle(costs.map((cost) => cost.seconds)), megabytes: middle(costs.map((cost) => cost.megabytes)) };
}

/** Three axes with a line at 50 Hz and noise (linear congruence of Numerical Recipes, 2nd ed., 7.1); a slow swing where `swing` is not 0. */
async function writeLog(path: string, swing: number, seed: number): Promise<void> {
  let state = seed;
  const noise = () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return 0.1 * (state / 2 ** 32 - 0.5);
  };
  const file = await open(path, 'w');
  let text = 'time [s],x [m/s²],y [m/s²],z [m/s²]\n';
  for (let row = 0; row < ROWS; row++) {
    const seconds = row / 1000;
    const moved = swing * Math.sin(2 * Math.PI * 0.7 * seconds) * (1 + 0.5 * Math.sin(seconds / 9));
    const line = 0.2 * Math.sin(2 * Math.PI * 50 * seconds);
    const values = [moved + line, 0.5 * moved + line, 9.80665 + 0.3 * moved];
    text += `${seconds.toFixed(3)},${values.map((value) => (value + noise()).toFixed(5)).join(',')}\n`;
    if (text.length < 1 << 20) continue;
    await file.writeFile(text);
    text = '';
  }
  await file.writeFile(text);
  await file.close();
}
