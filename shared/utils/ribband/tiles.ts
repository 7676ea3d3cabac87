import { lowerBound } from './search'

/** What is needed of a clip's picture sheets; `ClipView['sheets']` fits. */
export interface SheetsView { tileWidth: number, tileHeight: number, columns: number, rows: number, count: number, timesMs: readonly number[], images: readonly string[] }

/** One picture: which image of the sheets, and its rectangle in that image's pixels. */
export interface Tile { index: number, image: number, x: number, y: number, width: number, height: number, atMs: number }

/** The picture whose frame is nearest to a time of the clip; null when there are none. */
export function tileAt(sheets: SheetsView, clipMs: number): Tile | null {
  const count = usable(sheets)
  if (count === 0) return null
  const after = lowerBound(count, index => sheets.timesMs[index]!, clipMs)
  const before = Math.max(0, after - 1)
  const nearer = after >= count || clipMs - sheets.timesMs[before]! <= sheets.timesMs[after]! - clipMs ? before : after
  return tile(sheets, nearer)
}

export function tile(sheets: SheetsView, index: number): Tile {
  const perImage = sheets.columns * sheets.rows
  const inImage = index % perImage
  return {
    index,
    image: Math.floor(index / perImage),
    x: (inImage % sheets.columns) * sheets.tileWidth,
    y: Math.floor(inImage / sheets.columns) * sheets.tileHeight,
    width: sheets.tileWidth,
    height: sheets.tileHeight,
    atMs: sheets.timesMs[index]!,
  }
}

/** Pictures that have both a time and an image. */
function usable(sheets: SheetsView): number {
  return Math.min(sheets.count, sheets.timesMs.length, sheets.images.length * sheets.columns * sheets.rows)
}

export interface LaidTile { tile: Tile, fromMs: number, toMs: number }

/**
 * Pictures to draw in [fromMs, toMs) of a clip, each in a slot of `slotMs` counted from the clip's start, so
 * that they stand still while the strip is moved. Nearer than one picture a slot, each is laid once at its own time: repeating
 * it would show movement that was never looked at.
 */
export function layTiles(sheets: SheetsView, fromMs: number, toMs: number, slotMs: number): LaidTile[] {
  const count = usable(sheets)
  if (count === 0 || slotMs <= 0 || toMs <= fromMs) return []
  const spacing = count > 1 ? (sheets.timesMs[count - 1]! - sheets.timesMs[0]!) / (count - 1) : Infinity
  const laid: LaidTile[] = []
  if (spacing < slotMs) {
    for (let slot = Math.max(0, Math.floor(fromMs / slotMs)); slot * slotMs < toMs; slot++) {
      laid.push({ tile: tileAt(sheets, (slot + 0.5) * slotMs)!, fromMs: slot * slotMs, toMs: (slot + 1) * slotMs })
    }
    return laid
  }
  const first = Math.max(0, lowerBound(count, index => sheets.timesMs[index]!, fromMs) - 1)
  for (let index = first; index < count && sheets.timesMs[index]! < toMs; index++) {
    const atMs = sheets.timesMs[index]!
    laid.push({ tile: tile(sheets, index), fromMs: atMs, toMs: Math.min(atMs + slotMs, sheets.timesMs[index + 1] ?? Infinity) })
  }
  return laid
}
