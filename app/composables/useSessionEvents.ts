import type { LiveEvent } from '#server/services/live'

interface Handlers {
  event: (event: LiveEvent) => void
  /** Events may have been missed: read everything again. */
  gap: () => void
}

/** The site sends a beat every 15 s; silence for longer means a dead line that nobody has noticed. */
const SILENCE_MS = 40_000
const FIRST_WAIT_MS = 1000
const LONGEST_WAIT_MS = 20_000

/**
 * Hears what changes in a session, from anybody and from the media worker. Reconnects for ever; after every
 * reconnection and every gap the page is told to read everything again.
 */
export function useSessionEvents(sessionId: () => string, on: Handlers) {
  const connected = ref(false)
  let source: EventSource | undefined
  let silence: ReturnType<typeof setTimeout> | undefined
  let retry: ReturnType<typeof setTimeout> | undefined
  let wait = FIRST_WAIT_MS
  let heardBefore = false

  function open(): void {
    close()
    source = new EventSource(`/api/sessions/${sessionId()}/events`)
    source.onmessage = message => hear(JSON.parse(message.data as string))
    // The browser's own retries stop for good at an error answer (a site that restarts): ours do not.
    source.onerror = again
    listenForSilence()
  }

  function hear(event: LiveEvent | { kind: 'hello' | 'beat' | 'gap' }): void {
    listenForSilence()
    if (event.kind === 'beat') return
    if (event.kind === 'hello' || event.kind === 'gap') {
      connected.value = true
      wait = FIRST_WAIT_MS
      if (heardBefore || event.kind === 'gap') on.gap()
      heardBefore = true
      return
    }
    on.event(event as LiveEvent)
  }

  function again(): void {
    close()
    retry = setTimeout(open, wait)
    wait = Math.min(LONGEST_WAIT_MS, wait * 2)
  }

  function listenForSilence(): void {
    clearTimeout(silence)
    silence = setTimeout(again, SILENCE_MS)
  }

  function close(): void {
    connected.value = false
    clearTimeout(silence)
    clearTimeout(retry)
    source?.close()
    source = undefined
  }

  onMounted(open)
  onBeforeUnmount(close)
  watch(sessionId, () => {
    heardBefore = false
    if (source || retry) open()
  })
  return { connected }
}
