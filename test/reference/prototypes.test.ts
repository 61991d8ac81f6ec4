import { describe, expect, it } from 'vitest';
import { besselPoles } from '../../src/core/filter/bessel.ts';
import { prototypeSections } from '../../src/core/filter/families.ts';
import { noiseBandwidthHz } from '../../src/core/filter/noise-bandwidth.ts';
import { cornerForGain, gainDb } from '../../src/core/filter/response.ts';
import reference from './prototypes.json' with { type: 'json' };

const ORDERS = ['1', '2', '3', '4', '5', '6', '7', '8'] as const;

describe.each([
  ['butterworth', reference['proto.butterworth'], reference['att.butterworth']],
  ['bessel', reference['proto.bessel_3dB'], reference['att.bessel_3dB']],
] as const)('%s prototypes', (family, poles, attenuation) => {
  it.each(ORDERS)(`order %s: pole frequencies and Q (${poles.source}, ${poles.provenance})`, (order) => {
    const bySize = (a: { f0: number; Q: number | null }, b: { f0: number; Q: number | null }) =>
      (a.Q ?? 0) - (b.Q ?? 0);
    const wanted = [...poles.expected[order]].sort(bySize);
    const found = prototypeSections(family, Number(order));
    expect(found).toHaveLength(wanted.length);
    found.forEach(({ frequency, q }, i) => {
      expect(Math.abs(frequency / wanted[i].f0 - 1)).toBeLessThan(1e-10);
      if (wanted[i].Q === null) expect(q).toBeNull();
      else expect(Math.abs((q as number) / wanted[i].Q - 1)).toBeLessThan(1e-10);
    });
  });

  it.each(ORDERS)('order %s: attenuation from a tenth to twenty corners (scipy)', (order) => {
    attenuation.inputs.f_over_fc.forEach((ratio, i) => {
      const found = -gainDb({ shape: 'low-pass', family, order: Number(order), cornerHz: 3 }, 3 * ratio);
      expect(Math.abs(found - attenuation.expected[order][i])).toBeLessThan(1e-8);
    });
  });
});

describe('published tables', () => {
  const bond = reference['book.bond.bessel'];
  it.each(ORDERS)(`Bessel poles, order %s (${bond.source})`, (order) => {
    const upper = besselPoles(Number(order)).filter((pole) => pole.im >= 0);
    for (const [re, im] of bond.expected[order])
      expect(Math.min(...upper.map((pole) => Math.hypot(pole.re - re, pole.im - im)))).toBeLessThan(1e-9);
  });

  const handbook = reference['book.opamps_for_everyone.butterworth'];
  it.each(ORDERS)(`Butterworth Q to two decimals, order %s (${handbook.source})`, (order) => {
    const printed = (handbook.expected[order] as (number | null)[][]).flatMap((row) =>
      row[3] === null ? [] : [row[3]],
    );
    const found = prototypeSections('butterworth', Number(order)).flatMap(({ q }) => (q === null ? [] : [q]));
    expect(found).toHaveLength(printed.length);
    [...printed]
      .sort((a, b) => a - b)
      .forEach((q, i) => {
        expect(Math.abs(found[i] - q)).toBeLessThan(0.0051);
      });
  });

  it('corner that attenuates 50 Hz by so many dB, Butterworth orders 1 to 4', () => {
    const { inputs, expected } = reference['rc.cutoff_for_atten'];
    inputs.order.forEach((order, row) => {
      inputs.A_dB.forEach((attenuationDb, column) => {
        const found = cornerForGain({ shape: 'low-pass', family: 'butterworth', order }, 50, attenuationDb);
        expect(Math.abs(found / expected.fc_Hz_rows_order_cols_A[row][column] - 1)).toBeLessThan(1e-9);
      });
    });
  });

  it(`noise bandwidth of Butterworth orders 1 to 8 (${reference['enbw.table'].source})`, () => {
    for (let order = 1; order <= 8; order++) {
      const bandwidth = noiseBandwidthHz({ shape: 'low-pass', family: 'butterworth', order, cornerHz: 1 });
      expect(Math.abs(bandwidth - reference['enbw.table'].expected.butterworth[order - 1])).toBeLessThan(2e-6);
    }
  });
});
