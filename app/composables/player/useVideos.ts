import { computed, onMounted, reactive, ref, shallowRef, watch } from 'vue'
import type { ClipView } from '#shared/types/session'
import type { PlacedClip } from '#shared/utils/ribband/clock'

/** Video elements kept ready: the one on screen, the next one, and those lately seen, so that going back is instant. */
const MOST_KEPT = 6

interface VideosInput {
  clips: () => PlacedClip<ClipView>[]
  activeId: () => string | null
  nextId: () => string | null
  /** Where the one on screen should be. */
  wantedSeconds: () => number
  speed: () => number
  /** A frame is on the screen while playing: the clip's ms it begins at. */
  showed: (clipMs: number) => void
  ended: () => void
  refused: (words: string) => void
}

/** The video elements of a session: which there are, and putting them where the player wants them. */
export function useVideos(input: VideosInput) {
  const elements = new Map<string, HTMLVideoElement>()
  const kept = shallowRef<string[]>([])
  const faults = reactive<Record<string, string>>({})
  /** Raised to load a clip afresh after a fault. */
  const tries = reactive<Record<string, number>>({})
  const waiting = ref(false)
  const volume = ref(1)
  const muted = ref(false)
  let owing = false
  let loop = 0

  /** The active clip first, then the next; of both only what can be played by now. */
  const wanted = computed(() => [input.activeId(), input.nextId()].filter(id => input.clips().some(clip => clip.id === id && clip.clip.src !== null)) as string[])
  function keep(): void {
    const playable = new Set(input.clips().filter(clip => clip.clip.src !== null).map(clip => clip.id))
    kept.value = [...new Set([...wanted.value, ...kept.value])].filter(id => playable.has(id)).slice(0, MOST_KEPT)
  }
  // Only in the browser: a page drawn by the server carries no footage.
  onMounted(() => {
    keep()
    watch(() => wanted.value.join(), keep, { flush: 'sync' })
  })

  const current = () => elements.get(input.activeId() ?? '')

  function bind(id: string, element: unknown): void {
    const video = element as HTMLVideoElement | null
    if (!video) {
      elements.delete(id)
      return
    }
    if (elements.get(id) === video) return
    elements.set(id, video)
    video.addEventListener('loadedmetadata', () => id === input.activeId() && place())
    video.addEventListener('seeked', () => {
      if (video !== current()) return
      waiting.value = false
      if (owing) place()
    })
    video.addEventListener('waiting', () => waiting.value = video === current())
    video.addEventListener('playing', () => waiting.value = false)
    video.addEventListener('ended', () => video === current() && input.speed() > 0 && input.ended())
    video.addEventListener('error', () => {
      faults[id] = faultWords(video.error)
      if (video === current() && input.speed() !== 0) input.refused(faults[id])
    })
    if (id === input.activeId()) show(true)
  }

  /** Puts the picture where it is wanted. While one search is on, only the latest wish is kept. */
  function place(): void {
    const video = current()
    if (!video) return
    if (video.readyState === 0 || video.seeking) {
      owing = true
      return
    }
    owing = false
    video.currentTime = input.wantedSeconds()
  }

  function show(changed: boolean): void {
    if (changed) for (const [id, video] of elements) if (id !== input.activeId()) video.pause()
    place()
    if (changed && input.speed() > 0) run()
  }

  /** Makes the one on screen run or stand, as the speed says. */
  function run(): void {
    const video = current()
    const speed = input.speed()
    if (!video) return
    if (speed <= 0) {
      video.pause()
      return
    }
    video.playbackRate = speed
    video.play().then(() => watchFrames(video)).catch((error: DOMException) => {
      // A pause or another clip came in between: nothing is wrong.
      if (error.name === 'AbortError' || video !== current()) return
      input.refused(error.name === 'NotAllowedError' ? 'The browser waits for a click before it plays with sound. Press play.' : faultWords(video.error))
    })
  }

  function watchFrames(video: HTMLVideoElement): void {
    const own = ++loop
    const go = (seconds: number) => {
      if (own !== loop || video !== current() || video.paused) return
      // The frame on screen begins here; a hair is taken off so that 0.04 s stays 40 ms.
      if (!video.seeking) input.showed(Math.ceil(seconds * 1000 - 0.01))
      ask()
    }
    const ask = () => {
      if ('requestVideoFrameCallback' in video) video.requestVideoFrameCallback((_, frame) => go(frame.mediaTime))
      else requestAnimationFrame(() => go((video as HTMLVideoElement).currentTime))
    }
    ask()
  }

  function tryAgain(id: string): void {
    Reflect.deleteProperty(faults, id)
    elements.delete(id)
    tries[id] = (tries[id] ?? 0) + 1
  }
  // Once the copy for watching is there, a clip that the browser refused is tried again by itself.
  watch(() => input.clips().filter(({ id, clip }) => faults[id] && clip.tasks.some(task => task.task === 'make-proxy' && task.state === 'done')).map(clip => clip.id), (ids, before) => {
    for (const id of ids) if (!before?.includes(id)) tryAgain(id)
  })

  function setSound(to: { volume?: number, muted?: boolean }): void {
    volume.value = to.volume ?? volume.value
    muted.value = to.muted ?? muted.value
  }

  return { kept, faults, tries, waiting, volume, muted, bind, show, run, tryAgain, setSound }
}

function faultWords(error: MediaError | null): string {
  switch (error?.code) {
    case 2: return 'The footage stopped coming: the connection to the storage was lost. Try again.'
    case 3: return 'This part of the footage is damaged and cannot be shown. Go to another place, or try again.'
    default: return 'This browser cannot play the clip. The file is kept as uploaded.'
  }
}
