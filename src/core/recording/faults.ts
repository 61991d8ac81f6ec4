/** One token that could not be read. */
export interface Fault {
  /** 1-based line of the file. */
  readonly line: number;
  /** 0-based field; -1 for a whole row that has too few or too many fields. */
  readonly field: number;
  readonly text: string;
}

/** Longest text of a fault that is kept. */
const TEXT_LENGTH = 40;

/** Faults of one field, or of the rows as a whole. */
export interface FaultCount {
  /** Rows whose first fault stands here. */
  rows: number;
  readonly first: Fault[];
}

/** Collects what could not be read: counts, and the first five places of each field. */
export class Faults {
  private readonly byField = new Map<number, FaultCount>();
  private lastLine = 0;
  /** Line of an incomplete last row that was dropped; 0 where there is none. */
  incompleteLine = 0;

  add(line: number, field: number, text: string): void {
    let count = this.byField.get(field);
    if (!count) {
      count = { rows: 0, first: [] };
      this.byField.set(field, count);
    }
    if (line !== this.lastLine) count.rows++;
    this.lastLine = line;
    if (count.first.length < 5) count.first.push({ line, field, text: shortened(text) });
  }

  /** Faults of the given fields (and of whole rows, field -1), in the order of the file. */
  of(fields: readonly number[]): FaultCount {
    const counts = [-1, ...fields].flatMap((field) => this.byField.get(field) ?? []);
    return {
      rows: counts.reduce((sum, count) => sum + count.rows, 0),
      first: counts
        .flatMap((count) => count.first)
        .sort((a, b) => a.line - b.line || a.field - b.field)
        .slice(0, 5),
    };
  }
}

function shortened(text: string): string {
  const clean = text.trim().replace(/\p{Cc}/gu, '·');
  return clean.length > TEXT_LENGTH ? `${clean.slice(0, TEXT_LENGTH)}…` : clean;
}
