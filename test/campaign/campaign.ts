import { type Measured, measure } from './measure.ts';
import { drawRecipe } from './pairs.ts';

const PAIRS = Number(process.argv[2] ?? 500);

/** Studies many made pairs whose truth is known and prints how good the advice was. */
async function campaign(): Promise<void> {
  const all: Measured[] = [];
  const kinds: string[] = [];
  for (let seed = 1; seed <= PAIRS; seed++) {
    const recipe = drawRecipe(seed);
    const measured = await measure(recipe, seed);
    all.push(measured);
    kinds.push(recipe.signal);
    const odd =
      (measured.excessError ?? 0) > 0.03 ||
      Math.abs(measured.edgeRatio - 1) > 0.15 ||
      Math.abs((measured.lineRatio ?? 0) - 1) > 0.01;
    if (odd && process.argv.includes('--odd'))
      process.stdout.write(`${seed} ${JSON.stringify({ ...measured, recipe })}\n`);
  }
  const share = (test: (m: Measured) => boolean, among = all) =>
    `${((100 * among.filter(test).length) / among.length).toFixed(1)} %`;
  const excess = all
    .flatMap((m) => (m.excessError === null || m.verdict !== 'clear' ? [] : [m.excessError]))
    .sort((a, b) => a - b);
  const at = (part: number) =>
    `${(100 * excess[Math.min(excess.length - 1, Math.floor(part * excess.length))]).toFixed(2)} %`;
  const rows = [
    ['pairs', String(all.length)],
    [
      'verdict clear / compromise / inseparable',
      ['clear', 'compromise', 'inseparable'].map((v) => all.filter((m) => m.verdict === v).length).join(' / '),
    ],
    ['excess error, median', at(0.5)],
    ['excess error, 95th percentile', at(0.95)],
    ['excess error, largest', at(1)],
    ['first line within 1 %', share((m) => m.lineRatio !== null && Math.abs(m.lineRatio - 1) < 0.01)],
    ['keep edge within 15 %', share((m) => Math.abs(m.edgeRatio - 1) <= 0.15)],
    ...['tones', 'band', 'manoeuvres'].map((kind) => {
      const ratios = all
        .filter((_, i) => kinds[i] === kind)
        .map((m) => m.edgeRatio)
        .sort((a, b) => a - b);
      return [
        `keep edge over truth, ${kind}: 5 %, 50 %, 95 %`,
        [0.05, 0.5, 0.95].map((p) => ratios[Math.floor(p * ratios.length)]?.toFixed(3)).join('  '),
      ];
    }),
    [
      'true droop within limit + 0.2 dB',
      share(
        (m) => m.trueDroopDb <= 0.7,
        all.filter((m) => m.verdict === 'clear'),
      ),
    ],
    [
      'true rejection within limit − 1 dB',
      share(
        (m) => m.trueRejectionDb >= 19,
        all.filter((m) => m.verdict === 'clear'),
      ),
    ],
    [
      'interval covers the best corner',
      share(
        (m) => m.coversBest,
        all.filter((m) => m.verdict === 'clear'),
      ),
    ],
  ];
  for (const [name, value] of rows) process.stdout.write(`${name.padEnd(48)} ${value}\n`);
}

await campaign();
