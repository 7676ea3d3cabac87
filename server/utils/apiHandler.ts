import type { EventHandlerRequest, H3Event } from 'h3'
import { DomainError, type ErrorCode } from '#shared/utils/errors'

const STATUS: Record<ErrorCode, number> = {
  'bad-input': 400, 'signed-out': 401, 'forbidden': 403, 'not-found': 404, 'conflict': 409,
  'too-large': 413, 'unreadable': 422, 'too-many': 429, 'unavailable': 503,
}

/** PostgreSQL and socket codes that mean "not reachable just now" rather than a fault of ours. */
const UNREACHABLE = new Set(['ECONNREFUSED', 'ECONNRESET', 'ETIMEDOUT', 'EPIPE', '57P01', '57P02', '57P03', '08006', '08001', '08003'])

/**
 * Every API handler goes through here, so that each failure reaches the browser in one form:
 * `{ statusCode, data: { code, message, … } }` with a message for people.
 */
export function apiHandler<Result>(work: (event: H3Event<EventHandlerRequest>) => Promise<Result> | Result) {
  return defineEventHandler(async (event) => {
    try {
      return await work(event)
    }
    catch (error) {
      throw toHttp(error, event)
    }
  })
}

/** Maps a failure to an HTTP error; what is not ours to explain stays a logged 500 with no details. */
export function toHttp(error: unknown, event?: H3Event) {
  if (isError(error)) return error
  if (error instanceof DomainError) return httpError(error, event)
  if (isUnreachable(error)) {
    return httpError(new DomainError('unavailable', 'The database cannot be reached just now. Nothing was changed; try again in a moment.'), event)
  }
  console.error(`[${event?.context.requestId ?? '-'}] ${event?.method} ${event?.path}`, error)
  return createError({ statusCode: 500, message: 'Something went wrong on our side. What you had saved before is kept; try again.', data: { code: 'internal', message: 'Something went wrong on our side. What you had saved before is kept; try again.' } })
}

function httpError(error: DomainError, event?: H3Event) {
  const retryAfter = error.data.retryAfterSeconds
  if (event && typeof retryAfter === 'number') setResponseHeader(event, 'Retry-After', Math.ceil(retryAfter))
  return createError({ statusCode: STATUS[error.code], message: error.message, data: { code: error.code, message: error.message, ...error.data } })
}

function isUnreachable(error: unknown): boolean {
  for (let cause = error as { code?: string, message?: string, cause?: unknown } | undefined; cause; cause = cause.cause as typeof cause) {
    if (cause.code && UNREACHABLE.has(cause.code)) return true
    if (/Connection terminated|timeout exceeded when trying to connect/.test(cause.message ?? '')) return true
  }
  return false
}
