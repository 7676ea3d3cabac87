import type { Storage } from '#server/adapters/storage'
import { openStorage } from '#server/adapters/openStorage'
import { type Environment, readEnvironment } from '#server/config/environment'
import { createLimits, type Limits } from '#server/services/limits'
import { createLiveListener, type LiveListener } from '#server/services/live'
import { type DatabaseHandle, openDatabase } from '#server/database/client'

let environment: Environment | undefined
let handle: DatabaseHandle | undefined
let storage: Storage | undefined

/** The checked settings of this process. */
export function settings(): Environment {
  return environment ??= readEnvironment(process.env)
}

/** The site's database, one pool a process. */
export function db() {
  return pool().database
}

export function pool(): DatabaseHandle {
  return handle ??= openDatabase(settings().DATABASE_URL, { max: 20, onIdleError: error => console.warn(`[database] a connection was lost: ${error.message}`) })
}

/** The site's object storage. */
export function store(): Storage {
  return storage ??= openStorage(settings())
}

let limiter: Limits | undefined
/** Tries are counted in PostgreSQL. RIBBAND_LIMIT_SCALE loosens them for browser tests, which come from one address. */
export function limits(): Limits {
  return limiter ??= createLimits(pool().pool, Number(process.env.RIBBAND_LIMIT_SCALE ?? 1))
}

let listener: LiveListener | undefined
/** The process's one connection that hears what other processes changed. */
export function live(): LiveListener {
  return listener ??= createLiveListener(settings().DATABASE_URL)
}
