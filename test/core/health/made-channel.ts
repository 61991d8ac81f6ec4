import { ChannelHealthFold, type Judged, judge, sampleFindings } from '../../../src/core/health/channel-health.ts';
import type { Finding, Role } from '../../../src/core/health/finding.ts';
import { ActivityFold } from '../../../src/core/spectrum/stationary.ts';
import { type SeededRandom, seededRandom } from '../../campaign/seeded-random.ts';

export const RATE_HZ = 200;

/** Samples of a function of their index and of seeded numbers. */
export function made(samples: number, seed: number, value: (i: number, random: SeededRandom) => number): Float64Array {
  const random = seededRandom(seed);
  return Float64Array.from({ length: samples }, (_, i) => value(i, random));
}

/** Rounds to whole steps. */
export function rounded(value: number, step: number): number {
  return Number((Math.round(value / step) * step).toPrecision(12));
}

/** A channel judged from its runs, cut into blocks of a length. */
export function judged(runs: readonly Float64Array[], role: Role = 'quiet', blockSamples = 65_536): Judged {
  const health = new ChannelHealthFold({ rateHz: RATE_HZ });
  const activity = new ActivityFold({ rateHz: RATE_HZ });
  let runStart = 0;
  for (const samples of runs) {
    for (let from = 0; from < samples.length; from += blockSamples) {
      const block = samples.slice(from, from + blockSamples);
      health.push(block, block, from === 0, runStart + from / RATE_HZ);
      activity.push(block, from === 0, runStart + from / RATE_HZ);
    }
    runStart += samples.length / RATE_HZ + 10;
  }
  return judge(health.result(), activity.result(), {
    channel: { name: 'a', unit: 'g', column: 2 },
    role,
    rateHz: RATE_HZ,
  });
}

/** What a single run's samples show. */
export function found(samples: Float64Array, role: Role = 'quiet'): Finding[] {
  return sampleFindings(judged([samples], role));
}

/** Severity and kind of each finding. */
export function named(findings: readonly Finding[]): string[] {
  return findings.map(({ severity, kind }) => `${severity}: ${kind}`);
}
