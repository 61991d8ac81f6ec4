import { type Complex, divide, minus, plus, times } from './complex.ts';

/**
 * All poles of the Bessel low-pass of an order (Thomson 1949), scaled so that the gain is −3.0103 dB at 1 rad/s.
 * Conjugate pairs are exact mirror images and a real pole has im = 0; right to 4 parts in 10¹⁴ at order 8.
 */
export function besselPoles(order: number): readonly Complex[] {
  const roots = mirrored(rootsOf(reverseBessel(order)));
  const scale = halfPowerFrequency(roots);
  return roots.map(({ re, im }) => ({ re: re / scale, im: im / scale }));
}

/** Coefficients of the reverse Bessel polynomial, constant first: (2n−k)! / (2^(n−k)·k!·(n−k)!). */
function reverseBessel(order: number): readonly number[] {
  const factorial = (n: number): number => (n <= 1 ? 1 : n * factorial(n - 1));
  return Array.from(
    { length: order + 1 },
    (_, k) => factorial(2 * order - k) / (2 ** (order - k) * factorial(k) * factorial(order - k)),
  );
}

/** All roots of a real polynomial (constant first, leading coefficient 1) at once: Aberth 1973, Mathematics of Computation 27:339. */
function rootsOf(coefficients: readonly number[]): Complex[] {
  const order = coefficients.length - 1;
  const radius = coefficients[0] ** (1 / order);
  let roots: Complex[] = Array.from({ length: order }, (_, k) => {
    const angle = (2 * Math.PI * (k + 0.25)) / order;
    return { re: radius * Math.cos(angle), im: radius * Math.sin(angle) };
  });
  for (let round = 0; round < 60; round++) {
    roots = roots.map((root, k) => {
      const newton = divide(...evaluate(coefficients, root));
      const repulsion = roots
        .filter((_, j) => j !== k)
        .map((other) => divide({ re: 1, im: 0 }, minus(root, other)))
        .reduce(plus, { re: 0, im: 0 });
      const step = divide(newton, minus({ re: 1, im: 0 }, times(newton, repulsion)));
      return minus(root, step);
    });
  }
  return roots;
}

/** Value and derivative of a polynomial, by Horner's rule. */
function evaluate(coefficients: readonly number[], at: Complex): [Complex, Complex] {
  let value: Complex = { re: 0, im: 0 };
  let slope: Complex = { re: 0, im: 0 };
  for (const coefficient of [...coefficients].reverse()) {
    slope = plus(times(slope, at), value);
    value = plus(times(value, at), { re: coefficient, im: 0 });
  }
  return [value, slope];
}

/** Upper half plane kept, lower one mirrored from it; what stands on the real axis but for rounding is put upon it. */
function mirrored(roots: readonly Complex[]): Complex[] {
  return roots
    .filter((root) => root.im > -1e-9)
    .flatMap((root) => (root.im < 1e-9 ? [{ re: root.re, im: 0 }] : [root, { re: root.re, im: -root.im }]));
}

/** Frequency in rad/s at which the power gain of an all-pole low-pass of unit gain at 0 is a half; bisection, the gain being monotone. */
function halfPowerFrequency(poles: readonly Complex[]): number {
  const powerGain = (w: number) =>
    poles.reduce((gain, { re, im }) => (gain * (re * re + im * im)) / (re * re + (w - im) ** 2), 1);
  let low = 0;
  let high = 16;
  for (let round = 0; round < 80; round++) {
    const middle = (low + high) / 2;
    if (powerGain(middle) > 0.5) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}
