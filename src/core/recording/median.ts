/** Median of the values, the lower one of two; 0 of none. */
export function median(values: ArrayLike<number>): number {
  if (values.length === 0) return 0;
  return Float64Array.from(values).sort()[(values.length - 1) >> 1];
}
