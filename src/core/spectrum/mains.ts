/** Nominal frequencies of supply networks, Hz: railways of central Europe, public supply, aircraft and ships. */
export const MAINS_HZ = [50, 60, 16.7, 400] as const;

/**
 * Public supply in a large network keeps within 0.5 % nearly always (EN 50160 allows 1 % for 99.5 % of a year; that 0.2 Hz
 * is seldom left is common practice); railways and aircraft are taken alike. As a part of the frequency.
 */
export const MAINS_DEVIATION = 0.004;

/** Name of the nth harmonic of a network, as reports show it. */
export function mainsName(nominalHz: number, harmonic: number): string {
  return `mains ${nominalHz} Hz × ${harmonic}`;
}
