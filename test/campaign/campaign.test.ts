import { beforeAll, describe, expect, it } from 'vitest';
import { type Measured, measure } from './measure.ts';
import { drawRecipe, type PairRecipe } from './pairs.ts';

const SEEDS = Array.from({ length: 24 }, (_, i) => 1001 + i);

const median = (values: readonly number[]) => [...values].sort((a, b) => a - b)[values.length >> 1];

/** A short, fixed part of `npm run campaign`: made pairs whose truth is known, measured on the recordings themselves. */
describe('advice on made pairs', () => {
  const all: Measured[] = [];
  beforeAll(async () => {
    for (const seed of SEEDS) all.push(await measure(drawRecipe(seed), seed));
  }, 60_000);

  it('is clear on every separable pair', () => {
    expect(all.filter((m) => m.best !== null).map((m) => m.verdict)).not.toContain('inseparable');
  });

  it('finds the first line within 1 % and the keep-band edge within 15 %', () => {
    for (const { lineRatio, edgeRatio } of all) {
      expect(Math.abs((lineRatio as number) - 1)).toBeLessThan(0.01);
      expect(Math.abs(edgeRatio - 1)).toBeLessThan(0.15);
    }
  });

  it('keeps the limits at the true edge and the true line, within 0.2 dB and 1 dB', () => {
    for (const { trueDroopDb, trueRejectionDb } of all.filter((m) => m.verdict === 'clear')) {
      expect(trueDroopDb).toBeLessThan(0.7);
      expect(trueRejectionDb).toBeGreaterThan(19);
    }
  });

  it('loses next to nothing against the best corner within the true limits', () => {
    const excess = all.flatMap((m) => (m.excessError === null ? [] : [m.excessError]));
    expect(excess.length).toBeGreaterThan(20);
    expect(median(excess)).toBeLessThan(0.003);
    expect(Math.max(...excess)).toBeLessThan(0.15);
  });
});

describe('advice where there is nothing to part', () => {
  const recipe: PairRecipe = {
    rateHz: 200,
    quietSeconds: 60,
    activeSeconds: 120,
    keepHighHz: 20,
    signal: 'band',
    signalRms: 1,
    lines: [],
    floorRms: 0.1,
    floor: 'white',
    noiseGain: 1,
    offset: 0,
  };

  it('is not clear where a strong line stands within the keep band', async () => {
    const { verdict } = await measure({ ...recipe, lines: [{ frequencyHz: 7.3, amplitude: 0.3 }] }, 1);
    expect(verdict).toBe('inseparable');
  });

  it('is not clear where the noise is as strong as the signal across the keep band', async () => {
    const { verdict } = await measure({ ...recipe, floorRms: 1.5, lines: [{ frequencyHz: 70, amplitude: 1 }] }, 2);
    expect(verdict).toBe('inseparable');
  });
});
