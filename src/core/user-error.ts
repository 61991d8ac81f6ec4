/** What the user can mend: a wrong call, an input that cannot be used, or an output that cannot be written. */
export type UserErrorKind = 'usage' | 'input' | 'output';

/**
 * The only error users meet. The message is one clear sentence: what was found, where (file, row, column), what to do.
 * `kind` decides the exit code of the command line.
 */
export class UserError extends Error {
  override readonly name = 'UserError';
  readonly kind: UserErrorKind;

  constructor(kind: UserErrorKind, message: string) {
    super(message);
    this.kind = kind;
  }
}
