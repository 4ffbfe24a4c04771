/**
 * The typed errors of the whole product. Expected outcomes are result values; these are broken promises.
 * `message` is a plain sentence a person can act on: what, where, what to do. It never carries a secret, SQL or a path.
 */
export abstract class TwinpassError extends Error {
  /** Stable machine name of the cause, e.g. `revision_moved`. */
  readonly code: string;
  /** HTTP status that lib/http answers with. */
  abstract readonly status: number;
  /** Facts that the caller may show beside the sentence, e.g. what moved. */
  readonly details?: Readonly<Record<string, unknown>>;

  constructor(code: string, message: string, details?: Readonly<Record<string, unknown>>) {
    super(message);
    this.name = new.target.name;
    this.code = code;
    this.details = details;
  }
}

/** No session, or an ended one. */
export class UnauthorizedError extends TwinpassError {
  readonly status = 401;
}

/** A member without the right to do this. */
export class ForbiddenError extends TwinpassError {
  readonly status = 403;
}

/** Does not exist, or belongs to another workspace: the two are never told apart. */
export class NotFoundError extends TwinpassError {
  readonly status = 404;
}

/** Wrong state or version; somebody else was first. */
export class ConflictError extends TwinpassError {
  readonly status = 409;
}

/** Larger than stated or allowed. */
export class TooLargeError extends TwinpassError {
  readonly status = 413;
}

/** Understood, but wrong: a field, a file, a declared digest. */
export class InvalidInputError extends TwinpassError {
  readonly status = 422;
}

/** Too many tries in a window. */
export class TooManyRequestsError extends TwinpassError {
  readonly status = 429;
}

/** A part we depend on (database, store, mail) does not answer; nothing was acknowledged. */
export class UnavailableError extends TwinpassError {
  readonly status = 503;
}

/** A store has no room left; nothing was acknowledged. */
export class OutOfSpaceError extends TwinpassError {
  readonly status = 507;
}

/** A file that can't be read as what it claims to be, or is in doubt. `code` is listed in lib/logs or lib/calibration. */
export class FileRefusedError extends TwinpassError {
  readonly status = 422;
}
