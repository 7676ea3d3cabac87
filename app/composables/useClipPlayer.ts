import type { Ref } from 'vue'
import type { WatchChapter, WatchClip } from '#shared/types/watch'
import { frameFrom, framesOn, seekSeconds } from '#shared/utils/player/follow'

const SPEEDS = [0.5, 1, 1.5, 2]

/** One clip's player: where it stands, its chapters, and the shuttle keys. Times are integer ms of the clip. */
export function useClipPlayer(video: Readonly<Ref<HTMLVideoElement | null>>, clip: () => WatchClip, chapters: () => WatchChapter[], startMs: number) {
  const atMs = ref(startMs)
  const speed = ref(1)
  /** Where playing stops by itself, for links to a stretch. */
  const stopMs = ref<number | null>(null)

  /** Shows the first frame that begins at `ms` or after it. */
  function seek(ms: number, options: { play?: boolean, until?: number } = {}) {
    const element = video.value
    if (!element) return
    stopMs.value = options.until ?? null
    atMs.value = Math.max(0, ms)
    const go = () => {
      element.currentTime = seekSeconds(frameFrom(atMs.value, clip().frameRate))
      if (options.play) element.play().catch(() => {})
    }
    if (element.readyState >= HTMLMediaElement.HAVE_METADATA) go()
    else {
      element.addEventListener('loadedmetadata', go, { once: true })
      if (element.preload === 'none') element.preload = 'metadata'
    }
  }

  const own = computed(() => chapters())
  const chapter = computed(() => own.value.find(one => atMs.value >= one.startMs && atMs.value < one.endMs) ?? null)
  const previous = computed(() => own.value.findLast(one => one.startMs < (chapter.value?.startMs ?? atMs.value)) ?? null)
  const next = computed(() => own.value.find(one => one.startMs > atMs.value) ?? null)
  const jump = (to: WatchChapter | null) => to && seek(to.startMs, { play: video.value ? !video.value.paused : false })

  function tick() {
    const element = video.value
    if (!element) return
    atMs.value = Math.round(element.currentTime * 1000)
    if (stopMs.value !== null && atMs.value >= stopMs.value) {
      element.pause()
      stopMs.value = null
    }
  }
  function setSpeed(value: number) {
    speed.value = value
    if (video.value) video.value.playbackRate = value
  }
  function toggle() {
    if (!video.value) return
    if (video.value.paused) video.value.play().catch(() => {})
    else video.value.pause()
  }
  /** J and L by ten seconds, arrows by five, K and space stop and go on, comma and full stop by a frame. */
  function key(event: KeyboardEvent) {
    const element = video.value
    if (!element || event.ctrlKey || event.metaKey || event.altKey) return
    const target = event.target as HTMLElement
    if (target.matches('input, select, textarea, video') || (event.key === ' ' && target.matches('a, button, summary'))) return
    const here = element.currentTime * 1000
    const step = { j: -10_000, l: 10_000, ArrowLeft: -5_000, ArrowRight: 5_000 }[event.key]
    const frames = { ',': -1, '.': 1 }[event.key]
    if (step !== undefined) seek(Math.round(here) + step, { play: !element.paused })
    else if (frames !== undefined) seek(framesOn(Math.floor(here), frames, clip().frameRate))
    else if (event.key === ' ' || event.key === 'k') toggle()
    else return
    event.preventDefault()
  }
  return { atMs, speed, chapter, previous, next, seek, jump, tick, setSpeed, toggle, key, SPEEDS }
}
/** What WatchPlayer lets its page do. */
export interface PlayerHandle { seek: ReturnType<typeof useClipPlayer>['seek'], atMs: number }
