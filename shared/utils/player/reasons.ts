import type { ClipView } from '#shared/types/session'

/** Why a clip cannot be played now, and how far the remedy is (0–1, null when nobody can say). */
export interface NotPlayable { words: string, progress: number | null }

/** Null when it can be played. `fault` is what the browser said of it, if anything. */
export function whyNotPlayable(clip: Pick<ClipView, 'state' | 'src' | 'failure' | 'tasks'>, fault?: string): NotPlayable | null {
  const task = (name: string) => clip.tasks.find(one => one.task === name && (one.state === 'working' || one.state === 'waiting'))
  const copy = task('make-proxy')
  if (clip.src !== null && !fault) return null
  if (copy) return { words: 'This browser cannot show the file as it was filmed. A copy for watching is being made; the file itself stays as it is.', progress: copy.state === 'working' ? copy.progress : null }
  if (fault) return { words: fault, progress: null }
  if (clip.state === 'failed') return { words: clip.failure?.message ?? 'Something went wrong with this clip. The file is kept as uploaded.', progress: null }
  if (clip.state === 'uploading') return { words: 'This clip is not here yet: its upload is still under way, or was interrupted.', progress: null }
  if (clip.state === 'ready') return { words: 'There is no copy of this clip that a browser can play. See the clip’s row below for what went wrong.', progress: null }
  return { words: 'The program is finding out what this clip holds. It can be played in a moment.', progress: task('probe-clip')?.progress ?? null }
}
