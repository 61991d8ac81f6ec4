import { describe, expect, it } from 'vitest';
import { stepFigures } from '../../src/core/filter/step.ts';
import reference from './step-response.json' with { type: 'json' };

const ORDERS = ['1', '2', '3', '4', '5', '6', '7', '8'] as const;
const CORNER_HZ = 1 / (2 * Math.PI);

describe.each([
  ['butterworth', reference['step.butterworth'], reference['gd0.butterworth']],
  ['bessel', reference['step.bessel_3dB'], reference['gd0.bessel_3dB']],
] as const)('step response of %s', (family, step, delay) => {
  it.each(ORDERS)(`order %s: rise, overshoot, settling to 1 %%, delay at 0 Hz (${step.provenance})`, (order) => {
    const [rise, , overshootPercent, settling] = step.expected[order];
    const found = stepFigures({ shape: 'low-pass', family, order: Number(order), cornerHz: CORNER_HZ });
    expect(Math.abs(found.riseSeconds / rise - 1)).toBeLessThan(step.tolerance.rise_rel);
    expect(Math.abs(100 * found.overshoot - overshootPercent)).toBeLessThan(step.tolerance.overshoot_abs);
    expect(Math.abs(found.settlingSeconds - settling)).toBeLessThan(step.tolerance.settle_abs);
    expect(Math.abs(found.delaySeconds / delay.expected[order] - 1)).toBeLessThan(1e-9);
  });
});
