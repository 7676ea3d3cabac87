import { computed, watch } from 'vue'
import { tileAt } from '#shared/utils/ribband/tiles'
import { sheetsInSight } from './drawing/drawPictures'
import { usePictureSheets } from './usePictureSheets'
import type { Ribband } from './useRibband'

/** Keeps the pictures coming that are in sight, and first of all the one under the pointer. */
export function useStripPictures(ribband: Ribband) {
  const sheets = usePictureSheets()
  const clipOf = (clipId: string) => ribband.strip.value.byId.get(clipId)?.clip

  const inSight = computed(() => sheetsInSight({ strip: ribband.strip.value, view: ribband.view.view.value, layout: ribband.layout.value }))
  const underPointer = computed(() => {
    const over = ribband.hover.value
    const tile = over?.clip.clip.sheets ? tileAt(over.clip.clip.sheets, over.sessionMs - over.clip.startMs) : null
    return tile ? `${tile.image} ${over!.clip.id}` : null
  })

  watch([inSight, underPointer], ([list, pointed]) => {
    const wanted = list.flatMap(({ clipId, image }) => clipOf(clipId) ? [{ clip: clipOf(clipId)!, image }] : [])
    const over = ribband.hover.value
    sheets.want(wanted, pointed && over ? { clip: over.clip.clip, image: Number(pointed.split(' ')[0]) } : undefined)
  })

  return {
    changed: sheets.changed,
    sheetOf(clipId: string, image: number) {
      const clip = clipOf(clipId)
      return clip ? sheets.sheetOf(clip, image) : null
    },
  }
}
