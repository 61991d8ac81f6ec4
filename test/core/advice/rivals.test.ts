import { describe, expect, it } from 'vitest';
import { layEvidence } from '../../../src/core/advice/evidence.ts';
import { allowedCorners, type Contest, rivals } from '../../../src/core/advice/rivals.ts';
import { choose } from '../../../src/core/advice/verdict.ts';
import { powersOf, spectrumOf } from './synthetic.ts';

const LIMITS = { droopDb: 0.5, rejectionDb: 20 };

/** Flat signal up to `keepHighHz` in white noise, with a line of noise. */
function contest(options: {
  keepHighHz: number;
  firstLineHz: number | null;
  noise?: number;
  rateHz?: number;
}): Contest {
  const { keepHighHz, firstLineHz, noise = 0.01, rateHz = 200 } = options;
  const grid = { rateHz, binHz: 0.02, dof: 50 };
  const disturbed = (f: number) => noise + (firstLineHz !== null && Math.abs(f - firstLineHz) < 0.02 ? 100 * noise : 0);
  const active = spectrumOf({ ...grid, density: (f) => (f <= keepHighHz ? 1 : 0) + disturbed(f) });
  const quiet = spectrumOf({ ...grid, density: disturbed });
  const evidence = layEvidence(powersOf(active), powersOf(quiet), quiet, {
    rateHz,
    noiseGainPower: 1,
    keep: { lowHz: 0, highHz: keepHighHz },
    signalHighHz: keepHighHz,
    inUse: [],
  });
  return { limits: LIMITS, keepHighHz, firstLineHz, highestCornerHz: 0.45 * rateHz, nominal: true, evidence };
}

describe('one pole, keep 1 Hz, reject 30 Hz at 20 dB (common practice: corner 30/√99 = 3.015 Hz, half a decibel lost at 1 Hz)', () => {
  const given = contest({ keepHighHz: 1, firstLineHz: 30 });

  it('leaves corners from 2.863 Hz to 3.015 Hz', () => {
    const allowed = allowedCorners(given, 'rc', 1);
    expect(allowed.lowHz).toBeCloseTo(1 / Math.sqrt(10 ** 0.05 - 1), 9);
    expect(allowed.highHz).toBeCloseTo(30 / Math.sqrt(99), 9);
  });

  it('is advised at 3.0 Hz', () => {
    const [rc] = rivals(given);
    expect(rc).toMatchObject({ family: 'rc', order: 1, cornerHz: 3, fails: [] });
    expect(rc.droopDb).toBeCloseTo(0.46, 2);
    expect(rc.rejectionDb).toBeCloseTo(20.04, 2);
  });

  it.each([0.0001, 0.001, 0.1, 1])('whatever the noise density (%d of the signal)', (noise) => {
    expect(rivals(contest({ keepHighHz: 1, firstLineHz: 30, noise }))[0].cornerHz).toBe(3);
  });
});

describe('rivals', () => {
  it('keep the limits exactly where they say so', () => {
    for (const firstLineHz of [2.5, 4, 8, 30]) {
      for (const rival of rivals(contest({ keepHighHz: 1, firstLineHz }))) {
        expect(rival.fails.includes('droop')).toBe(rival.droopDb > LIMITS.droopDb + 1e-6);
        expect(rival.fails.includes('rejection')).toBe((rival.rejectionDb as number) < LIMITS.rejectionDb - 1e-6);
        expect([...rival.meets, ...rival.fails].sort()).toEqual(['droop', 'rejection']);
      }
    }
  });

  it('have no rejection where there is no line', () => {
    for (const rival of rivals(contest({ keepHighHz: 1, firstLineHz: null }))) expect(rival.rejectionDb).toBeNull();
  });

  it('never beat the Wiener bound', () => {
    for (const rival of rivals(contest({ keepHighHz: 1, firstLineHz: 10 })))
      expect(rival.wienerRatio).toBeGreaterThanOrEqual(1);
  });
});

describe('choose', () => {
  const verdictOf = (given: Contest, within: number[] = []) => choose(given, rivals(given), within);

  it('takes the simplest filter that meets the limits', () => {
    expect(verdictOf(contest({ keepHighHz: 1, firstLineHz: 40 }))).toMatchObject({
      verdict: 'clear',
      rival: { order: 1 },
    });
    expect(verdictOf(contest({ keepHighHz: 1, firstLineHz: 12 }))).toMatchObject({
      verdict: 'clear',
      rival: { order: 2 },
    });
  });

  it('needs a higher order the less room there is', () => {
    const orders = [40, 12, 4, 2.6, 1.9].map(
      (line) => verdictOf(contest({ keepHighHz: 1, firstLineHz: line })).rival.order,
    );
    expect([...orders].sort((a, b) => a - b)).toEqual(orders);
    expect(new Set(orders).size).toBeGreaterThan(3);
  });

  it('calls it a compromise where no filter up to order 8 meets both limits', () => {
    const choice = verdictOf(contest({ keepHighHz: 1, firstLineHz: 1.45 }));
    expect(choice.verdict).toBe('compromise');
    expect(choice.rival.fails.length).toBeGreaterThan(0);
  });

  it('calls it inseparable where a strong line stands within the keep band, and where noise fills it', () => {
    const given = contest({ keepHighHz: 1, firstLineHz: 30 });
    expect(verdictOf(given, [0.5 * given.evidence.noisePower])).toMatchObject({
      verdict: 'inseparable',
      overlap: 'line within',
    });
    const loud = contest({ keepHighHz: 1, firstLineHz: 30, noise: 0.5 });
    expect(verdictOf(loud)).toMatchObject({ verdict: 'inseparable', overlap: 'noise within' });
  });

  it('calls it inseparable where the line is upon the keep-band edge', () => {
    expect(verdictOf(contest({ keepHighHz: 1, firstLineHz: 1.02 }))).toMatchObject({ overlap: 'line too near' });
  });
});
