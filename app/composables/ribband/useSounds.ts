import { onBeforeUnmount, shallowRef, watch } from 'vue'
import type { ClipView } from '#shared/types/session'
import { buildPyramid, type SoundPyramid } from '#shared/utils/ribband/sheer'

/** Loudness that fills the sheer's height: near the loudest that is heard, never so low that hum looks like work. */
const LEAST_FULL = 0.3
const AT_ONCE = 3

/** Fetches each clip's sound once and keeps it ready for drawing at any scale. */
export function useSounds(clips: () => readonly ClipView[]) {
  const sounds = shallowRef<ReadonlyMap<string, SoundPyramid>>(new Map())
  const full = shallowRef(1)
  const asked = new Map<string, string>()
  const waiting: ClipView[] = []
  const stop = new AbortController()
  let running = 0

  watch(clips, (list) => {
    for (const clip of list) {
      if (!clip.peaks || asked.get(clip.id) === clip.peaks.url) continue
      asked.set(clip.id, clip.peaks.url)
      waiting.push(clip)
    }
    next()
  }, { immediate: typeof window !== 'undefined' })

  function next() {
    while (running < AT_ONCE && waiting.length > 0) {
      running++
      void read(waiting.shift()!).finally(() => {
        running--
        next()
      })
    }
  }

  async function read(clip: ClipView) {
    const peaks = clip.peaks!
    try {
      const response = await fetch(peaks.url, { signal: stop.signal })
      if (!response.ok) throw new Error(`${response.status}`)
      const bytes = new Uint8Array(await response.arrayBuffer())
      const made = new Map(sounds.value).set(clip.id, buildPyramid(bytes, peaks.perSecond))
      full.value = fullHeight(made)
      sounds.value = made
    }
    catch {
      // The curve stays level there; asked for again when the clip comes with a new address or the page is opened anew.
      if (asked.get(clip.id) === peaks.url) asked.delete(clip.id)
    }
  }

  onBeforeUnmount(() => stop.abort())
  return { sounds, full }
}

function fullHeight(sounds: ReadonlyMap<string, SoundPyramid>): number {
  const heard: number[] = []
  for (const sound of sounds.values()) {
    const layer = sound.layers[Math.min(3, sound.layers.length - 1)]!.high
    const every = Math.max(1, Math.floor(layer.length / 2000))
    for (let index = 0; index < layer.length; index += every) heard.push(layer[index]!)
  }
  heard.sort((a, b) => a - b)
  return Math.max(LEAST_FULL, heard[Math.floor(heard.length * 0.99)] ?? 1)
}
