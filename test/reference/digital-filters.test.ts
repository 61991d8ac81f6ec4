import { describe, expect, it } from 'vitest';
import { discreteGain, discreteGainDb, discretePhaseRadians, discretise } from '../../src/core/filter/discretise.ts';
import type { Family, Filter } from '../../src/core/filter/filter.ts';
import { alphaForms, stepInvariantOnePole } from '../../src/core/filter/one-pole.ts';
import { FilterFold } from '../../src/core/filter/run.ts';
import reference from './digital-filters.json' with { type: 'json' };
import vectors from './discrete-filters-scipy.json' with { type: 'json' };

interface Design {
  inputs: { family: string; order: number; fc_Hz: number; fs_Hz: number };
  expected: { f_Hz: number[]; abs_H: number[]; phase_deg: (number | null)[] };
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

/** Distance between two wrapped phases, radians: half a turn up is half a turn down. */
const turnedApart = (a: number, b: number) => Math.abs(Math.asin(Math.sin((a - b) / 2)) * 2);

describe('bilinear, pre-warped designs against scipy.signal (computed with scipy 1.10)', () => {
  it('covers both families', () => {
    expect(new Set(designs.map(([, design]) => design.inputs.family))).toEqual(new Set(['butter', 'bessel']));
  });

  it.each(designs)('%s: gain and phase', (_id, design) => {
    const discrete = discretise(filterOf(design), design.inputs.fs_Hz);
    design.expected.f_Hz.forEach((f, i) => {
      expect(Math.abs(discreteGain(discrete, f) - design.expected.abs_H[i])).toBeLessThan(1e-9);
      const phase = design.expected.phase_deg[i];
      // At half of the rate the gain is 0 and there is no phase.
      if (phase !== null)
        expect(turnedApart(discretePhaseRadians(discrete, f), (phase * Math.PI) / 180)).toBeLessThan(1e-8);
    });
  });
});

describe(`corners from a thousandth to nearly half of the rate against ${vectors.source} (${vectors.provenance})`, () => {
  const { rateHz, shares } = vectors.inputs;
  let seed = 20011;
  const samples = Float64Array.from({ length: 50 }, (_, i) => {
    seed = (16807 * seed) % 2147483647;
    return seed / 2147483647 - 0.5 + (i >= 15 ? 2 : 0) + 9.81;
  });

  it.each(vectors.expected)('$family, order $order, corner $cornerHz Hz', (expected) => {
    const { order, cornerHz } = expected;
    const discrete = discretise({ shape: 'low-pass', family: expected.family as Family, order, cornerHz }, rateHz);
    expect(discrete.sections).toHaveLength(expected.denominators.length);
    for (const [a1, a2] of expected.denominators)
      expect(Math.min(...discrete.sections.map((s) => Math.hypot(s.a1 - a1, s.a2 - a2)))).toBeLessThan(1e-12);
    shares.forEach((share, i) => {
      expect(Math.abs(discreteGain(discrete, share * rateHz) / expected.gain[i] - 1)).toBeLessThan(1e-9);
      expect(turnedApart(discretePhaseRadians(discrete, share * rateHz), expected.phase[i])).toBeLessThan(1e-9);
    });
    new FilterFold(discrete).push(samples, true).forEach((value, i) => {
      expect(Math.abs(value / expected.filtered[i] - 1)).toBeLessThan(1e-9);
    });
  });
});

describe('step-invariant one pole, α = 1 − e^(−T/RC)', () => {
  const forms = reference['dig.ema.alpha'];

  it.each(forms.expected)(
    `rate %d Hz, corner %d Hz: α, and the corner that it makes (${forms.provenance})`,
    (...row) => {
      const [rateHz, cornerHz, exact, common, , , cornerOfExact, cornerOfCommon] = row as number[];
      const found = alphaForms(cornerHz, rateHz);
      expect(Math.abs(found.exact / exact - 1)).toBeLessThan(forms.tolerance.rel);
      expect(Math.abs(found.common / common - 1)).toBeLessThan(forms.tolerance.rel);
      expect(Math.abs(found.commonCornerError - (cornerOfCommon / cornerHz - 1))).toBeLessThan(1e-9);
      const filter = stepInvariantOnePole(cornerHz, rateHz);
      // Null where the gain has not fallen by 3 dB at half of the rate.
      if (cornerOfExact === null) expect(discreteGain(filter, rateHz / 2)).toBeGreaterThan(Math.SQRT1_2);
      else expect(Math.abs(discreteGain(filter, cornerOfExact) - Math.SQRT1_2)).toBeLessThan(1e-9);
    },
  );

  it('answers a step as the analog pole does, one sample on: 1 − e^(−t/τ) (any circuits textbook)', () => {
    const output = new FilterFold(stepInvariantOnePole(3, 50)).push(Float64Array.of(0, 1, 1, 1, 1), true);
    output.forEach((value, i) => {
      expect(Math.abs(value + Math.expm1((-2 * Math.PI * 3 * i) / 50))).toBeLessThan(1e-14);
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
