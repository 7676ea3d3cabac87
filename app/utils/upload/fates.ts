import type { SessionDetail } from '#shared/types/session'

export type Footage = Pick<SessionDetail, 'clips' | 'tracks'>
interface Sent { sessionId: string, clipId: string | null, trackId: string | null }

/** What became of a file that arrived: words for what is wrong, '' when it is fine, null while nobody knows. */
export function fateOf({ clipId, trackId }: Omit<Sent, 'sessionId'>, { clips, tracks }: Footage): string | null {
  if (trackId) {
    const track = tracks.find(one => one.id === trackId)
    if (!track || track.failure) return track?.failure ?? ''
    if (track.doubt) return `${track.doubt} Does it belong to another clip?`
    // A file that waits for its clip is read without being kept as read: nothing more is to be heard of it here.
    return track.read || !track.clipId ? '' : null
  }
  const clip = clips.find(one => one.id === clipId)
  if (!clip) return ''
  if (clip.state === 'failed') return clip.failure?.message ?? 'The clip could not be read. The file is kept as uploaded.'
  return clip.durationMs === null ? null : ''
}

/** Waits between looks, ms; the last again and again up to the number of looks. */
const WAITS_MS = [1000, 2000, 4000, 8000, 15_000]
const MOST_LOOKS = 60

interface Outside {
  entry: (id: number) => Sent | undefined
  look: (sessionId: string) => Promise<Footage>
  tell: (id: number, broken: string) => void
}

/**
 * Finds out what becomes of files after they have arrived, for the list of uploads, which outlives the session's page:
 * "uploaded" must not stand beside a file that cannot be used. All files of a session are asked about at once.
 */
export function followFates({ entry, look, tell }: Outside) {
  const open = new Map<string, Set<number>>()

  function follow(id: number): void {
    const sent = entry(id)
    if (!sent) return
    const ids = open.get(sent.sessionId)
    if (ids) return void ids.add(id)
    open.set(sent.sessionId, new Set([id]))
    void ask(sent.sessionId, 0)
  }

  async function ask(sessionId: string, looks: number): Promise<void> {
    await new Promise(resolve => setTimeout(resolve, WAITS_MS[Math.min(looks, WAITS_MS.length - 1)]))
    const ids = open.get(sessionId)!
    const footage = await look(sessionId).catch(() => null)
    for (const id of [...ids]) {
      const sent = entry(id)
      const fate = sent ? footage && fateOf(sent, footage) : ''
      if (fate === null) continue
      if (fate) tell(id, fate)
      ids.delete(id)
    }
    if (ids.size && looks < MOST_LOOKS) return ask(sessionId, looks + 1)
    open.delete(sessionId)
  }

  return { follow }
}
