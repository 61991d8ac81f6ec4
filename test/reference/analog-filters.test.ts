import { describe, expect, it } from 'vitest';
import { prototypeSections } from '../../src/core/filter/families.ts';
import type { Filter } from '../../src/core/filter/filter.ts';
import { noiseBandwidthHz } from '../../src/core/filter/noise-bandwidth.ts';
import { groupDelaySeconds, phaseRadians } from '../../src/core/filter/response.ts';
import { stepFigures, stepResponse } from '../../src/core/filter/step.ts';
import reference from './analog-filters-scipy.json' with { type: 'json' };

const ORDERS = ['1', '2', '3', '4', '5', '6', '7', '8'] as const;
const { ratios, times } = reference.inputs;
const TOLERANCE = reference.tolerance.rel;

describe.each(['butterworth', 'bessel'] as const)(
  `%s against ${reference.source} (${reference.provenance})`,
  (family) => {
    describe.each(ORDERS)('order %s', (order) => {
      const expected = reference.expected[family][order];
      /** Its time unit, 1/(2π·corner), is a second. */
      const filter: Filter = { shape: 'low-pass', family, order: Number(order), cornerHz: 1 / (2 * Math.PI) };
      const near = (found: number, wanted: number) =>
        expect(Math.abs(found - wanted)).toBeLessThanOrEqual(TOLERANCE * Math.abs(wanted));

      it('pole frequencies and Q', () => {
        const sections = prototypeSections(family, Number(order));
        expect(sections).toHaveLength(expected.sections.length);
        sections.forEach(({ frequency, q }, i) => {
          const [wantedFrequency, wantedQ] = expected.sections[i];
          near(frequency, wantedFrequency as number);
          if (wantedQ === null) expect(q).toBeNull();
          else near(q as number, wantedQ);
        });
      });

      it('continuous phase and group delay from a hundredth to fifty corners', () => {
        ratios.forEach((ratio, i) => {
          near(phaseRadians(filter, ratio * filter.cornerHz), expected.phase[i]);
          near(groupDelaySeconds(filter, ratio * filter.cornerHz), expected.groupDelay[i]);
        });
      });

      it('step response, its rise, settling to 1 % and overshoot', () => {
        stepResponse(filter, Float64Array.from(times)).forEach((value, i) => {
          // Of the end value: where the answer of a high order has hardly begun, its terms cancel.
          expect(Math.abs(value - expected.step[i])).toBeLessThan(TOLERANCE);
        });
        const { riseSeconds, settlingSeconds, overshoot } = stepFigures(filter);
        near(riseSeconds, expected.rise);
        near(settlingSeconds, expected.settling);
        near(overshoot, expected.overshoot);
      });

      it('noise bandwidth', () => {
        near(noiseBandwidthHz({ ...filter, cornerHz: 1 }), expected.noiseBandwidth);
      });
    });
  },
);
