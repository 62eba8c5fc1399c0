/**
 * The user's call, file or clip cannot be used as it is. The message is one sentence that says what is
 * wrong, where, and what to do; hosts print it as it stands, without a stack trace.
 */
export class InputError extends Error {
  override readonly name = 'InputError';
}

/** The work was stopped on request; nothing is wrong with the input. */
export class CancelledError extends Error {
  override readonly name = 'CancelledError';
  constructor() {
    super('Cancelled.');
  }
}
