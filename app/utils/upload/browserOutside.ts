import type { PartAddresses, UploadBegun } from '#shared/types/uploads'
import { combineHashes, fingerprintOf, sha256Of } from './hashing'
import { putPart } from './putPart'
import type { UploadOutside } from './types'

type Api = <T>(path: string, options?: { method?: 'POST', body?: unknown }) => Promise<T>

/** A browser may claim to be online when it is not: after this an upload tries anyway. */
const TRY_ANYWAY_MS = 5000

/** The site, the storage and the browser, as an upload sees them. */
export function browserOutside(api: Api, sessionId: string): UploadOutside {
  return {
    begin: input => api<UploadBegun>(`/api/sessions/${sessionId}/clips`, { method: 'POST', body: input }),
    addresses: (clipId, partNumbers) => api<PartAddresses>(`/api/clips/${clipId}/upload/parts`, { method: 'POST', body: { partNumbers } }),
    complete: (clipId, parts) => api(`/api/clips/${clipId}/upload/complete`, { method: 'POST', body: { parts } }),
    put: putPart,
    fingerprint: fingerprintOf,
    hash: sha256Of,
    combine: combineHashes,
    online: () => navigator.onLine,
    whenOnline: signal => wait(TRY_ANYWAY_MS, signal, 'online'),
    sleep: wait,
    now: () => performance.now(),
  }
}

/** Resolves after `ms`, or at the window's event `until` if that comes first. */
function wait(ms: number, signal: AbortSignal, until?: string): Promise<void> {
  return new Promise((resolve, reject) => {
    const end = (act: () => void) => {
      clearTimeout(timer)
      signal.removeEventListener('abort', stop)
      if (until) window.removeEventListener(until, come)
      act()
    }
    const come = () => end(resolve)
    const stop = () => end(() => reject(signal.reason))
    const timer = setTimeout(come, ms)
    signal.addEventListener('abort', stop, { once: true })
    if (until) window.addEventListener(until, come, { once: true })
    if (signal.aborted) stop()
  })
}
