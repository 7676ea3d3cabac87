import type { MomentHit } from '#shared/types/search'
import { frameFrom, seekSeconds } from '#shared/utils/player/follow'

/** Clips kept open at once: the one that is watched and the likeliest next. */
const OPEN = 6

interface Slot { clipId: string, src: string, used: number }

/**
 * Plays moments in an open player. Each clip in reach has a video element of its own that stays alive and has
 * already sought to its moment, so that a click only has to show a frame that is there.
 */
export function useMomentPlayer() {
  const slots = ref<Slot[]>([])
  const videos = new Map<string, HTMLVideoElement>()
  const current = ref<MomentHit | null>(null)
  let turn = 0

  function hold(clipId: string, element: unknown) {
    if (element instanceof HTMLVideoElement) videos.set(clipId, element)
    else videos.delete(clipId)
  }

  function open(moment: MomentHit): boolean {
    if (!moment.clip.src) return false
    const known = slots.value.find(slot => slot.clipId === moment.clip.id)
    if (known) {
      known.used = ++turn
      return true
    }
    const kept = [...slots.value].sort((a, b) => b.used - a.used).filter(slot => slot.clipId !== current.value?.clip.id).slice(0, OPEN - 2)
    const watched = slots.value.filter(slot => slot.clipId === current.value?.clip.id)
    slots.value = [...watched, ...kept, { clipId: moment.clip.id, src: moment.clip.src, used: ++turn }]
    return true
  }

  /** Brings a clip to its moment without showing it. */
  async function ready(moment: MomentHit) {
    if (moment.clip.id === current.value?.clip.id || !open(moment)) return
    await nextTick()
    seek(videos.get(moment.clip.id), moment)
  }

  /** The clips of the first few moments, best last so that it is the last to be given up. */
  async function warm(moments: MomentHit[]) {
    if ((navigator as { connection?: { saveData?: boolean } }).connection?.saveData) return
    const firsts = moments.filter((moment, i) => moment.clip.src && moments.findIndex(other => other.clip.id === moment.clip.id) === i).slice(0, OPEN - 1)
    for (const moment of firsts.reverse()) await ready(moment)
  }

  async function play(moment: MomentHit) {
    const before = current.value
    if (!open(moment)) return
    current.value = moment
    if (before && before.clip.id !== moment.clip.id) videos.get(before.clip.id)?.pause()
    await nextTick()
    const video = videos.get(moment.clip.id)
    seek(video, moment)
    // Refused where the browser wants a click on the player first; the frame is shown all the same.
    await video?.play().catch(() => {})
  }

  function toggle() {
    const video = current.value && videos.get(current.value.clip.id)
    if (!video) return
    if (video.paused) video.play().catch(() => {})
    else video.pause()
  }

  function close() {
    if (current.value) videos.get(current.value.clip.id)?.pause()
    current.value = null
  }
  return { slots, current, hold, ready, warm, play, toggle, close }
}

function seek(video: HTMLVideoElement | undefined, { atMs, clip }: MomentHit) {
  if (!video) return
  const seconds = seekSeconds(frameFrom(atMs, clip.frameRate))
  if (Math.abs(video.currentTime - seconds) < 0.001) return
  if (video.readyState >= HTMLMediaElement.HAVE_METADATA) video.currentTime = seconds
  else video.addEventListener('loadedmetadata', () => video.currentTime = seconds, { once: true })
}
