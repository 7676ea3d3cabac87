import { eq, sql } from 'drizzle-orm'
import pg from 'pg'
import type { Database } from '#server/database/client'
import { captionTracks, clips } from '#server/database/schema'
import { failTask, setTask } from '#server/services/clipTasks'
import { CLIP_TASKS, type ClipTask } from '#shared/types/trade'
import { clipFault } from './ffmpeg/faults'

/*
 * graphile-worker gives the jobs of a worker that died back after four hours. Here it takes seconds: every worker
 * holds an advisory lock named after it on a connection of its own, which PostgreSQL drops with the connection,
 * whatever became of the process. Jobs held by a worker whose lock nobody holds are given back.
 */

const lockName = (workerId: string) => `ribband-worker:${workerId}`
/** Seen without its lock this long, a worker is dead: one that lost its connection has taken the lock again by then. */
const GRACE_MS = 2500
const RECONNECT_MS = 500

/** Holds the lock that says "this worker lives"; takes it again after the database was away. */
export class SignOfLife {
  private client: pg.Client | undefined
  private workerId: string | undefined
  private closed = false
  private retry: NodeJS.Timeout | undefined

  constructor(private readonly url: string) {}

  async hold(workerId: string): Promise<void> {
    this.workerId = workerId
    const before = this.client
    this.client = undefined
    await before?.end().catch(() => {})
    await this.connect()
  }

  async close(): Promise<void> {
    this.closed = true
    clearTimeout(this.retry)
    await this.client?.end().catch(() => {})
  }

  private async connect(): Promise<void> {
    clearTimeout(this.retry)
    if (this.closed) return
    const client = new pg.Client({ connectionString: this.url, keepAlive: true, connectionTimeoutMillis: 5000 })
    client.on('error', () => {})
    client.on('end', () => this.client === client && this.reconnectSoon())
    this.client = client
    try {
      await client.connect()
      // A machine that loses its power says no goodbye: the database must ask after it, and soon.
      await client.query('set tcp_keepalives_idle = 10; set tcp_keepalives_interval = 5; set tcp_keepalives_count = 3')
      await client.query('select pg_advisory_lock(hashtextextended($1, 0))', [lockName(this.workerId!)])
    }
    catch {
      client.end().catch(() => {})
      if (this.client === client) this.reconnectSoon()
    }
  }

  private reconnectSoon(): void {
    clearTimeout(this.retry)
    if (!this.closed) this.retry = setTimeout(() => void this.connect(), RECONNECT_MS)
  }
}

/** Gives the jobs of dead workers back. Call `look` every second or two; a worker is dead when two looks agree. */
export class DeadWorkers {
  private readonly missing = new Map<string, number>()

  constructor(private readonly database: Database, private readonly graceMs = GRACE_MS) {}

  async look(now = Date.now()): Promise<string[]> {
    const { rows } = await this.database.execute<{ id: string }>(sql`
      select id from (select distinct locked_by id from graphile_worker.jobs where locked_by is not null) held
      where pg_try_advisory_xact_lock(hashtextextended(${lockName('')} || id, 0))`)
    const lost = new Set(rows.map(row => row.id))
    for (const id of this.missing.keys()) if (!lost.has(id)) this.missing.delete(id)
    for (const id of lost) if (!this.missing.has(id)) this.missing.set(id, now)
    const dead = [...lost].filter(id => now - this.missing.get(id)! >= this.graceMs)
    if (dead.length) {
      await this.database.execute(sql`select graphile_worker.force_unlock_workers(${sql.param(dead)}::text[])`)
      await this.database.execute(sql`select pg_notify('jobs:insert', ${JSON.stringify({ count: 10 })})`)
      for (const id of dead) this.missing.delete(id)
    }
    await this.giveUpExhausted()
    return dead
  }

  /** A job that took its worker down with it as often as it may be tried: its task must not say "working" for ever. */
  private async giveUpExhausted(): Promise<void> {
    const { rows } = await this.database.execute<{ id: string, key: string }>(sql`
      select id, key from graphile_worker.jobs where locked_at is null and attempts >= max_attempts and key is not null`)
    for (const { id, key } of rows) {
      const [task, subject] = key.split(':') as [ClipTask, string]
      if (CLIP_TASKS.includes(task)) await this.giveUp(task, subject)
      await this.database.execute(sql`select graphile_worker.complete_jobs(array[${id}]::bigint[])`)
    }
  }

  private async giveUp(task: ClipTask, subject: string): Promise<void> {
    const { failure } = clipFault('internal', 'the worker ended in the middle of it every time')
    await this.database.transaction(async (tx) => {
      if (task !== 'read-captions') {
        const [clip] = await tx.select().from(clips).where(eq(clips.id, subject))
        if (clip) await failTask(tx, clip, task, failure)
        return
      }
      const [track] = await tx.update(captionTracks).set({ failure: failure.message.replace('The clip', 'The caption file'), read: false }).where(eq(captionTracks.id, subject)).returning()
      if (track?.clipId) await setTask(tx, { id: track.clipId, sessionId: track.sessionId }, task, { state: 'failed', message: failure.message })
    })
  }
}
