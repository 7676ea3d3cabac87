import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres'
import pg from 'pg'
import * as schema from './schema'

export type Database = NodePgDatabase<typeof schema>
/** Inside `database.transaction`. Services take either, so that callers decide what is one transaction. */
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0]
export type Executor = Database | Transaction

export interface DatabaseHandle {
  database: Database
  pool: pg.Pool
  close: () => Promise<void>
}

/**
 * Opens a pool. A connection that breaks while idle (the database was restarted) is dropped by the pool;
 * without a listener that event would end the process.
 */
export function openDatabase(url: string, options: { max?: number, onIdleError?: (error: Error) => void } = {}): DatabaseHandle {
  const pool = new pg.Pool({ connectionString: url, max: options.max ?? 10, connectionTimeoutMillis: 5000 })
  pool.on('error', error => options.onIdleError?.(error))
  return { database: drizzle(pool, { schema }), pool, close: () => pool.end() }
}
