import type { SessionDetail } from '#shared/types/session'
import type { ClipTask, TaskState } from '#shared/types/trade'
import type { LiveEvent } from '#server/services/live'

/** Several changes within this are read in one go. */
const GATHER_MS = 150

/** Read on their own; the session's detail holds none of them. */
const OWN_LISTS = new Set<LiveEvent['kind']>(['chapter', 'pencil', 'fact', 'pickup'])

/**
 * A session's detail, kept true while the page stands: progress is put in as it comes, everything else is read again.
 * `onEvent` hears every event besides (chapters, captions), `onGap` when those must be read again too.
 */
export function useLiveSession(sessionId: () => string, more: { onEvent?: (event: LiveEvent) => void, onGap?: () => void } = {}) {
  const { data: session, error, status, refresh } = useApiData<SessionDetail>(() => `session:${sessionId()}`, () => `/api/sessions/${sessionId()}`)
  const readSoon = useDebounceFn(() => refresh(), GATHER_MS, { maxWait: 1000 })

  const { connected } = useSessionEvents(sessionId, {
    event: (event) => {
      if (event.kind === 'task' && event.task) putTask(event.task)
      else if (!OWN_LISTS.has(event.kind)) void readSoon()
      more.onEvent?.(event)
    },
    gap: () => {
      void readSoon()
      more.onGap?.()
    },
  })

  function putTask({ clipId, task, state, progress, message }: NonNullable<LiveEvent['task']>): void {
    const clip = session.value?.clips.find(one => one.id === clipId)
    if (!clip) return void readSoon()
    const view = { task: task as ClipTask, state: state as TaskState, progress, message }
    session.value = { ...session.value!, clips: session.value!.clips.map(one => one === clip ? { ...clip, tasks: [...clip.tasks.filter(known => known.task !== task), view] } : one) }
  }

  return { session, error, status, refresh, connected }
}
