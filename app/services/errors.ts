/** What a service throws when it can't do what was asked. Routes turn these into answers: see middleware/answers.server.ts. */
export abstract class ServiceError extends Error {
  abstract readonly status: number;
}

/** It isn't there, or isn't in this workshop: the two look the same from outside. */
export class NotFoundError extends ServiceError {
  readonly status = 404;
  constructor(what: string) {
    super(`${what} was not found in this workshop.`);
  }
}

/** The permission table says no; the message is its reason. */
export class ForbiddenError extends ServiceError {
  readonly status = 403;
}

/** Somebody else acted first: the state or the version is not what the form was made from. */
export class ConflictError extends ServiceError {
  readonly status = 409;
}

/** Guards stand in the way; each reason is a sentence for the person. */
export class GuardError extends ServiceError {
  readonly status = 422;
  constructor(readonly reasons: readonly string[]) {
    super(reasons.join(" "));
  }
}

/** A value that passed the form's schema is impossible in this place. `field` names the form's field. */
export class InvalidInputError extends ServiceError {
  constructor(
    readonly field: string,
    message: string,
    readonly status: 400 | 413 | 415 | 422 = 422,
  ) {
    super(message);
  }
}

/** Who they say they are could not be shown: wrong mail or password, or a link that no longer counts. */
export class AuthenticationError extends ServiceError {
  readonly status = 401;
}

/** Too many failed tries; come back after `retryAfterSeconds`. */
export class ThrottledError extends ServiceError {
  readonly status = 429;
  constructor(readonly retryAfterSeconds: number) {
    const minutes = Math.ceil(retryAfterSeconds / 60);
    super(`Too many failed tries. Wait ${minutes} ${minutes === 1 ? "minute" : "minutes"} and try again.`);
  }
}

/** A part that Mainsgate depends on doesn't answer: files, mail or database. Nothing was changed. */
export class UnavailableError extends ServiceError {
  readonly status = 503;
  constructor(what: string, options?: ErrorOptions) {
    super(`${what} can't be reached just now. Nothing was changed; please try again.`, options);
  }
}
