import { randomBytes } from 'node:crypto'
import { chmodSync, mkdtempSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import pg from 'pg'
import { type DatabaseHandle, openDatabase } from '#server/database/client'
import { migrateDatabase } from '#server/database/migrate'
import { startDatabase } from '../../workers/local/database'

/** One PostgreSQL for a whole test run: TEST_DATABASE_URL from the global set-up, or a server of our own. */
export async function startTestServer(): Promise<{ url: string, stop: () => Promise<void> }> {
  const folder = mkdtempSync(join(tmpdir(), 'ribband-test-pg-'))
  chmodSync(folder, 0o755)
  const server = await startDatabase({ dataDir: join(folder, 'data'), disposable: true, databaseName: 'template_ribband' })
  await migrateDatabase(server.url)
  return {
    url: server.url,
    stop: async () => {
      await server.stop()
      rmSync(folder, { recursive: true, force: true })
    },
  }
}

export interface TestDatabase extends DatabaseHandle { url: string, name: string, drop: () => Promise<void> }

/**
 * A fresh database for one test file, cloned from the migrated template (some 50 ms).
 * `drop()` fails the file when it left a connection busy.
 */
export async function testDatabase(): Promise<TestDatabase> {
  const template = process.env.TEST_DATABASE_URL
  if (!template) throw new Error('TEST_DATABASE_URL is not set: run through vitest, whose global set-up starts PostgreSQL.')
  const name = `test_${randomBytes(6).toString('hex')}`
  const admin = await administer(template, client => client.query(`create database ${name} template template_ribband`))
  const url = withDatabase(template, name)
  const handle = openDatabase(url)
  return {
    ...handle,
    url,
    name,
    drop: async () => {
      const busy = await handle.pool.query(`select query from pg_stat_activity where datname = $1 and state like '%in transaction%' and pid <> pg_backend_pid()`, [name])
      await handle.close()
      await admin(client => client.query(`drop database if exists ${name} with (force)`))
      if (busy.rowCount) throw new Error(`A transaction was left open by: ${busy.rows[0].query}`)
    },
  }
}

function withDatabase(url: string, name: string): string {
  const copy = new URL(url)
  copy.pathname = `/${name}`
  return copy.toString()
}

async function administer(template: string, first: (client: pg.Client) => Promise<unknown>) {
  const run = async (work: (client: pg.Client) => Promise<unknown>) => {
    const client = new pg.Client({ connectionString: withDatabase(template, 'postgres') })
    await client.connect()
    try {
      await work(client)
    }
    finally {
      await client.end()
    }
  }
  await run(first)
  return run
}
