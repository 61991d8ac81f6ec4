import type { Head } from './dialect.ts';
import type { Dialect } from './recording.ts';
import { readToken } from './token.ts';

/** A column of the file as its head names it. */
export interface Column {
  /** 0-based field. */
  readonly field: number;
  readonly name: string;
  /** Unit as written; '' where none is clear. */
  readonly unit: string;
  /** False where most of the head's tokens are no numbers. */
  readonly numeric: boolean;
}

/** Endings of a name that are clearly a unit, in lower case, and how the unit is printed. */
const ENDINGS: Record<string, string> = {
  g: 'g',
  gs: 'g',
  mg: 'mg',
  ms2: 'm/s²',
  mps2: 'm/s²',
  'm/s2': 'm/s²',
  mps: 'm/s',
  pascals: 'Pa',
  pa: 'Pa',
  hpa: 'hPa',
  kpa: 'kPa',
  mpa: 'MPa',
  bar: 'bar',
  mbar: 'mbar',
  psi: 'psi',
  volts: 'V',
  mv: 'mV',
  uv: 'µV',
  amps: 'A',
  amperes: 'A',
  newtons: 'N',
  kn: 'kN',
  kg: 'kg',
  mm: 'mm',
  um: 'µm',
  hz: 'Hz',
  rpm: 'rpm',
  dps: '°/s',
  degc: '°C',
  celsius: '°C',
  degf: '°F',
  seconds: 's',
  sec: 's',
  percent: '%',
};

/** The columns of a file: names made whole and unique, units, and which hold numbers. */
export function readColumns({ names, units, rows, fields, dialect }: Head): Column[] {
  const parts = Array.from({ length: fields }, (_, field) => splitUnit(names[field] ?? ''));
  const named = uniqueNames(parts.map((part, field) => part.name || `column ${field + 1}`));
  return named.map((name, field) => ({
    field,
    name,
    unit: bare(units[field] ?? '') || parts[field].unit,
    numeric: mostlyNumbers(
      rows.map((row) => row[field]),
      dialect.decimal,
    ),
  }));
}

/**
 * Takes the unit off a name: `ax [g]`, `ax (m/s^2)`, `ax / g`. An ending such as `_gs` gives the unit but stays in the name.
 * A unit in brackets stays as it is written; an ending is printed in the unit's usual letters.
 */
export function splitUnit(text: string): { name: string; unit: string } {
  const name = text.trim();
  const bracketed = /^(.*?)\s*(?:\[([^\]]*)\]|\(([^()]*)\))$/.exec(name);
  if (bracketed?.[1]) return { name: bracketed[1], unit: (bracketed[2] ?? bracketed[3] ?? '').trim() };
  const divided = /^(.*\S)\s+\/\s+(\S+)$/.exec(name);
  if (divided) return { name: divided[1], unit: divided[2] };
  const ending = /[_ ]([a-z/]+2?)$/i.exec(name)?.[1];
  if (ending === 'V') return { name, unit: 'V' };
  return { name, unit: ending && Object.hasOwn(ENDINGS, ending.toLowerCase()) ? ENDINGS[ending.toLowerCase()] : '' };
}

function bare(unit: string): string {
  return unit.replace(/^[[(]|[\])]$/g, '').trim();
}

/** Gives every name once: a second `ax` becomes `ax (2)`. */
function uniqueNames(names: readonly string[]): string[] {
  const used = new Set<string>();
  return names.map((name) => {
    let unique = name;
    for (let number = 2; used.has(unique.toLowerCase()); number++) unique = `${name} (${number})`;
    used.add(unique.toLowerCase());
    return unique;
  });
}

/** True where half of the filled tokens are numbers, or none is filled. */
function mostlyNumbers(tokens: readonly string[], decimal: Dialect['decimal']): boolean {
  const filled = tokens.map((token) => readToken(token, decimal)).filter((token) => token !== 'missing');
  return 2 * filled.filter((token) => typeof token === 'number').length >= filled.length;
}
