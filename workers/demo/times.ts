import { demoScript } from './script'
import { speak, RATE, type Samples } from './speech'
import { layOut, overhear, type Timeline } from './timeline'
import type { ClipScript } from './types'

/** A clip with its timeline and, when it has its own microphone, each sentence's sound. */
export interface TimedClip { clip: ClipScript, timeline: Timeline, voices: Samples[] }

/** Speaks the whole script and lays every clip out in time. */
export async function timeScript(): Promise<TimedClip[]> {
  const done: TimedClip[] = []
  for (const clip of demoScript.flatMap(session => session.clips)) {
    if ('hears' in clip) {
      const heard = done.find(other => other.clip.file === clip.hears)
      if (!heard) throw new Error(`${clip.file} hears ${clip.hears}, which must stand before it in the script.`)
      done.push({ clip, timeline: overhear(clip, heard.timeline), voices: [] })
      continue
    }
    const voices: Samples[] = []
    for (const line of clip.beats.flatMap(beat => beat.lines)) voices.push(await speak(line.text, line.speaker ?? 'maud'))
    done.push({ clip, timeline: layOut(clip, voices.map(v => Math.round(v.length / RATE * 1000))), voices })
  }
  return done
}
