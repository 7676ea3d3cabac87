/** One caption as read from a file: times in integer milliseconds of its clip, text without markup. */
export interface Cue { id: string, startMs: number, endMs: number, text: string }

/** What was read from a caption file, with everything odd about it in words for people. */
export interface CaptionReading {
  cues: Cue[]
  warnings: string[]
  format: 'vtt' | 'srt'
  encoding: 'utf-8' | 'utf-16le' | 'utf-16be' | 'windows-1252'
}
