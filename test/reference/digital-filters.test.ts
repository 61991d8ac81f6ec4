import { describe, expect, it } from 'vitest';
import { discreteGainDb, discretise } from '../../src/core/filter/discretise.ts';
import type { Family, Filter } from '../../src/core/filter/filter.ts';
import { FilterFold } from '../../src/core/filter/run.ts';
import reference from './digital-filters.json' with { type: 'json' };

interface Design {
  inputs: { family: string; order: number; fc_Hz: number; fs_Hz: number };
  expected: { f_Hz: number[]; abs_H: number[] };
}

const FAMILIES: Record<string, Family> = { butter: 'butterworth', bessel: 'bessel' };
const designs = Object.entries(reference).filter(([id]) => id.startsWith('dig.design.')) as unknown as [
  string,
  Design,
][];
const filterOf = ({ inputs }: Design): Filter => ({
  shape: 'low-pass',
  family: FAMILIES[inputs.family],
  order: inputs.order,
  cornerHz: inputs.fc_Hz,
});

describe('bilinear, pre-warped designs against scipy.signal (computed with scipy 1.10)', () => {
  it('covers both families', () => {
    expect(new Set(designs.map(([, design]) => design.inputs.family))).toEqual(new Set(['butter', 'bessel']));
  });

  it.each(designs)('%s: gain', (_id, design) => {
    const discrete = discretise(filterOf(design), design.inputs.fs_Hz);
    design.expected.f_Hz.forEach((f, i) => {
      const gain = 10 ** (discreteGainDb(discrete, f) / 20);
      expect(Math.abs(gain - design.expected.abs_H[i])).toBeLessThan(1e-9);
    });
  });
});

describe('filtering from the steady state of the first sample (scipy sosfilt with sosfilt_zi·x[0])', () => {
  const input = Float64Array.from(reference['dig.vec.input'].expected);
  const vectors = Object.entries(reference).filter(([id]) => id.endsWith('.sosfilt_zi')) as unknown as [
    string,
    { inputs: { design: string }; expected: number[] },
  ][];

  it.each(vectors)('%s', (_id, vector) => {
    const design = designs.find(([id]) => id === `dig.design.${vector.inputs.design}`)?.[1] as Design;
    const filter = filterOf(design);
    const output = new FilterFold(discretise(filter, 100)).push(input, true);
    expect(output).toHaveLength(vector.expected.length);
    output.forEach((value, i) => {
      expect(Math.abs(value - vector.expected[i])).toBeLessThan(1e-10);
    });
  });
});

describe('textbook examples (from memory)', () => {
  it('one pole of 3 dB bandwidth 0.2π: 0.245(1 + z⁻¹)/(1 − 0.509z⁻¹) (Proakis & Manolakis, bilinear example)', () => {
    const { b0, a1 } = reference['book.proakis.lp1'].expected;
    const [section] = discretise({ shape: 'low-pass', family: 'rc', order: 1, cornerHz: 0.1 }, 1).sections;
    expect(Math.abs(section.b0 - b0)).toBeLessThan(6e-4);
    expect(Math.abs(section.a1 - a1)).toBeLessThan(6e-4);
  });

  it('order-6 Butterworth, Ωc = 0.76622: denominators and gain (Oppenheim & Schafer, bilinear example)', () => {
    const { inputs, expected } = reference['book.oppenheim.butter6'];
    const cornerHz = Math.atan(inputs.Omega_c / 2) / Math.PI;
    const { sections } = discretise({ shape: 'low-pass', family: 'butterworth', order: 6, cornerHz }, 1);
    for (const [a1, a2] of expected.sections)
      expect(sections.some((s) => Math.abs(s.a1 - a1) < 2e-4 && Math.abs(s.a2 - a2) < 2e-4)).toBe(true);
    expect(Math.abs(sections.reduce((gain, s) => gain * s.b0, 1) - expected.gain)).toBeLessThan(2e-7);
  });

  it('pre-warping puts the half-power point where it was asked for', () => {
    for (const [rateHz, cornerHz] of reference['dig.prewarp'].inputs.fs_fc) {
      const discrete = discretise({ shape: 'low-pass', family: 'butterworth', order: 3, cornerHz }, rateHz);
      expect(discreteGainDb(discrete, cornerHz)).toBeCloseTo(-10 * Math.log10(2), 10);
    }
  });
});
