import type { ClipFailure, ClipFailureCode } from '../types/media'

/** Failures that lie outside the file: what stood in the way may be gone the next time. */
const MAY_MEND = new Set<ClipFailureCode>(['timed-out', 'out-of-space', 'missing-object', 'internal'])

/** Whether trying again can help. Everything else is in the file itself, which no second look changes. */
export function mayMend(failure: Pick<ClipFailure, 'code'> | null): boolean {
  return failure === null || MAY_MEND.has(failure.code)
}

/** A clip whose file cannot be used, now or later: nothing can be shown of it and no captions belong to it. */
export function isBroken(clip: { failure: Pick<ClipFailure, 'code'> | null }): boolean {
  return clip.failure !== null && !mayMend(clip.failure)
}
