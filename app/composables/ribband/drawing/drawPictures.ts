import type { StripClip } from '#shared/utils/ribband/strip'
import { layTiles, type Tile } from '#shared/utils/ribband/tiles'
import { thinMarks } from '#shared/utils/ribband/marks'
import { fromX, toX, viewEnd } from '#shared/utils/ribband/scale'
import type { Band } from '#shared/utils/ribband/layout'
import { captionFont, crisp, type Pen } from './pen'

/** An image of a clip's sheets, ready to be drawn from without decoding. `scale` is its size against the original. */
export interface LoadedSheet { image: CanvasImageSource, scale: number }
export type SheetOf = (clipId: string, image: number) => LoadedSheet | null

export function drawTile(ctx: CanvasRenderingContext2D, sheet: LoadedSheet, tile: Tile, to: { x: number, y: number, width: number, height: number }): void {
  const s = sheet.scale
  ctx.drawImage(sheet.image, tile.x * s, tile.y * s, tile.width * s, tile.height * s, to.x, to.y, to.width, to.height)
}

/** Width of a picture in a band of this height. */
export function slotPx(clip: StripClip, height: number): number {
  const sheets = clip.clip.sheets
  return sheets ? Math.max(16, Math.round(height * sheets.tileWidth / sheets.tileHeight)) : Math.round(height * 16 / 9)
}

/** Pictures under the planks, one band a camera; returns the sheets that are in sight. */
export function drawPictures(pen: Pen, sheetOf: SheetOf, focusedClipId: string | null): void {
  const { ctx, layout, strip, view, theme } = pen
  for (const clip of strip.clips) {
    if (clip.lineEndMs < view.startMs || clip.lineMs > viewEnd(view)) continue
    const band = layout.lanes[clip.lane]!.pictures
    const left = Math.max(-2, toX(view, clip.lineMs))
    const right = Math.min(view.widthPx + 2, toX(view, clip.lineEndMs))
    ctx.save()
    ctx.beginPath()
    ctx.rect(left, band.top, right - left, band.height)
    ctx.clip()
    ctx.fillStyle = theme.tone('well')
    ctx.fillRect(left, band.top, right - left, band.height)
    if (clip.clip.sheets && clip.clip.sheets.count > 0) drawClipPictures(pen, clip, band, sheetOf)
    else drawWithoutPictures(pen, clip, band, left, right)
    ctx.restore()
    if (clip.id === focusedClipId && strip.lanes.length > 1) {
      ctx.fillStyle = theme.tone('ink')
      ctx.fillRect(left, band.top + band.height + 1, right - left, 2)
    }
  }
  for (const [lane, bands] of layout.lanes.entries()) drawScenes(pen, lane, bands.pictures)
}

function drawClipPictures({ ctx, view, theme }: Pen, clip: StripClip, band: Band, sheetOf: SheetOf): void {
  const width = slotPx(clip, band.height)
  const from = Math.max(0, view.startMs - clip.lineMs)
  const to = Math.min(clip.lineEndMs, viewEnd(view)) - clip.lineMs
  ctx.imageSmoothingQuality = 'low'
  for (const { tile, fromMs, toMs } of layTiles(clip.clip.sheets!, from, to, width * view.msPerPx)) {
    const sheet = sheetOf(clip.id, tile.image)
    const x = Math.round(toX(view, clip.lineMs + fromMs))
    const room = Math.round((toMs - fromMs) / view.msPerPx)
    if (sheet) drawTile(ctx, sheet, tile, { x, y: band.top, width, height: band.height })
    ctx.fillStyle = theme.tone('sheet')
    ctx.fillRect(x + Math.min(width, room) - 1, band.top, 1, band.height)
  }
}

/** Why a clip has no pictures, in its place. */
function drawWithoutPictures({ ctx, theme, view }: Pen, clip: StripClip, band: Band, left: number, right: number): void {
  const words = clip.clip.video === null && clip.clip.state === 'ready'
    ? 'Sound only'
    : clip.clip.state === 'failed' ? 'No pictures: the clip failed' : clip.clip.state === 'ready' ? 'No pictures' : 'Pictures are being made'
  if (right - left < 60 || view.widthPx < 60) return
  ctx.font = captionFont(theme)
  ctx.textAlign = 'left'
  ctx.textBaseline = 'alphabetic'
  ctx.fillStyle = theme.tone('ink-soft')
  ctx.fillText(words, Math.max(left, 0) + 10, band.top + band.height / 2 + 4)
}

const LEAST_SCENE_PX = 10
/** Notches nearer than this on average say nothing but that there are many. */
const WORTH_MARKING_PX = 36

/** Scene changes: a notch at the top of the pictures, as a saw leaves on an edge. */
function drawScenes({ ctx, strip, view, theme }: Pen, lane: number, band: Band): void {
  const marks = thinMarks(strip.scenes[lane] ?? [], view, LEAST_SCENE_PX)
  if (marks.length > view.widthPx / WORTH_MARKING_PX) return
  ctx.fillStyle = theme.tone('sheet')
  ctx.strokeStyle = theme.tone('ink-soft')
  ctx.lineWidth = 1
  ctx.beginPath()
  for (const lineMs of marks) {
    const x = crisp(toX(view, lineMs))
    ctx.moveTo(x - 3.5, band.top - 1)
    ctx.lineTo(x, band.top + 5)
    ctx.lineTo(x + 3.5, band.top - 1)
  }
  ctx.fill()
  ctx.stroke()
}

/** Images of the sheets that a view needs, nearest to its middle first. */
export function sheetsInSight(pen: Pick<Pen, 'strip' | 'view' | 'layout'>): { clipId: string, image: number }[] {
  const { strip, view, layout } = pen
  const middle = fromX(view, view.widthPx / 2)
  const wanted = new Map<string, { clipId: string, image: number, away: number }>()
  for (const clip of strip.clips) {
    const sheets = clip.clip.sheets
    if (!sheets || clip.lineEndMs < view.startMs || clip.lineMs > viewEnd(view)) continue
    const slotMs = slotPx(clip, layout.lanes[clip.lane]!.pictures.height) * view.msPerPx
    const to = Math.min(clip.lineEndMs, viewEnd(view)) - clip.lineMs
    for (const { tile, fromMs } of layTiles(sheets, Math.max(0, view.startMs - clip.lineMs), to, slotMs)) {
      const away = Math.abs(clip.lineMs + fromMs - middle)
      const key = `${clip.id} ${tile.image}`
      if (away < (wanted.get(key)?.away ?? Infinity)) wanted.set(key, { clipId: clip.id, image: tile.image, away })
    }
  }
  return [...wanted.values()].sort((a, b) => a.away - b.away)
}
