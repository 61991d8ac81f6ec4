import { describe, expect, it } from 'vitest';
import { findLines, findPeaks } from '../../../src/core/spectrum/lines.ts';
import { levelFrom, normalNumbers, samplesFor, samplesOf } from './noise.ts';

/** Noise of different colours from normal numbers; each starts anew for every spectrum. */
const COLOURS: Record<string, (normal: () => number) => () => number> = {
  white: (normal) => normal,
  // Three one-pole low-passes, within 0.5 dB of 1/f over the bins used here (from memory).
  '1/f': (normal) => {
    let [a, b, c] = [0, 0, 0];
    return () => {
      const white = normal();
      a = 0.99765 * a + 0.099046 * white;
      b = 0.963 * b + 0.2965164 * white;
      c = 0.57 * c + 1.0526913 * white;
      return a + b + c + 0.1848 * white;
    };
  },
  'random walk': (normal) => {
    let sum = 0;
    return () => {
      sum += normal();
      return sum + 3 * normal();
    };
  },
  'two-pole low-pass': (normal) => {
    let [a, b] = [0, 0];
    return () => {
      a = 0.9 * a + normal();
      b = 0.9 * b + a;
      return b + 0.02 * normal();
    };
  },
};

function count(colour: string, segments: number, spectra: number, falseAlarms?: number): number {
  const normal = normalNumbers(4711 + segments);
  let lines = 0;
  for (let i = 0; i < spectra; i++) {
    const level = levelFrom(samplesOf(samplesFor(256, segments), COLOURS[colour](normal)), 256, 1);
    lines += (falseAlarms === undefined ? findLines(level) : findPeaks(level, { falseAlarms })).length;
  }
  return lines;
}

describe('false alarms', () => {
  // One in a thousand: 2,500 spectra may show 2.5; seven or more have a chance of 1.4 % (Poisson).
  it.each([
    ['white', 16, 2500],
    ['white', 5, 2500],
    ['1/f', 16, 2500],
    ['random walk', 16, 1000],
    ['two-pole low-pass', 16, 1000],
  ])(
    '%s noise, %d segments: about one line in a thousand of %d spectra',
    { timeout: 60_000 },
    (colour, segments, spectra) => {
      expect(count(colour, segments, spectra)).toBeLessThan(7);
    },
  );

  it('come as often as they are asked for: the test is neither blind nor far too strict', { timeout: 60_000 }, () => {
    const perSpectrum = count('white', 16, 1000, 0.3) / 1000;
    // Neighbouring bins are correlated, so that Bonferroni's bound is not reached.
    expect(perSpectrum).toBeGreaterThan(0.05);
    expect(perSpectrum).toBeLessThan(0.4);
  });
});
