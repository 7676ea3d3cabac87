import { sql } from 'drizzle-orm'
import pg from 'pg'
import type { Executor } from '../database/client'

/** Something in a session changed; pages that show it read it again. Small: NOTIFY carries 8 kB at most. */
export interface LiveEvent {
  sessionId: string
  /** `pencil`: the program has changed what it proposes, chapters, facts and pick-ups alike. */
  kind: 'clip' | 'task' | 'chapter' | 'captions' | 'session' | 'pencil' | 'fact' | 'pickup'
  /** The clip, chapter or track that changed. */
  id: string
  /** For tasks: what the page shows without reading anything again. */
  task?: { clipId: string, task: string, state: string, progress: number, message: string }
  /** Who did it, so that a page can tell its own echo from another person's work. */
  by?: string | null
}

const CHANNEL = 'ribband_live'

/** Tells every site process, when the caller's transaction commits and not before. */
export async function announce(executor: Executor, event: LiveEvent): Promise<void> {
  await executor.execute(sql`select pg_notify(${CHANNEL}, ${JSON.stringify(event)})`)
}

/**
 * One listening connection a process, shared by all pages that watch. Reconnects for ever;
 * `onGap` tells watchers that events may have been missed, so that they read everything again.
 */
export function createLiveListener(url: string) {
  const watchers = new Map<string, Set<(event: LiveEvent | 'gap') => void>>()
  let client: pg.Client | undefined
  let closed = false
  let retry: NodeJS.Timeout | undefined

  async function connect(): Promise<void> {
    if (closed) return
    const next = new pg.Client({ connectionString: url, keepAlive: true })
    next.on('error', () => next.end().catch(() => {}))
    next.on('end', () => {
      if (client === next) client = undefined
      if (!closed) retry = setTimeout(connect, 500)
    })
    next.on('notification', ({ payload }) => {
      const event = JSON.parse(payload ?? '{}') as LiveEvent
      for (const tell of watchers.get(event.sessionId) ?? []) tell(event)
    })
    try {
      await next.connect()
      await next.query(`listen ${CHANNEL}`)
      client = next
      for (const set of watchers.values()) for (const tell of set) tell('gap')
    }
    catch {
      next.end().catch(() => {})
      if (!closed) {
        clearTimeout(retry)
        retry = setTimeout(connect, 500)
      }
    }
  }

  const started = connect()
  return {
    /** Resolves when listening (or when the first try has failed and a retry is due). */
    started,
    /** Returns the function that stops watching. */
    watch(sessionId: string, tell: (event: LiveEvent | 'gap') => void): () => void {
      const set = watchers.get(sessionId) ?? new Set()
      set.add(tell)
      watchers.set(sessionId, set)
      return () => {
        set.delete(tell)
        if (!set.size) watchers.delete(sessionId)
      }
    },
    async close(): Promise<void> {
      closed = true
      clearTimeout(retry)
      await client?.end().catch(() => {})
    },
  }
}
export type LiveListener = ReturnType<typeof createLiveListener>
