import { onBeforeUnmount, shallowRef } from 'vue'
import type { ClipView } from '#shared/types/session'
import type { LoadedSheet } from './drawing/drawPictures'

/** Decoded pictures are kept to this many bytes each for the sharp and the small copies. */
const MOST_BYTES = 96e6
const SMALL = 0.5
const AT_ONCE = 2
const TRY_AGAIN_MS = 15_000

interface Wanted { clip: ClipView, image: number, sharp: boolean }
interface Kept { bitmap: ImageBitmap, bytes: number }

/**
 * Fetches and decodes picture sheets off the main thread. A small copy of each stays for the bands; sharp ones
 * are kept for what is looked at closely. What was used longest ago goes first.
 */
export function usePictureSheets() {
  const changed = shallowRef(0)
  const kept = { sharp: new Map<string, Kept>(), small: new Map<string, Kept>() }
  const failedAt = new Map<string, number>()
  const stop = new AbortController()
  const flying = new Set<string>()
  let queue: Wanted[] = []

  const bytesOf = (clip: ClipView, scale: number) => {
    const sheets = clip.sheets!
    return sheets.columns * sheets.tileWidth * sheets.rows * sheets.tileHeight * 4 * scale * scale
  }
  const keyOf = (clip: ClipView, image: number) => clip.sheets!.images[image]!

  /** The sharpest copy there is, at once; null while there is none. */
  function sheetOf(clip: ClipView, image: number): LoadedSheet | null {
    const key = clip.sheets?.images[image]
    if (key === undefined) return null
    const sharp = touch(kept.sharp, key)
    if (sharp) return { image: sharp.bitmap, scale: 1 }
    const small = touch(kept.small, key)
    return small ? { image: small.bitmap, scale: SMALL } : null
  }

  /** Says what is in sight, most wanted first; it replaces what was wanted before and has not begun. */
  function want(list: { clip: ClipView, image: number }[], urgent?: { clip: ClipView, image: number }) {
    const sharpFits = list.reduce((sum, { clip }) => sum + bytesOf(clip, 1), 0) < MOST_BYTES * 0.8
    const next: Wanted[] = urgent ? [{ ...urgent, sharp: true }] : []
    for (const item of list) next.push({ ...item, sharp: sharpFits })
    queue = next.filter(({ clip, image, sharp }) => {
      const key = keyOf(clip, image)
      const there = kept.sharp.has(key) || (!sharp && kept.small.has(key))
      return !there && !flying.has(key) && (failedAt.get(key) ?? -Infinity) < performance.now() - TRY_AGAIN_MS
    })
    run()
  }

  function run() {
    while (flying.size < AT_ONCE && queue.length > 0) {
      const item = queue.shift()!
      const key = keyOf(item.clip, item.image)
      if (flying.has(key)) continue
      flying.add(key)
      void load(item, key).finally(() => {
        flying.delete(key)
        run()
      })
    }
  }

  async function load({ clip, sharp }: Wanted, key: string) {
    try {
      const response = await fetch(key, { signal: stop.signal })
      if (!response.ok) throw new Error(`${response.status}`)
      const sheets = clip.sheets!
      const width = sheets.columns * sheets.tileWidth
      const bitmap = await createImageBitmap(await response.blob(), sharp ? undefined : { resizeWidth: width * SMALL, resizeQuality: 'medium' })
      keep(sharp ? kept.sharp : kept.small, key, { bitmap, bytes: bitmap.width * bitmap.height * 4 })
      changed.value++
    }
    catch {
      if (!stop.signal.aborted) failedAt.set(key, performance.now())
    }
  }

  function touch(store: Map<string, Kept>, key: string): Kept | undefined {
    const item = store.get(key)
    if (item) {
      store.delete(key)
      store.set(key, item)
    }
    return item
  }

  function keep(store: Map<string, Kept>, key: string, item: Kept) {
    store.get(key)?.bitmap.close()
    store.set(key, item)
    let bytes = [...store.values()].reduce((sum, one) => sum + one.bytes, 0)
    for (const [oldest, { bitmap, bytes: size }] of store) {
      if (bytes <= MOST_BYTES || store.size <= 1) break
      bitmap.close()
      store.delete(oldest)
      bytes -= size
    }
  }

  onBeforeUnmount(() => {
    stop.abort()
    for (const store of Object.values(kept)) for (const { bitmap } of store.values()) bitmap.close()
  })
  return { sheetOf, want, changed }
}
