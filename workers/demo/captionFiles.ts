import type { Cue } from '#shared/types/captions'

/** WebVTT (`.vtt`) or SubRip (`.srt`) text of the cues, by the file's name. */
export function captionFile(name: string, cues: Cue[]): string {
  if (name.endsWith('.srt')) {
    return cues.map((cue, i) => `${i + 1}\n${clock(cue.startMs, ',')} --> ${clock(cue.endMs, ',')}\n${cue.text}\n`).join('\n')
  }
  return `WEBVTT\n\n${cues.map(cue => `${clock(cue.startMs, '.')} --> ${clock(cue.endMs, '.')}\n${cue.text}\n`).join('\n')}`
}

function clock(ms: number, point: ',' | '.'): string {
  const pad = (value: number, width = 2) => String(Math.floor(value)).padStart(width, '0')
  return `${pad(ms / 3_600_000)}:${pad(ms / 60_000 % 60)}:${pad(ms / 1000 % 60)}${point}${pad(ms % 1000, 3)}`
}
