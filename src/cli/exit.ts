import { UserError, type UserErrorKind } from '../core/user-error.ts';

/** 0 done, 1 the answer is no, 2 wrong use, 3 input cannot be used, 4 output cannot be written. */
export const EXIT = { done: 0, no: 1, usage: 2, input: 3, output: 4 } as const;

const CODES: Record<UserErrorKind, number> = { usage: EXIT.usage, input: EXIT.input, output: EXIT.output };

/**
 * Prints an error as one sentence to stderr and gives its exit code. What is not a user's error is a fault of ours: it says so,
 * and shows where it arose only if QUIETCORNER_TRACE is set.
 */
export function report(error: unknown): number {
  if (error instanceof UserError) {
    process.stderr.write(`quietcorner: ${error.message}\n`);
    return CODES[error.kind];
  }
  const { message, stack } = error instanceof Error ? error : new Error(String(error));
  const trace = process.env['QUIETCORNER_TRACE'] ? `\n${stack}` : '';
  process.stderr.write(
    `quietcorner: a fault of the program itself, not of your files: ${message}; please report it together with the files.${trace}\n`,
  );
  return EXIT.input;
}
