import type { PrototypeSection } from '../filter/filter.ts';
import { respond } from '../filter/response.ts';
import type { Evidence } from './evidence.ts';

/** What a filter at one corner would do to signal and noise. */
export interface ExpectedError {
  /** Mean-square error against the signal delayed by `delaySeconds`, unit². */
  readonly errorPower: number;
  /** Noise behind the filter, unit². */
  readonly noisePower: number;
  /** Signal power behind the filter over that before it. */
  readonly signalKept: number;
  /** The single delay that suits the signal best, seconds. */
  readonly delaySeconds: number;
}

/**
 * Expected mean-square error ∫ |1 − H·e^{jωτ}|² S_signal + |H|² S_noise df without needing the signal's own spectrum:
 * Σ |1 − H·e^{jωτ}|² P_active + Σ (2·Re(H·e^{jωτ}) − 1) P_noise has the same expectation (Stein 1981; Mallows 1973).
 * H is the discrete filter that is simulated: the bilinear transform answers at f as the prototype at tan(πf/rate)/tan(π·corner/rate).
 * Never below the Wiener bound, which the estimate may undershoot by chance. The delay is the best one unless it is fixed.
 */
export function expectedError(
  evidence: Evidence,
  sections: readonly PrototypeSection[],
  cornerHz: number,
  fixedDelaySeconds?: number,
): ExpectedError {
  const { rateHz, frequencyHz, tangent, active, noise, signal } = evidence;
  const corner = Math.tan((Math.PI * cornerHz) / rateHz);
  const points = frequencyHz.length;
  const magnitude = new Float64Array(points);
  const phase = new Float64Array(points);
  let moment = 0;
  let weight = 0;
  let kept = 0;
  let noisePower = 0;
  for (let i = 0; i < points; i++) {
    const [m, p] = respond(sections, tangent[i] / corner);
    magnitude[i] = m;
    phase[i] = p;
    const omega = 2 * Math.PI * frequencyHz[i];
    moment -= signal[i] * m * omega * p;
    weight += signal[i] * m * omega * omega;
    kept += signal[i] * m * m;
    noisePower += noise[i] * m * m;
  }
  // Least squares of phase + ω·τ weighted by the signal comes near the best τ; Newton's method goes the rest of the way.
  const start = weight > 0 ? moment / weight : 0;
  const delaySeconds = fixedDelaySeconds ?? refineDelay(evidence, magnitude, phase, start);
  let errorPower = 0;
  for (let i = 0; i < points; i++) {
    const m = magnitude[i];
    const real = m * Math.cos(phase[i] + 2 * Math.PI * frequencyHz[i] * delaySeconds);
    errorPower += (1 + m * m - 2 * real) * active[i] + (2 * real - 1) * noise[i];
  }
  return {
    errorPower: Math.max(errorPower, evidence.wienerPower),
    noisePower,
    signalKept: evidence.signalPower > 0 ? kept / evidence.signalPower : 1,
    delaySeconds,
  };
}

const ROUNDS = 3;

/** Delay in seconds at which Σ signal·|H|·cos(phase + ω·delay) is largest, by Newton's method from `start`. */
function refineDelay(evidence: Evidence, magnitude: Float64Array, phase: Float64Array, start: number): number {
  const { frequencyHz, signal } = evidence;
  let delay = start;
  for (let round = 0; round < ROUNDS; round++) {
    let slope = 0;
    let curvature = 0;
    for (let i = 0; i < signal.length; i++) {
      if (signal[i] <= 0) continue;
      const omega = 2 * Math.PI * frequencyHz[i];
      const angle = phase[i] + omega * delay;
      const weight = signal[i] * magnitude[i] * omega;
      slope += weight * Math.sin(angle);
      curvature += weight * omega * Math.cos(angle);
    }
    // Far from the maximum the curve bends the other way, and a step would lead off.
    if (!(curvature > 0)) return delay;
    delay -= slope / curvature;
  }
  return delay;
}
