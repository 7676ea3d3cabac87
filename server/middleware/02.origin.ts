import { DomainError } from '#shared/utils/errors'

const READS = new Set(['GET', 'HEAD', 'OPTIONS'])

/**
 * Every write must come from one of our own pages. Browsers send Origin on every cross-site write,
 * so a missing one is refused too.
 */
export default defineEventHandler((event) => {
  if (READS.has(event.method)) return
  const origin = getHeader(event, 'origin')
  const host = getHeader(event, 'host')
  const own = [new URL(settings().PUBLIC_URL).origin, ...(import.meta.dev && host ? [`http://${host}`] : [])]
  if (!origin || !own.includes(origin)) {
    throw toHttp(new DomainError('forbidden', 'This request did not come from a page of this site, so nothing was changed. Reload the page and try again.'), event)
  }
})
