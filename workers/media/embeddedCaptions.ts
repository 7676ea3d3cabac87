import { and, eq } from 'drizzle-orm'
import type { Transaction } from '#server/database/client'
import { captionTracks, type Clip } from '#server/database/schema'
import { MAX_CAPTION_BYTES } from '#server/indexing/captions/readCaptions'
import { trackKey } from '#server/services/objectKeys'
import type { ProbeResult } from '#shared/types/media'
import type { WorkerContext } from './context'
import { inputLimits, localFile, RunError, runFfmpeg } from './ffmpeg/run'

/** Subtitles made of text; those made of pictures (DVD, Blu-ray) hold no words to read. */
const TEXT_CODECS = new Set(['subrip', 'srt', 'webvtt', 'mov_text', 'ass', 'ssa', 'text'])
const MOST_TRACKS = 8

export interface EmbeddedCaptions { stream: number, language: string, trackId: string, sizeBytes: number }

/** Takes the text tracks out of a clip as WebVTT and stores them. A track that cannot be taken out is left where it is. */
export async function readEmbeddedCaptions({ storage }: WorkerContext, path: string, probe: ProbeResult, signal: AbortSignal): Promise<EmbeddedCaptions[]> {
  const found: EmbeddedCaptions[] = []
  for (const { index, language } of probe.subtitles.filter(track => TEXT_CODECS.has(track.codec)).slice(0, MOST_TRACKS)) {
    const bytes = await extract(path, index, signal)
    // Phones and action cameras write empty or data-like text tracks; a header alone says nothing.
    if (!bytes?.includes('-->')) continue
    const trackId = crypto.randomUUID()
    await storage.write(trackKey(trackId), bytes, 'application/octet-stream')
    found.push({ stream: index, language: tidy(language), trackId, sizeBytes: bytes.length })
  }
  return found
}

async function extract(path: string, stream: number, signal: AbortSignal): Promise<Buffer | null> {
  try {
    const { stdout } = await runFfmpeg([...inputLimits(), '-i', localFile(path), '-map', `0:${stream}`, '-c:s', 'webvtt', '-f', 'webvtt', 'pipe:1'], { signal, maxStdoutBytes: MAX_CAPTION_BYTES, timeoutMs: 10 * 60_000 })
    return stdout
  }
  catch (error) {
    if (error instanceof RunError) return null
    throw error
  }
}

/** Adds what was taken out, unless an earlier try of the job already did. */
export async function keepEmbeddedCaptions(tx: Transaction, clip: Clip, found: EmbeddedCaptions[]): Promise<void> {
  for (const { stream, language, trackId, sizeBytes } of found) {
    const [known] = await tx.select({ id: captionTracks.id }).from(captionTracks).where(and(eq(captionTracks.clipId, clip.id), eq(captionTracks.embeddedStream, stream)))
    if (known) continue
    await tx.insert(captionTracks).values({
      id: trackId, sessionId: clip.sessionId, buildId: clip.buildId, clipId: clip.id, name: `${clip.name}, track ${stream}`, language, embeddedStream: stream, objectKey: trackKey(trackId), sizeBytes, uploadedBy: clip.uploadedBy,
    })
  }
}

/** Containers carry ISO 639-2 codes (`eng`); the canonical tag is the short one. */
function tidy(language: string | null): string {
  try {
    return Intl.getCanonicalLocales(language ?? 'und')[0] ?? 'und'
  }
  catch {
    return 'und'
  }
}
