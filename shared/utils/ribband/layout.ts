/** A horizontal band of the strip, in CSS pixels from its top. */
export interface Band { top: number, height: number }

export interface StripLayout {
  width: number
  height: number
  /** Where the sheer may rise and fall. */
  sheer: Band
  /** Captions: ticks, or their words when there is room. */
  words: Band
  lanes: { planks: Band, pictures: Band }[]
  /** The base line that stations stand on. */
  base: number
  stationTimes: Band
  scale: Band
}

/** Height of the row with clock and zoom, and of the half-model with its edges. */
export const TOOLBAR_PX = 48
export const HALF_MODEL_PX = 52

/** On windows up to this width the strip is drawn for a phone: lower pictures, planks as high as a fingertip. */
export const NARROW_PX = 559
/** On windows up to this height the sheer gives way, so that picture and planks are seen at once. */
export const LOW_PX = 800
/** `narrow` whatever the height. */
export type StripSize = 'wide' | 'low' | 'narrow'

/** Heights depend only on the number of bands and on the window's kind, so that nothing moves while footage loads. */
export function layoutStrip(lanes: number, width: number, size: StripSize): StripLayout {
  const many = lanes > 2
  const narrow = size === 'narrow'
  const sheer = { top: 12, height: { wide: 84, low: 52, narrow: 64 }[size] }
  const words = { top: sheer.top + sheer.height + 4, height: 20 }
  const plankHeight = narrow ? 44 : many ? 34 : 40
  const pictureHeight = narrow || many ? 42 : 56
  let top = words.top + words.height + 4
  const bands = Array.from({ length: Math.max(1, lanes) }, () => {
    const band = { planks: { top, height: plankHeight }, pictures: { top: top + plankHeight + 5, height: pictureHeight } }
    top += plankHeight + 5 + pictureHeight + 12
    return band
  })
  const base = top - 4
  return {
    width, sheer, words, lanes: bands, base,
    stationTimes: { top: base + 4, height: 22 },
    scale: { top: base + 28, height: 24 },
    height: base + 54,
  }
}

/** From the top of the strip's own rows (clock and zoom, half-model) to the foot of its planks, of two bands at most, CSS pixels. */
export function planksFoot(lanes: number, size: StripSize): number {
  const { planks } = layoutStrip(lanes, 0, size).lanes[Math.min(Math.max(1, lanes), 2) - 1]!
  return TOOLBAR_PX + HALF_MODEL_PX + planks.top + planks.height
}

/** What lies under a point, by height alone. */
export function zoneAt(layout: StripLayout, y: number): { zone: 'sheer' | 'planks' | 'pictures' | 'foot', lane: number } {
  if (y >= layout.base) return { zone: 'foot', lane: 0 }
  for (const [lane, band] of layout.lanes.entries()) {
    if (y < band.planks.top) return lane === 0 ? { zone: 'sheer', lane } : { zone: 'pictures', lane: lane - 1 }
    if (y < band.pictures.top) return { zone: 'planks', lane }
    if (y < band.pictures.top + band.pictures.height) return { zone: 'pictures', lane }
  }
  return { zone: 'pictures', lane: layout.lanes.length - 1 }
}
