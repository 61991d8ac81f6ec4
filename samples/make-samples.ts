/**
 * Makes the demo pair: a cable-car cabin's sway monitor, invented from end to end. The same bytes on every machine.
 * `npm run samples` writes the files; tests import `truth` to know what must be found in them.
 */
import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';

const RATE_HZ = 200;
const QUIET_SECONDS = 120;
const ACTIVE_SECONDS = 300;

/** Broadband noise and lines in use over those in the station, as a ratio of amplitudes. */
const NOISE_GAIN = 1.05;

/** Decimals printed: far coarser than any difference between two machines' sines, far finer than the noise. */
const DECIMALS = 4;

/** When the cabin passes a tower, seconds from the start of the active recording. */
const TOWERS_SECONDS = [46, 117, 189, 252];

/** Sines that never stop: the ventilation fan with two harmonics, a pump, and the mains. */
const LINES_HZ = { fan: 24.3, pump: 35.7, fanSecond: 48.6, mains: 50, fanThird: 72.9 } as const;

/** Random-phase motion of even density between two frequencies. */
interface Rolling {
  readonly fromHz: number;
  readonly toHz: number;
  readonly rms: number;
}

/** A smooth swing at every tower: a sine under a Gaussian envelope. */
interface Swing {
  readonly centreHz: number;
  /** Standard deviation of the Gaussian in frequency; the envelope's in time is 1/(2π) over it. */
  readonly spreadHz: number;
  readonly peak: number;
}

interface Axis {
  readonly name: string;
  /** What the axis shows at rest: gravity and the tilt of its mount, m/s². */
  readonly rest: number;
  /** White sensor noise, RMS, m/s². */
  readonly noiseRms: number;
  /** Peak amplitude of each line, m/s². */
  readonly lines: Readonly<Record<keyof typeof LINES_HZ, number>>;
  readonly rolling: readonly Rolling[];
  readonly swings: readonly Swing[];
}

const UNIT = 'm/s²';

const AXES: readonly Axis[] = [
  {
    name: 'sway_x',
    rest: 0.1204,
    noiseRms: 0.01,
    lines: { fan: 0.06, pump: 0.018, fanSecond: 0.022, mains: 0.03, fanThird: 0.01 },
    rolling: [
      { fromHz: 0.01, toHz: 0.12, rms: 0.03 },
      { fromHz: 0.12, toHz: 0.3, rms: 0.16 },
      { fromHz: 0.3, toHz: 0.5, rms: 0.07 },
      { fromHz: 0.5, toHz: 0.71, rms: 0.09 },
    ],
    swings: [
      { centreHz: 0.21, spreadHz: 0.03, peak: 0.55 },
      { centreHz: 0.5, spreadHz: 0.04, peak: 0.3 },
    ],
  },
  {
    name: 'sway_y',
    rest: -0.0817,
    noiseRms: 0.011,
    lines: { fan: 0.045, pump: 0.026, fanSecond: 0.016, mains: 0.022, fanThird: 0.012 },
    rolling: [
      { fromHz: 0.01, toHz: 0.1, rms: 0.02 },
      { fromHz: 0.1, toHz: 0.26, rms: 0.11 },
      { fromHz: 0.26, toHz: 0.44, rms: 0.06 },
      { fromHz: 0.44, toHz: 0.62, rms: 0.07 },
    ],
    swings: [
      { centreHz: 0.19, spreadHz: 0.03, peak: 0.3 },
      { centreHz: 0.42, spreadHz: 0.04, peak: 0.25 },
    ],
  },
  {
    name: 'heave_z',
    rest: 9.8052,
    noiseRms: 0.013,
    lines: { fan: 0.08, pump: 0.014, fanSecond: 0.03, mains: 0.02, fanThird: 0.016 },
    rolling: [
      { fromHz: 0.01, toHz: 0.2, rms: 0.03 },
      { fromHz: 0.2, toHz: 0.6, rms: 0.12 },
      { fromHz: 0.6, toHz: 0.85, rms: 0.08 },
      { fromHz: 0.85, toHz: 1.12, rms: 0.09 },
    ],
    swings: [
      { centreHz: 0.45, spreadHz: 0.06, peak: 0.35 },
      { centreHz: 0.8, spreadHz: 0.05, peak: 0.5 },
    ],
  },
];

/**
 * Uniform numbers in (0, 1): xorshift128 with the shifts 11, 8, 19 and the starting words of G. Marsaglia, "Xorshift RNGs",
 * Journal of Statistical Software 8(14), 2003, section 4; the seed is mixed into the first word.
 */
function uniform(seed: number): () => number {
  let [x, y, z, w] = [123456789 ^ seed, 362436069, 521288629, 88675123];
  const next = () => {
    const t = x ^ (x << 11);
    [x, y, z] = [y, z, w];
    w = w ^ (w >>> 19) ^ t ^ (t >>> 8);
    return ((w >>> 0) + 0.5) / 2 ** 32;
  };
  // Seeds that differ in a few bits start alike; they have parted well before this many draws.
  for (let i = 0; i < 64; i++) next();
  return next;
}

/** Normal numbers of mean 0 and variance 1; Box & Muller 1958. */
function normal(random: () => number): () => number {
  return () => Math.sqrt(-2 * Math.log(random())) * Math.cos(2 * Math.PI * random());
}

/** Motion as a Fourier series with the period of the active recording: term k is cosine[k]·cos + sine[k]·sin of 2πkt/period. */
interface Series {
  readonly cosine: Float64Array;
  readonly sine: Float64Array;
}

/** The series of one axis. All of its motion is in it, so that the share of power below any frequency is known exactly. */
function motionOf(axis: Axis, random: () => number): Series {
  const terms = Math.ceil(ACTIVE_SECONDS * Math.max(...axis.rolling.map((band) => band.toHz))) + 1;
  const series = { cosine: new Float64Array(terms), sine: new Float64Array(terms) };
  const add = (k: number, amplitude: number, phase: number) => {
    series.cosine[k] += amplitude * Math.cos(phase);
    series.sine[k] += amplitude * Math.sin(phase);
  };
  for (const band of axis.rolling) {
    const first = Math.round(band.fromHz * ACTIVE_SECONDS);
    const end = Math.round(band.toHz * ACTIVE_SECONDS);
    const amplitude = band.rms * Math.sqrt(2 / (end - first));
    for (let k = first; k < end; k++) add(k, amplitude, 2 * Math.PI * random());
  }
  for (const swing of axis.swings) {
    const weights = Array.from({ length: terms }, (_, k) =>
      gaussian((k / ACTIVE_SECONDS - swing.centreHz) / swing.spreadHz),
    );
    const sum = weights.reduce((total, weight) => total + weight, 0);
    for (const tower of TOWERS_SECONDS) {
      const phase = 2 * Math.PI * random();
      const peak = swing.peak * (0.8 + 0.4 * random());
      weights.forEach((weight, k) => {
        if (weight > 0) add(k, (peak * weight) / sum, phase + (2 * Math.PI * k * tower) / ACTIVE_SECONDS);
      });
    }
  }
  return series;
}

/** exp(−x²/2), cut to 0 beyond four standard deviations so that a swing stays inside its axis' band. */
function gaussian(x: number): number {
  return Math.abs(x) > 4 ? 0 : Math.exp(-(x * x) / 2);
}

/** Frequency below which 99 % of the motion's power lies, Hz. */
function keepEdgeHz({ cosine, sine }: Series): number {
  const power = Array.from(cosine, (c, k) => (c ** 2 + sine[k] ** 2) / 2);
  let above = 0.01 * power.reduce((sum, p) => sum + p, 0);
  let k = power.length - 1;
  while (above > power[k]) above -= power[k--];
  return k / ACTIVE_SECONDS;
}

/** The series at every sample of the active recording. */
function sampled({ cosine, sine }: Series): Float64Array {
  const samples = ACTIVE_SECONDS * RATE_HZ;
  const wave = Float64Array.from({ length: samples }, (_, n) => Math.cos((2 * Math.PI * n) / samples));
  const motion = new Float64Array(samples);
  for (let k = 1; k < cosine.length; k++) {
    for (let n = 0; n < samples; n++) {
      motion[n] += cosine[k] * wave[(k * n) % samples] + sine[k] * wave[(k * n + 0.75 * samples) % samples];
    }
  }
  return motion;
}

/** Sensor noise and lines of one axis, lines starting at random phases. */
function noiseOf(axis: Axis, samples: number, gain: number, random: () => number): Float64Array {
  const draw = normal(random);
  const noise = Float64Array.from({ length: samples }, () => gain * axis.noiseRms * draw());
  for (const [line, amplitude] of Object.entries(axis.lines)) {
    const turnsPerSample = LINES_HZ[line as keyof typeof LINES_HZ] / RATE_HZ;
    const phase = 2 * Math.PI * random();
    for (let n = 0; n < samples; n++) noise[n] += gain * amplitude * Math.sin(2 * Math.PI * turnsPerSample * n + phase);
  }
  return noise;
}

const MOTIONS = AXES.map((axis, i) => motionOf(axis, uniform(100 + i)));

/** What the generator put into the files: what a good analysis finds there. */
export const truth = {
  rateHz: RATE_HZ,
  quietSeconds: QUIET_SECONDS,
  activeSeconds: ACTIVE_SECONDS,
  /** Noise in use over noise in the station, as a ratio of amplitudes. */
  noiseGain: NOISE_GAIN,
  /** Middle of each tower crossing, seconds from the start of the active recording. */
  towersSeconds: TOWERS_SECONDS,
  channels: AXES.map((axis, i) => ({
    name: axis.name,
    unit: UNIT,
    /** Mean of the axis, m/s². */
    rest: axis.rest,
    /** White noise in the station, RMS, m/s². */
    noiseRms: axis.noiseRms,
    /** Sines in the station: frequency in Hz, peak amplitude in m/s². */
    lines: Object.entries(axis.lines).map(([line, amplitude]) => ({
      frequencyHz: LINES_HZ[line as keyof typeof LINES_HZ] as number,
      amplitude,
    })),
    /** Frequency below which 99 % of the power of the active recording's motion lies, Hz. */
    keepEdgeHz: keepEdgeHz(MOTIONS[i]),
  })),
};

/** The text of one file: comment lines that say what it is, a header with units, one row per sample. */
function csv(what: string, columns: readonly Float64Array[]): string {
  const rows = [
    `# Invented data, not recorded: ${what}`,
    '# Made by samples/make-samples.ts; see samples/README.md',
    ['time [s]', ...AXES.map((axis) => `${axis.name} [${UNIT}]`)].join(','),
  ];
  for (let n = 0; n < columns[0].length; n++) {
    rows.push([(n / RATE_HZ).toFixed(3), ...columns.map((column) => column[n].toFixed(DECIMALS))].join(','));
  }
  return `${rows.join('\n')}\n`;
}

/** Both files of the pair, by name. */
export function makeSamples(): Readonly<Record<'cabin-quiet.csv' | 'cabin-active.csv', string>> {
  const quiet = AXES.map((axis, i) =>
    noiseOf(axis, QUIET_SECONDS * RATE_HZ, 1, uniform(200 + i)).map((noise) => axis.rest + noise),
  );
  const active = AXES.map((axis, i) => {
    const motion = sampled(MOTIONS[i]);
    return noiseOf(axis, motion.length, NOISE_GAIN, uniform(300 + i)).map((noise, n) => axis.rest + motion[n] + noise);
  });
  return {
    'cabin-quiet.csv': csv('a cable-car cabin parked in its station, fan, pump and mains on', quiet),
    'cabin-active.csv': csv('the same cabin on its way past four towers', active),
  };
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  for (const [name, text] of Object.entries(makeSamples())) {
    writeFileSync(new URL(name, import.meta.url), text);
    process.stdout.write(`${name}: ${(text.length / 1e6).toFixed(2)} MB\n`);
  }
}
