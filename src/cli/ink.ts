/** Emphasis in the terminal; plain text where colours are unwanted. */
export interface Ink {
  readonly bold: (text: string) => string;
  readonly faint: (text: string) => string;
  readonly good: (text: string) => string;
  readonly careful: (text: string) => string;
  readonly bad: (text: string) => string;
}

/** Emphasis for a stream: off where it is no terminal or NO_COLOR is set and not empty (no-color.org). */
export function inkFor(stream: { readonly isTTY?: boolean }, environment: NodeJS.ProcessEnv): Ink {
  const on = stream.isTTY === true && !environment['NO_COLOR'];
  const paint = (code: number) => (text: string) => (on ? `\x1b[${code}m${text}\x1b[0m` : text);
  return { bold: paint(1), faint: paint(2), good: paint(32), careful: paint(33), bad: paint(31) };
}
