import { hertz } from '../figure.ts';
import { MAINS_DEVIATION, MAINS_HZ, mainsName } from './mains.ts';

/** A line with the uncertainty of its frequency, Hz. */
export interface MeasuredLine {
  readonly frequencyHz: number;
  readonly toleranceHz: number;
}

/** Highest harmonic looked for in a machine's family and in a network's. */
const HIGHEST = 10;
const HIGHEST_MAINS = 20;
/** A machine's family is believed where chance would make as many members less often than this. */
const CHANCE = 0.02;

/**
 * Names the harmonic family of each line, in the order given: 'mains 50 Hz × 2', '24.3 Hz × 3', or null for a line of its own.
 * The first and second harmonic of a supply network are recognised alone; higher ones need one of these beside them.
 * Any other family needs its fundamental and a harmonic (2 to 10) of it, within the uncertainty of the frequencies, and more
 * members than chance would explain.
 */
export function nameFamilies(lines: readonly MeasuredLine[]): (string | null)[] {
  const names = new Array<string | null>(lines.length).fill(null);
  nameMains(lines, names);
  nameMachines(lines, names);
  return names;
}

function nameMains(lines: readonly MeasuredLine[], names: (string | null)[]): void {
  for (const lowest of [1, 2]) {
    for (const nominalHz of MAINS_HZ) {
      const base = lines.findIndex(
        (line, i) => names[i] === null && isHarmonic(line, nominalHz, lowest, MAINS_DEVIATION),
      );
      if (base < 0) continue;
      names[base] = mainsName(nominalHz, lowest);
      // The network's momentary frequency is known now, as well as the line that showed it.
      const networkHz = lines[base].frequencyHz / lowest;
      const known = lines[base].toleranceHz / lines[base].frequencyHz;
      lines.forEach((line, i) => {
        const harmonic = Math.round(line.frequencyHz / networkHz);
        if (names[i] !== null || harmonic <= lowest || harmonic > HIGHEST_MAINS) return;
        if (isHarmonic(line, networkHz, harmonic, known)) names[i] = mainsName(nominalHz, harmonic);
      });
    }
  }
}

function isHarmonic(line: MeasuredLine, fundamentalHz: number, harmonic: number, deviation: number): boolean {
  const expectedHz = harmonic * fundamentalHz;
  return Math.abs(line.frequencyHz - expectedHz) <= expectedHz * deviation + line.toleranceHz;
}

interface Family {
  readonly fundamental: number;
  readonly members: readonly { readonly index: number; readonly harmonic: number }[];
}

/** Largest family first; a line belongs to one family only. */
function nameMachines(lines: readonly MeasuredLine[], names: (string | null)[]): void {
  for (;;) {
    const families = lines.flatMap((_, i) => familyOn(i, lines, names) ?? []);
    if (families.length === 0) return;
    const best = families.reduce((a, b) => (b.members.length > a.members.length ? b : a));
    const base = lines[best.fundamental].frequencyHz;
    const name = (harmonic: number) => `${hertz(base, 3)} × ${harmonic}`;
    names[best.fundamental] = name(1);
    for (const { index, harmonic } of best.members) names[index] = name(harmonic);
  }
}

function familyOn(
  fundamental: number,
  lines: readonly MeasuredLine[],
  names: readonly (string | null)[],
): Family | null {
  if (names[fundamental] !== null) return null;
  const base = lines[fundamental];
  const members: { index: number; harmonic: number }[] = [];
  let byChance = 0;
  lines.forEach((line, index) => {
    const harmonic = Math.round(line.frequencyHz / base.frequencyHz);
    if (index === fundamental || names[index] !== null || harmonic < 2 || harmonic > HIGHEST) return;
    const toleranceHz = harmonic * base.toleranceHz + line.toleranceHz;
    byChance += Math.min(1, (2 * toleranceHz) / base.frequencyHz);
    if (Math.abs(line.frequencyHz - harmonic * base.frequencyHz) <= toleranceHz) members.push({ index, harmonic });
  });
  return members.length > 0 && chanceOfAsMany(members.length, byChance) < CHANCE ? { fundamental, members } : null;
}

/** Probability of `count` or more where `expected` are expected (Poisson). */
function chanceOfAsMany(count: number, expected: number): number {
  let term = Math.exp(-expected);
  let below = 0;
  for (let n = 0; n < count; n++) {
    below += term;
    term *= expected / (n + 1);
  }
  return 1 - below;
}
