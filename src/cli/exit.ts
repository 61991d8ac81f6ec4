import { UserError, type UserErrorKind } from '../core/user-error.ts';

/** 0 done, 1 the answer is no, 2 wrong use, 3 input cannot be used, 4 output cannot be written. */
export const EXIT = { done: 0, no: 1, usage: 2, input: 3, output: 4 } as const;

const CODES: Record<UserErrorKind, number> = { usage: EXIT.usage, input: EXIT.input, output: EXIT.output };

/** Prints a user's error as one sentence to stderr and gives its exit code; anything else is a fault of ours and is thrown on. */
export function report(error: unknown): number {
  if (!(error instanceof UserError)) throw error;
  process.stderr.write(`quietcorner: ${error.message}\n`);
  return CODES[error.kind];
}
