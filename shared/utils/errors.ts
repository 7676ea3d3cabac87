/** Kinds of failure that people meet. Each maps to one HTTP status in server/utils/httpErrors.ts. */
export type ErrorCode
  = 'bad-input' // 400: the request cannot be read or breaks a rule
  | 'signed-out' // 401: nobody is signed in
  | 'forbidden' // 403: may be seen, may not be changed by this role
  | 'not-found' // 404: is not there, or may not be seen
  | 'conflict' // 409: somebody else changed it, or it would overlap or duplicate
  | 'too-large' // 413
  | 'unreadable' // 422: a file that cannot be read as what it claims to be
  | 'too-many' // 429: limited; data.retryAfterSeconds
  | 'unavailable' // 503: database, storage or mail cannot be reached

/** A field of the input and what is wrong with it, for forms. */
export interface FieldIssue { path: string, message: string }

/**
 * The one error that services and domain code throw on purpose.
 * `message` is written for people: what happened, what was kept, what to do.
 * `data` travels to the browser as it is, so it must hold nothing secret.
 */
export class DomainError extends Error {
  constructor(
    readonly code: ErrorCode,
    message: string,
    readonly data: Record<string, unknown> & { issues?: FieldIssue[] } = {},
    options?: { cause?: unknown },
  ) {
    super(message, options)
    this.name = 'DomainError'
  }
}

/** Answers for what may not be seen the same as for what is not there. */
export function notFound(what: string): DomainError {
  return new DomainError('not-found', `${what} was not found. It may have been removed, or it is not shared with you.`)
}
