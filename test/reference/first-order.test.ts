import { describe, expect, it } from 'vitest';
import type { Filter } from '../../src/core/filter/filter.ts';
import { noiseBandwidthHz } from '../../src/core/filter/noise-bandwidth.ts';
import { cornerForGain, gain, gainDb, groupDelaySeconds, phaseRadians } from '../../src/core/filter/response.ts';
import { stepFigures, stepResponse } from '../../src/core/filter/step.ts';
import reference from './first-order.json' with { type: 'json' };

const pole = (cornerHz: number): Filter => ({ shape: 'low-pass', family: 'rc', order: 1, cornerHz });
const SECONDS_PER_TAU = 1 / (2 * Math.PI);

describe('one-pole RC low-pass', () => {
  const response = reference['rc.response'];

  it.each(response.inputs.f_over_fc.map((ratio, i) => [ratio, i]))(
    `gain and phase at %d corners (${response.provenance})`,
    (ratio, i) => {
      expect(gainDb(pole(7), 7 * ratio)).toBeCloseTo(response.expected.dB[i], 9);
      expect((phaseRadians(pole(7), 7 * ratio) * 180) / Math.PI).toBeCloseTo(response.expected.phase_deg[i], 9);
    },
  );

  it('rises in 0.35/corner (common practice), ln 9/(2π·corner) exactly', () => {
    const { riseSeconds } = stepFigures(pole(1));
    expect(riseSeconds).toBeCloseTo(reference['rc.rise.exact'].expected.tr_times_fc, 9);
    expect(Math.abs(riseSeconds - reference['rc.rise.common'].expected.tr_times_fc)).toBeLessThan(0.001);
  });

  it('settles to 1 % after 4.605 time constants (t = −τ·ln 0.01), without overshoot', () => {
    const { error } = reference['rc.settle'].inputs;
    const { t_over_tau } = reference['rc.settle'].expected;
    const figures = stepFigures(pole(1));
    expect(figures.settlingSeconds).toBeCloseTo(t_over_tau[error.indexOf(0.01)] * SECONDS_PER_TAU, 9);
    expect(figures.overshoot).toBe(0);
    const left = stepResponse(
      pole(1),
      Float64Array.from(t_over_tau, (t) => t * SECONDS_PER_TAU),
    ).map((y) => 1 - y);
    left.forEach((value, i) => {
      expect(value).toBeCloseTo(error[i], 9);
    });
  });

  it('delays by τ/(1 + (f/corner)²)', () => {
    const { inputs, expected } = reference['rc.delay'];
    inputs.f_over_fc.forEach((ratio, i) => {
      expect(groupDelaySeconds(pole(1), ratio)).toBeCloseTo(expected.group_delay_over_tau[i] * SECONDS_PER_TAU, 12);
    });
  });

  it('has a noise bandwidth of π/2 corners', () => {
    expect(noiseBandwidthHz(pole(4)) / 4).toBeCloseTo(reference['rc.enbw'].expected.enbw_over_fc, 11);
  });

  it('passes 0.707 at the corner and a tenth a decade above it, falling 20 dB a decade (common practice)', () => {
    expect(gain(pole(5), 5)).toBeCloseTo(reference['rc.gain.at_fc.common'].expected.gain, 3);
    expect(gain(pole(5), 50)).toBeCloseTo(0.1, 2);
    const slope = gainDb(pole(1), 10000) - gainDb(pole(1), 1000);
    expect(Math.abs(slope - reference['rc.slope.common'].expected.dB_per_decade)).toBeLessThan(0.05);
  });

  it('needs a corner of 7.02 f for 1 % of loss at f, and so on', () => {
    const { inputs, expected } = reference['rc.sine_amplitude_droop'];
    inputs.error.forEach((error, i) => {
      const shape = { shape: 'low-pass', family: 'rc', order: 1 } as const;
      expect(cornerForGain(shape, 1, -20 * Math.log10(1 - error))).toBeCloseTo(expected.fc_over_f[i], 8);
    });
  });
});
