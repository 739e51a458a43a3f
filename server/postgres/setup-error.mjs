/** Something the person can put right: the message says what to do, and no stack trace is shown. */
export class SetupError extends Error {}
