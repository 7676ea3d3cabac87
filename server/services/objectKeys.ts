/**
 * Where things lie in the storage. Made from ids alone, never from a user's file name, and such that
 * everything of a clip or caption file can be removed by its prefix.
 */
export const clipPrefix = (clipId: string) => `clips/${clipId}/`
export const originalKey = (clipId: string) => `${clipPrefix(clipId)}original`
export const trackPrefix = (trackId: string) => `captions/${trackId}/`
export const trackKey = (trackId: string) => `${trackPrefix(trackId)}original`

/** The clip or caption file that an object belongs to; null for anything else in the bucket. */
export function ownerOf(key: string): { kind: 'clip' | 'track', id: string } | null {
  const found = /^(clips|captions)\/([0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12})\//.exec(key)
  return found ? { kind: found[1] === 'clips' ? 'clip' : 'track', id: found[2]! } : null
}
