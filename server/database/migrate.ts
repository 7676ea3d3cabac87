import { drizzle } from 'drizzle-orm/node-postgres'
import { migrate } from 'drizzle-orm/node-postgres/migrator'
import { Logger, runMigrations } from 'graphile-worker'
import pg from 'pg'

/** Any number, the same in every process: only one of several starting sites migrates at a time. */
const MIGRATION_LOCK = 7242601

/** Brings our tables and the job queue's up to date. Safe to run from several processes at once. */
export async function migrateDatabase(url: string, migrationsFolder = './drizzle'): Promise<void> {
  const client = new pg.Client({ connectionString: url })
  await client.connect()
  try {
    await client.query('select pg_advisory_lock($1)', [MIGRATION_LOCK])
    await migrate(drizzle(client), { migrationsFolder })
    await runMigrations({ connectionString: url, logger: silent })
  }
  finally {
    await client.end()
  }
}

const silent = new Logger(() => () => {})
