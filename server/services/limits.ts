import type pg from 'pg'
import { RateLimiterPostgres, RateLimiterRes } from 'rate-limiter-flexible'
import { DomainError } from '#shared/utils/errors'

/** How often something may be tried, per address and per account. */
const LIMITS = {
  'sign-in-address': { points: 40, duration: 15 * 60 },
  'sign-in-account': { points: 10, duration: 15 * 60 },
  'sign-up-address': { points: 20, duration: 60 * 60 },
  'search-address': { points: 300, duration: 60 },
} as const
export type LimitName = keyof typeof LIMITS

/**
 * Limits kept in PostgreSQL, so that they hold over every site process and a restart.
 * `scale` loosens them for browser tests, which all come from one address.
 */
export function createLimits(pool: pg.Pool, scale = 1) {
  const limiters = Object.fromEntries(Object.entries(LIMITS).map(([name, limit]) => [name, new RateLimiterPostgres({
    storeClient: pool, storeType: 'client', tableName: 'rate_limits', tableCreated: true, keyPrefix: name, ...limit, points: limit.points * scale,
  })])) as Record<LimitName, RateLimiterPostgres>

  return {
    /** @throws DomainError `too-many` with `retryAfterSeconds`. */
    async spend(name: LimitName, key: string): Promise<void> {
      try {
        await limiters[name].consume(key)
      }
      catch (error) {
        if (!(error instanceof RateLimiterRes)) throw error
        const seconds = Math.ceil(error.msBeforeNext / 1000)
        throw new DomainError('too-many', `Too many tries. Wait ${seconds < 90 ? `${seconds} seconds` : `${Math.ceil(seconds / 60)} minutes`} and try again.`, { retryAfterSeconds: seconds })
      }
    },
    async forgive(name: LimitName, key: string): Promise<void> {
      await limiters[name].delete(key)
    },
  }
}
export type Limits = ReturnType<typeof createLimits>
