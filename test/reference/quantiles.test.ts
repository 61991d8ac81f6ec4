import { describe, expect, it } from 'vitest';
import { chiSquareQuantile, fQuantile, fUpperTail } from '../../src/core/spectrum/quantiles.ts';
import many from './chi-square-many.json' with { type: 'json' };
import reference from './quantiles.json' with { type: 'json' };

describe('χ² quantiles', () => {
  const table = reference['chi2.quantiles'];

  it(`agree with ${table.source} (${table.provenance})`, () => {
    table.inputs.nu.forEach((dof, i) => {
      const { p0_95, p0_975, p0_99 } = table.expected;
      expect(Math.abs(chiSquareQuantile(0.95, dof) - p0_95[i])).toBeLessThan(table.tolerance.abs);
      expect(Math.abs(chiSquareQuantile(0.975, dof) - p0_975[i])).toBeLessThan(table.tolerance.abs);
      expect(Math.abs(chiSquareQuantile(0.99, dof) - p0_99[i])).toBeLessThan(table.tolerance.abs);
    });
  });

  it(`give the 90 % limits of a density (${reference['welch.ci.90'].source}, ${reference['welch.ci.90'].provenance})`, () => {
    const { inputs, expected, tolerance } = reference['welch.ci.90'];
    inputs.nu.forEach((dof, i) => {
      expect(Math.abs(dof / chiSquareQuantile(0.95, dof) / expected.lower[i] - 1)).toBeLessThan(tolerance.rel);
      expect(Math.abs(dof / chiSquareQuantile(0.05, dof) / expected.upper[i] - 1)).toBeLessThan(tolerance.rel);
    });
  });
});

describe(`χ² quantiles with many degrees of freedom (${many.source}, ${many.provenance}; scripts/chi_square_many.py)`, () => {
  it.each(many.inputs.dof.map((dof, row) => [dof, many.expected[row]] as const))('%d', (dof, expected) => {
    many.inputs.p.forEach((p, column) => {
      expect(Math.abs(chiSquareQuantile(p, dof) / expected[column] - 1)).toBeLessThan(many.tolerance.rel);
    });
  });
});

describe('F quantiles', () => {
  it.each([reference['F.upper.0.05'], reference['F.upper.0.01'], reference['F.upper.0.001']])(
    '$quantity, $id: $source ($provenance)',
    ({ inputs, expected, tolerance }) => {
      let worst = 0;
      inputs.nu2.forEach((dof2, row) => {
        inputs.nu1.forEach((dof1, column) => {
          const found = fQuantile(1 - inputs.alpha, dof1, dof2);
          worst = Math.max(worst, Math.abs(found / expected[row][column] - 1));
        });
      });
      expect(worst).toBeLessThan(tolerance.rel);
    },
  );

  const handbook = reference['book.nist.F'];
  it.each(handbook.expected)(
    `upper %d point with %d and %d degrees of freedom is %d (${handbook.source}, ${handbook.provenance})`,
    (alpha, dof1, dof2, value) => {
      const loose = value > 4000 ? handbook.tolerance['first_row_alpha_0.01_abs'] : handbook.tolerance.abs;
      expect(Math.abs(fQuantile(1 - alpha, dof1, dof2) - value)).toBeLessThan(loose);
    },
  );

  const batches = reference['book.nist.Ftest'];
  it(`compare two batches (${batches.source}; ${batches.provenance})`, () => {
    const { s1, s2, df1, df2, alpha } = batches.inputs;
    const ratio = s1 ** 2 / s2 ** 2;
    expect(Math.abs(ratio - batches.expected.F)).toBeLessThan(batches.tolerance.F_abs);
    expect(Math.abs(fQuantile(alpha / 2, df1, df2) - batches.expected.lower_crit)).toBeLessThan(
      batches.tolerance.crit_abs,
    );
    expect(Math.abs(fQuantile(1 - alpha / 2, df1, df2) - batches.expected.upper_crit)).toBeLessThan(
      batches.tolerance.crit_abs,
    );
    expect(fUpperTail(ratio, df1, df2)).toBeCloseTo(batches.expected.p_upper_tail, 6);
  });

  it(`compare two spectra of few averages (${reference['F.psd_ratio'].source})`, () => {
    const { expected, tolerance } = reference['F.psd_ratio'];
    for (const [active, quiet, five] of expected)
      expect(Math.abs(fQuantile(0.95, 2 * active, 2 * quiet) / five - 1)).toBeLessThan(tolerance.rel);
  });

  it(`hold far out in the tail, family-wise over many bins (${reference['F.psd_ratio.multi'].source})`, () => {
    const { expected, tolerance } = reference['F.psd_ratio.multi'];
    for (const [bins, averages, , , bonferroni] of expected)
      expect(Math.abs(fQuantile(1 - 0.05 / bins, 2 * averages, 2 * averages) / bonferroni - 1)).toBeLessThan(
        tolerance.rel,
      );
  });

  it('are the reciprocals of each other with swapped degrees of freedom', () => {
    const { inputs, expected } = reference['F.symmetry'];
    expect(fQuantile(inputs.a, inputs.n1, inputs.n2)).toBeCloseTo(expected.lower, 10);
    expect(1 / fQuantile(1 - inputs.a, inputs.n2, inputs.n1)).toBeCloseTo(expected.check, 10);
  });
});
