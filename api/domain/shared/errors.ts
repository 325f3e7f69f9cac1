/** A reason for refusing an act, said to the person. */
export interface Reason {
  readonly code: string;
  readonly message: string;
}

/** The user's errors: said to them, beside the field where there is one. Anything else is ours or operational. */
export class NotFound extends Error {
  constructor(what: string) {
    super(`There is no such ${what}.`);
    this.name = 'NotFound';
  }
}

/** The act is not possible in the present state; every reason at once. Answers 409. */
export class Refused extends Error {
  constructor(readonly reasons: readonly Reason[]) {
    super(reasons.map((reason) => reason.message).join(' '));
    this.name = 'Refused';
  }
}

/** Fields that the schema cannot judge alone. Answers 422. */
export class InvalidInput extends Error {
  constructor(readonly errors: readonly { readonly path: string; readonly message: string }[]) {
    super(errors.map((error) => `${error.path}: ${error.message}`).join('; '));
    this.name = 'InvalidInput';
  }
}

/** Signed in, but not allowed to do this to this thing. Answers 403. */
export class Forbidden extends Error {
  constructor(message: string) {
    super(message);
    this.name = 'Forbidden';
  }
}

/** Somebody else changed it first. Answers 412. */
export class ChangedMeanwhile extends Error {
  constructor(what: string) {
    super(`This ${what} was changed by somebody else meanwhile. Read it again; what you typed is still on your screen.`);
    this.name = 'ChangedMeanwhile';
  }
}
