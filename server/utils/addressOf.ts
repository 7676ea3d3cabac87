import type { H3Event } from 'h3'

/**
 * The address that limits are counted by. X-Forwarded-For is believed only as far as proxies of ours wrote it:
 * what stands further left is whatever the visitor sent.
 */
export function addressOf(event: H3Event): string {
  const proxies = settings().TRUSTED_PROXIES
  const forwarded = proxies ? getHeader(event, 'x-forwarded-for')?.split(',').map(one => one.trim()) ?? [] : []
  return (proxies ? forwarded.at(-proxies) : undefined) ?? getRequestIP(event) ?? 'unknown'
}
