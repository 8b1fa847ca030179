/** What a field of a form did wrong, for the place beside it. */
export type FieldErrors = Record<string, string[]>;

/** An error a person may read: a stable code, an HTTP status, a sentence that says what to do. */
export class ServiceError extends Error {
  constructor(
    readonly status: number,
    readonly code: string,
    message: string,
    readonly fields?: FieldErrors,
    readonly details?: Record<string, unknown>,
  ) {
    super(message);
    this.name = 'ServiceError';
  }
}

/** 401: nobody is signed in. */
export const unauthenticated = () => new ServiceError(401, 'sign-in', 'Please sign in first.');

/** 403: the person may see the thing but not do this to it. */
export const forbidden = (message: string) => new ServiceError(403, 'forbidden', message);

/** 404: there is no such thing, or its existence is none of this person's business. */
export const notFound = () =>
  new ServiceError(404, 'not-found', 'There is nothing at this address. Check the link, or go back to the list.');

/** 409: somebody else saved in between; both versions travel with the error. */
export const staleVersion = (what: string, mine: unknown, theirs: unknown) =>
  new ServiceError(
    409,
    'stale',
    `${what} was changed by somebody else since you opened it. Compare the two, then save again.`,
    undefined,
    { mine, theirs },
  );

/** 409: what is asked contradicts what is kept. */
export const conflict = (message: string, details?: Record<string, unknown>) =>
  new ServiceError(409, 'conflict', message, undefined, details);

/** 422: the input cannot be used; fields say where and why. */
export const invalid = (message: string, fields?: FieldErrors, details?: Record<string, unknown>) =>
  new ServiceError(422, 'invalid', message, fields, details);

/** 413: the body or file is larger than allowed. */
export const tooLarge = (message: string) => new ServiceError(413, 'too-large', message);
