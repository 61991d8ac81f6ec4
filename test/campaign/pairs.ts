import type { Recording } from '../../src/core/recording/recording.ts';
import { madeRecording } from '../made-recording.ts';
import { type SeededRandom, seededRandom } from './seeded-random.ts';

/** What is known of a made pair. */
export interface Truth {
  /** Frequency below which 99 % of the signal's power lies, Hz. */
  readonly keepHighHz: number;
  /** Lowest noise line above the keep band, Hz. */
  readonly firstLineHz: number;
  readonly lines: readonly { readonly frequencyHz: number; readonly amplitude: number }[];
  /** The signal without noise, as long as the active recording. */
  readonly signal: Float64Array;
  /** Power of the noise in the active recording. */
  readonly noisePower: number;
}

/** What a pair is made of. */
export interface PairRecipe {
  readonly rateHz: number;
  readonly quietSeconds: number;
  readonly activeSeconds: number;
  readonly keepHighHz: number;
  readonly signal: 'tones' | 'band' | 'manoeuvres';
  readonly signalRms: number;
  readonly lines: readonly { readonly frequencyHz: number; readonly amplitude: number }[];
  readonly floorRms: number;
  readonly floor: 'white' | 'pink';
  /** Noise in use over noise when quiet, amplitude. */
  readonly noiseGain: number;
  readonly offset: number;
}

/** Makes the pair of a recipe, the same for the same seed. */
export function makePair(recipe: PairRecipe, seed: number): { quiet: Recording; active: Recording; truth: Truth } {
  const random = seededRandom(seed);
  const quietNoise = noiseOf(recipe, Math.round(recipe.quietSeconds * recipe.rateHz), 1, random);
  const samples = Math.round(recipe.activeSeconds * recipe.rateHz);
  const noise = noiseOf(recipe, samples, recipe.noiseGain, random);
  const { values: signal, edgeHz } = signalOf(recipe, samples, random);
  const active = signal.map((value, i) => value + noise[i] + recipe.offset);
  const record = (values: Float64Array) =>
    madeRecording({
      rateHz: recipe.rateHz,
      channels: [{ name: 'a', unit: 'm/s²' }],
      runs: [{ startSeconds: 0, samples: [values] }],
    });
  return {
    quiet: record(quietNoise.map((value) => value + recipe.offset)),
    active: record(active),
    truth: {
      keepHighHz: edgeHz,
      firstLineHz: Math.min(...recipe.lines.map((line) => line.frequencyHz).filter((f) => f > edgeHz)),
      lines: recipe.lines,
      signal,
      noisePower: noise.reduce((sum, value) => sum + value * value, 0) / samples,
    },
  };
}

/** A recipe drawn at random: rate, room, signal, floor and lines all vary. */
export function drawRecipe(seed: number): PairRecipe {
  const random = seededRandom(seed * 7919 + 13);
  const rateHz = 50 * 200 ** random.uniform();
  const room = 2 * 20 ** random.uniform();
  const highestEdge = (0.4 * rateHz) / room;
  const keepHighHz = Math.max(rateHz / 2000, highestEdge * 10 ** (-1.5 * random.uniform()));
  const firstLineHz = keepHighHz * room;
  const more = Math.floor(random.uniform() * 5);
  const kinds = ['tones', 'band', 'manoeuvres'] as const;
  const signalRms = 1;
  const floorRms = signalRms * 10 ** (-1 - 1.5 * random.uniform());
  const seconds = Math.min(100_000 / rateHz, Math.max(60 / keepHighHz, 8192 / rateHz));
  return {
    rateHz,
    quietSeconds: seconds * (0.4 + 0.6 * random.uniform()),
    activeSeconds: seconds,
    keepHighHz,
    signal: kinds[Math.floor(random.uniform() * 3)],
    signalRms,
    lines: Array.from({ length: 1 + more }, (_, i) => ({
      frequencyHz: i === 0 ? firstLineHz : firstLineHz + (0.48 * rateHz - firstLineHz) * random.uniform(),
      amplitude: floorRms * (0.7 + 1.5 * random.uniform()),
    })).filter((line) => line.frequencyHz < 0.48 * rateHz),
    floorRms,
    floor: random.uniform() < 0.7 ? 'white' : 'pink',
    noiseGain: 0.7 + 0.7 * random.uniform(),
    offset: 10 * (random.uniform() - 0.5),
  };
}

function noiseOf(recipe: PairRecipe, samples: number, gain: number, random: SeededRandom): Float64Array {
  const { rateHz, floorRms, lines } = recipe;
  const floor = recipe.floor === 'white' ? white(samples, random) : pink(samples, random);
  const scale = gain * floorRms;
  const values = floor.map((value) => value * scale);
  for (const { frequencyHz, amplitude } of lines) {
    const phase = 2 * Math.PI * random.uniform();
    for (let i = 0; i < samples; i++)
      values[i] += gain * amplitude * Math.sin((2 * Math.PI * frequencyHz * i) / rateHz + phase);
  }
  return values;
}

function white(samples: number, random: SeededRandom): Float64Array {
  return Float64Array.from({ length: samples }, () => random.normal());
}

/** Density falling as 1/f over four decades: a sum of one-pole noises an octave and a half apart, scaled to RMS 1. */
function pink(samples: number, random: SeededRandom): Float64Array {
  const values = new Float64Array(samples);
  for (let pole = 0.5; pole > 1e-5; pole /= 3) {
    let state = random.normal();
    const keep = 1 - pole;
    const drive = Math.sqrt(1 - keep * keep);
    for (let i = 0; i < samples; i++) {
      state = keep * state + drive * random.normal();
      values[i] += state;
    }
  }
  const rms = Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / samples);
  return values.map((value) => value / rms);
}

function signalOf(recipe: PairRecipe, samples: number, random: SeededRandom): { values: Float64Array; edgeHz: number } {
  const components = componentsOf(recipe, random);
  const values = new Float64Array(samples);
  for (const { frequencyHz, amplitude, phase } of components)
    for (let i = 0; i < samples; i++)
      values[i] += amplitude * Math.sin((2 * Math.PI * frequencyHz * i) / recipe.rateHz + phase);
  const rms = Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / samples);
  const total = components.reduce((sum, c) => sum + c.amplitude ** 2, 0);
  let below = 0;
  let edgeHz = recipe.keepHighHz;
  for (const component of components) {
    below += component.amplitude ** 2;
    if (below >= 0.99 * total) {
      edgeHz = component.frequencyHz;
      break;
    }
  }
  return { values: values.map((value) => (value * recipe.signalRms) / rms), edgeHz };
}

/** Sines that make up the signal, lowest first. */
function componentsOf({ signal, keepHighHz, activeSeconds }: PairRecipe, random: SeededRandom) {
  const phase = () => 2 * Math.PI * random.uniform();
  if (signal === 'tones') {
    const count = 3 + Math.floor(random.uniform() * 4);
    const parts = Array.from({ length: count }, (_, i) => (i === 0 ? 1 : 0.15 + 0.8 * random.uniform()));
    return parts
      .map((part) => ({ frequencyHz: part * keepHighHz, amplitude: 0.4 + random.uniform(), phase: phase() }))
      .sort((a, b) => a.frequencyHz - b.frequencyHz);
  }
  const count = Math.min(300, Math.max(30, Math.round(keepHighHz * activeSeconds)));
  return Array.from({ length: count }, (_, i) => {
    const part = (i + random.uniform()) / count;
    const amplitude = signal === 'band' ? 1 : 1 / (1 + (3 * part) ** 2);
    return {
      frequencyHz: Math.max(0.02, part) * keepHighHz,
      amplitude: amplitude * (0.7 + 0.6 * random.uniform()),
      phase: phase(),
    };
  });
}
