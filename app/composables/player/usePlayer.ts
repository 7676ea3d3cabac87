import { computed, onBeforeUnmount, ref, shallowRef, watch } from 'vue'
import type { ClipView } from '#shared/types/session'
import { clipAt, nearestClip, placeClips, toClip, type PlacedClip } from '#shared/utils/ribband/clock'
import { frameFrom, framesOn, lastMs, moved, placeAfter, placeBefore, seekSeconds, shuttleSpeed, type Place } from '#shared/utils/player/follow'
import { useVideos } from './useVideos'

type Placed = PlacedClip<ClipView>

/**
 * Plays a session: its clips on one clock, one after the other or side by side, gaps skipped. The place is kept as
 * a clip and a millisecond of it, so that aligning a camera anew leaves the same picture on the screen.
 */
export function usePlayer(clips: () => ClipView[]) {
  const placement = computed(() => placeClips(clips()))
  const placed = computed(() => placement.value.clips)
  const chosenId = ref<string | null>(null)
  const clipMs = ref(0)
  /** Signed; 0 stands still, 1 is as filmed. */
  const speed = ref(0)
  /** Speed of plain playing, chosen by the reader. */
  const rate = ref(1)
  const problem = shallowRef('')

  /** The clip on screen; before one is chosen, and when it is deleted, the first that can be played. */
  const active = computed<Placed | null>(() => placed.value.find(clip => clip.id === chosenId.value) ?? placed.value.find(clip => clip.clip.src !== null) ?? placed.value[0] ?? null)
  const clipId = computed(() => active.value?.id ?? null)
  const atMs = computed(() => active.value ? active.value.startMs + clipMs.value : placement.value.startMs)
  /** Clips that run at this time; the same list while they are the same. */
  const cameras = computed<Placed[]>((before) => {
    const now = placed.value.filter(clip => clip.startMs <= atMs.value && atMs.value < clip.endMs)
    return before?.length === now.length && now.every((clip, n) => clip === before[n]) ? before : now
  })
  const next = computed(() => active.value ? placeAfter(placed.value, active.value) : null)

  const videos = useVideos({
    clips: () => placed.value, activeId: () => clipId.value, nextId: () => next.value?.clip.id ?? null,
    wantedSeconds: () => seekSeconds(clipMs.value), speed: () => speed.value,
    showed: (ms) => {
      if (active.value) clipMs.value = Math.min(lastMs(active.value), ms)
    },
    ended: () => goOn(next.value),
    refused: (words) => {
      speed.value = 0
      problem.value = words
    },
  })

  watch(clipId, (id) => {
    // It came or went by itself: another place was never chosen in it.
    if (id !== chosenId.value) clipMs.value = 0
  }, { flush: 'sync' })

  function show({ clip, ms }: Place<Placed>): void {
    const changed = clip.id !== clipId.value
    chosenId.value = clip.id
    clipMs.value = Math.min(lastMs(clip), Math.max(0, Math.round(ms)))
    problem.value = ''
    videos.show(changed)
  }

  /** Goes to a time of the session, in the clip named if it has one there, else in the nearest of the band in use. */
  function seek(sessionMs: number, wanted?: string | null): void {
    const named = placed.value.find(clip => clip.id === wanted)
    const clip = named ?? nearestClip(placed.value, sessionMs, active.value?.lane ?? 0)
    if (clip) show({ clip, ms: toClip(clip, sessionMs) })
  }
  function seekClip(id: string, ms: number): void {
    const clip = placed.value.find(one => one.id === id)
    if (clip) show({ clip, ms })
  }

  /** Goes to where something begins: its own first frame, not the one still on screen from before. */
  function enter(id: string, ms: number): void {
    seekClip(id, frameFrom(ms, placed.value.find(one => one.id === id)?.clip.video?.frameRate))
  }

  function setSpeed(wanted: number): void {
    problem.value = ''
    if (!active.value) return
    // At the very end, playing begins again from the start of the session.
    if (wanted > 0 && clipMs.value >= lastMs(active.value) - 40 && !next.value) show({ clip: placed.value[0]!, ms: 0 })
    speed.value = active.value.clip.src === null ? 0 : wanted
    videos.run()
  }
  const play = () => setSpeed(rate.value)
  const pause = () => setSpeed(0)
  const toggle = () => speed.value === 0 ? play() : pause()
  const shuttle = (direction: 1 | -1) => setSpeed(shuttleSpeed(speed.value, direction))
  function setRate(wanted: number): void {
    rate.value = wanted
    if (speed.value > 0) setSpeed(wanted)
  }

  function goOn(place: Place<Placed> | null): void {
    if (!place) return pause()
    show(place)
    videos.run()
  }

  function nudge(byMs: number): void {
    if (active.value) show(moved(placed.value, { clip: active.value, ms: clipMs.value }, byMs))
  }
  function frame(by: 1 | -1): void {
    if (!active.value) return
    pause()
    const ms = framesOn(clipMs.value, by, active.value.clip.video?.frameRate)
    if (ms <= lastMs(active.value)) show({ clip: active.value, ms })
  }
  function chooseCamera(id: string): void {
    const running = speed.value
    seek(atMs.value, id)
    if (running) setSpeed(running)
  }
  function nextCamera(): boolean {
    const list = cameras.value
    if (list.length < 2) return false
    chooseCamera(list[(list.findIndex(clip => clip.id === clipId.value) + 1) % list.length]!.id)
    return true
  }

  // Running backwards: browsers play forwards only, so the place is moved and each picture asked for in turn.
  let last = 0
  let request = 0
  function backwards(now: number): void {
    request = requestAnimationFrame(backwards)
    if (speed.value < 0 && active.value) {
      const to = clipMs.value + (last ? now - last : 0) * speed.value
      if (to >= 0) {
        clipMs.value = to
        videos.show(false)
      }
      else {
        const place = placeBefore(placed.value, active.value)
        if (place) show(place)
        else pause()
      }
    }
    last = now
  }
  watch(() => speed.value < 0, (on) => {
    if (!import.meta.client) return
    cancelAnimationFrame(request)
    last = 0
    if (on) request = requestAnimationFrame(backwards)
    else clipMs.value = Math.round(clipMs.value)
  })
  onBeforeUnmount(() => {
    if (import.meta.client) cancelAnimationFrame(request)
  })

  return {
    placement, placed, active, clipId, clipMs, atMs, speed, rate, cameras, problem, videos,
    seek, seekClip, enter, play, pause, toggle, shuttle, setRate, nudge, frame, chooseCamera, nextCamera,
    clipAt: (sessionMs: number) => clipAt(placed.value, sessionMs, active.value?.lane ?? 0),
  }
}

export type Player = ReturnType<typeof usePlayer>
