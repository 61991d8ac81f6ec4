import type { Band } from '../spectrum/spectrum.ts';

/**
 * Corner in Hz with the least error within `allowed`: a scan in equal ratios, then golden-section search around its best
 * (Kiefer 1953). `error` may be any continuous function of the corner.
 */
export function leastErrorCorner(allowed: Band, error: (cornerHz: number) => number): number {
  const { lowHz, highHz } = allowed;
  if (!(highHz > lowHz)) return highHz;
  const steps = Math.min(24, Math.max(3, Math.ceil(Math.log2(highHz / lowHz) * 6)));
  const at = (part: number) => lowHz * (highHz / lowHz) ** part;
  let best = 0;
  let least = Number.POSITIVE_INFINITY;
  for (let step = 0; step <= steps; step++) {
    const value = error(at(step / steps));
    if (value < least) {
      least = value;
      best = step;
    }
  }
  const golden = (Math.sqrt(5) - 1) / 2;
  let from = Math.max(0, best - 1) / steps;
  let to = Math.min(steps, best + 1) / steps;
  let inner = [to - golden * (to - from), from + golden * (to - from)];
  let values = inner.map((part) => error(at(part)));
  for (let round = 0; round < 14; round++) {
    if (values[0] <= values[1]) {
      to = inner[1];
      inner = [to - golden * (to - from), inner[0]];
      values = [error(at(inner[0])), values[0]];
    } else {
      from = inner[0];
      inner = [inner[1], from + golden * (to - from)];
      values = [values[1], error(at(inner[1]))];
    }
  }
  const found = at(values[0] <= values[1] ? inner[0] : inner[1]);
  // The minimum may stand on the border, which the search only approaches.
  return [found, lowHz, highHz].reduce((a, b) => (error(b) <= error(a) ? b : a));
}

/**
 * The roundest corner near `cornerHz` that stays within `allowed` and costs no more than `tolerance` of error power:
 * the optimum is flat, and people build and say round numbers.
 */
export function roundCorner(
  cornerHz: number,
  allowed: Band,
  error: (cornerHz: number) => number,
  tolerance: number,
): number {
  const most = error(cornerHz) + tolerance;
  const decade = 10 ** Math.floor(Math.log10(cornerHz));
  for (const step of [decade, decade / 2, decade / 10, decade / 20, decade / 100]) {
    const below = Math.floor(cornerHz / step);
    const serving = [below - 1, below, below + 1, below + 2]
      .map((count) => Number((count * step).toPrecision(12)))
      .filter((corner) => corner > 0 && corner >= allowed.lowHz && corner <= allowed.highHz)
      .filter((corner) => error(corner) <= most)
      .sort((a, b) => Math.abs(a - cornerHz) - Math.abs(b - cornerHz));
    if (serving.length > 0) return serving[0];
  }
  return cornerHz;
}
