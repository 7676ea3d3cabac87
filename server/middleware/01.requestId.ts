import { randomUUID } from 'node:crypto'

/** One id a request, in our log lines and in the answer, so that a report can be matched to a log. */
export default defineEventHandler((event) => {
  event.context.requestId = randomUUID()
  setResponseHeader(event, 'X-Request-Id', event.context.requestId)
})
