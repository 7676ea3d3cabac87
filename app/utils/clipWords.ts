import type { ClipView } from '#shared/types/session'

/** How the program found a clip's place on the session's clock. */
export function placedBy(clip: Pick<ClipView, 'recordedAtSource'>): string {
  switch (clip.recordedAtSource) {
    case 'container': return 'by the time in the file'
    case 'name': return 'by the time in its name'
    case 'hand': return 'by the time you gave'
    default: return 'after the clip before it'
  }
}
