import type { WatchChapter, WatchClip } from '../types/watch'
import { OPERATION_WORDS } from './operations'
import { formatSeconds } from './timecode'

/**
 * schema.org VideoObject for each clip with its chapters as Clip parts (offsets in seconds), as
 * https://schema.org/VideoObject and https://schema.org/Clip describe them. A clip without a picture or a
 * playable source is left out: both are required.
 */
export function videoData({ site, address, title, description, clips, chapters }: { site: string, address: string, title: string, description: string, clips: WatchClip[], chapters: WatchChapter[] }): Record<string, unknown>[] {
  return clips.filter(clip => clip.src && clip.poster).map((clip) => {
    const page = `${site}/watch/${address}/moments/${clip.id}`
    return {
      '@context': 'https://schema.org',
      '@type': 'VideoObject',
      'name': title,
      'description': description || title,
      'thumbnailUrl': [site + clip.poster],
      'uploadDate': `${clip.date}T12:00:00Z`,
      'duration': isoDuration(clip.durationMs),
      'contentUrl': site + clip.src,
      'url': page,
      'hasPart': chapters.filter(chapter => chapter.clipId === clip.id).map(chapter => ({
        '@type': 'Clip',
        'name': chapterName(chapter),
        'startOffset': chapter.startMs / 1000,
        'endOffset': chapter.endMs / 1000,
        'url': `${page}?at=${formatSeconds(chapter.startMs)}`,
      })),
    }
  })
}

/** "Glue: bow transom", as a chapter is called in lists. */
export function chapterName(chapter: Pick<WatchChapter, 'operation' | 'parts' | 'step'>): string {
  const what = chapter.parts.join(', ') || chapter.step?.title
  return what ? `${OPERATION_WORDS[chapter.operation].label}: ${what}` : OPERATION_WORDS[chapter.operation].label
}

/** A duration as ISO 8601 writes it, to the millisecond: PT1H2M3.5S. */
export function isoDuration(ms: number): string {
  const hours = Math.floor(ms / 3_600_000)
  const minutes = Math.floor(ms / 60_000) % 60
  return `PT${hours ? `${hours}H` : ''}${minutes ? `${minutes}M` : ''}${formatSeconds(ms % 60_000)}S`
}
