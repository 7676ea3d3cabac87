import type { ClipFailure } from '#shared/types/media'
import { DomainError } from '#shared/utils/errors'
import type { JobRun } from './context'
import { ClipFault, clipFault } from './ffmpeg/faults'
import { NoRoom } from './originals'

/** A fault of the program is not tried as often as a storage that is away: it will not mend itself. */
const TRIES_AFTER_FAULT = 3

function isOutage(error: unknown): boolean {
  return error instanceof NoRoom || (error instanceof ClipFault && error.failure.code === 'out-of-space') || (error instanceof DomainError && error.code === 'unavailable')
}

/** What to tell the builder when no further try is made; null while another one is due. */
export function giveUp(error: unknown, run: JobRun): ClipFailure | null {
  if (run.signal.aborted) return null
  if (error instanceof DomainError && error.code === 'not-found') return clipFault('missing-object').failure
  if (run.attempt < (isOutage(error) ? run.maxAttempts : Math.min(TRIES_AFTER_FAULT, run.maxAttempts))) return null
  if (error instanceof NoRoom || error instanceof ClipFault) return clipFault('out-of-space').failure
  if (isOutage(error)) return { code: 'internal', message: `The storage could not be reached, in ${run.attempt} tries over two hours. The clip is kept as uploaded. When the storage is back, try again.` }
  return clipFault('internal', reason(error)).failure
}

/** What the page shows while a job waits for its next try. */
export function whyAgain(error: unknown, run: JobRun): string {
  if (run.signal.aborted) return 'The worker was stopped. The next one takes this up by itself.'
  if (error instanceof NoRoom) return `${error.message} The clip is kept; this is tried again by itself.`
  if (error instanceof ClipFault) return 'The worker’s disk is full. The clip is kept; this is tried again by itself.'
  if (isOutage(error)) return 'The storage cannot be reached just now. The clip is kept; this is tried again by itself.'
  return `This did not work (${reason(error)}). The clip is kept; it is tried again by itself.`
}

/** The first line of an error, short, without paths of our machine. */
function reason(error: unknown): string {
  const message = error instanceof Error ? error.message : String(error)
  return message.split('\n')[0]!.replace(/(?:\/[\w.@-]+){2,}/g, '…').slice(0, 160)
}
