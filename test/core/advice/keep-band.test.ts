import { describe, expect, it } from 'vitest';
import { compareSpectra, excessBands } from '../../../src/core/advice/comparison.ts';
import { excessEdge, findSignalBands } from '../../../src/core/advice/keep-band.ts';
import { noiseGainPower } from '../../../src/core/advice/noise-gain.ts';
import { levelOf, spectrumOf } from './synthetic.ts';

const RATE_HZ = 200;
const NOISE = 0.01;

function find(active: (f: number) => number, quiet: (f: number) => number, lineHz: number[] = []) {
  const grid = { rateHz: RATE_HZ, binHz: 0.05, dof: 40 };
  const quietSpectrum = spectrumOf({ ...grid, density: quiet });
  const comparison = compareSpectra(spectrumOf({ ...grid, density: active }), quietSpectrum);
  const gain = noiseGainPower(comparison);
  const excess = excessBands(comparison, gain, lineHz);
  const level = levelOf({ rateHz: RATE_HZ, segmentSamples: 16384, segments: 20, density: active });
  return { gain, ...findSignalBands(comparison, excess, level, quietSpectrum, gain) };
}

const flatTo =
  (edge: number, density = 1) =>
  (f: number) =>
    (f < edge * 1.0001 ? density : 0) + NOISE;
const white = () => NOISE;

describe('findSignalBands', () => {
  it.each([0.7, 3, 12, 40])('finds the edge of a flat band up to %d Hz at 99 percent of its power', (edge) => {
    const { keep } = find(flatTo(edge), white);
    expect(keep?.lowHz).toBe(0);
    expect((keep?.highHz as number) / (0.99 * edge)).toBeCloseTo(1, 1);
  });

  it('finds nothing where active is as quiet', () => {
    expect(find(white, white)).toMatchObject({ keep: null, inUse: [] });
  });

  it('reads how much stronger the noise is in use, and is not led astray by it', () => {
    const found = find((f) => (f <= 2 ? 1 : 0) + 1.8 * NOISE, white);
    expect(found.gain).toBeCloseTo(1.8, 2);
    expect(found.keep?.highHz).toBeGreaterThan(1.8);
    expect(found.keep?.highHz).toBeLessThan(2.2);
  });

  it('parts what is present only in use, far above, from the signal', () => {
    const vibration = (f: number) => (f > 40 && f < 45 ? 0.2 : 0);
    const found = find((f) => flatTo(2)(f) + vibration(f), white);
    expect(found.keep?.highHz).toBeLessThan(2.2);
    expect(found.inUse).toHaveLength(1);
    expect(found.inUse[0].lowHz).toBeGreaterThan(36);
    expect(found.inUse[0].highHz).toBeLessThan(49);
  });

  it('does not take a line that grew twofold in use for signal', () => {
    const line = (gain: number) => (f: number) => NOISE + (Math.abs(f - 50) < 0.3 ? gain * NOISE * 300 : 0);
    const found = find((f) => (f <= 2 ? 1 : 0) + line(2)(f), line(1), [50]);
    expect(found.inUse).toEqual([]);
  });

  it('holds a gap within the signal together where most power is above it', () => {
    const tones = (f: number) => (Math.abs(f - 0.5) < 0.1 || Math.abs(f - 3) < 0.1 ? 5 : 0) + NOISE;
    expect(find(tones, white).keep?.highHz).toBeGreaterThan(2.8);
  });
});

describe('excessEdge', () => {
  it('scales with the band, whatever the level', () => {
    const quiet = spectrumOf({ rateHz: RATE_HZ, binHz: 0.1, dof: 40, density: white });
    const edge = (density: number) => {
      const active = levelOf({ rateHz: RATE_HZ, segmentSamples: 32768, segments: 8, density: flatTo(5, density) });
      return excessEdge(active, (bin) => active.density[bin], quiet, 1, { lowHz: 0, highHz: 6 });
    };
    expect(edge(1000)).toBeCloseTo(edge(10), 6);
    expect(edge(10)).toBeCloseTo(4.95, 1);
  });
});
