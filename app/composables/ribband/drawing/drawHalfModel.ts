import { toX, type View } from '#shared/utils/ribband/scale'
import type { Strip } from '#shared/utils/ribband/strip'
import type { Theme } from './pen'
import { sampleSheer, traceCurve, type Sounds } from './drawSheer'

export interface HalfModel { ctx: CanvasRenderingContext2D, theme: Theme, strip: Strip, view: View, height: number }

/** Rake of the stem and of the transom, as shares of the length, within what still looks like a boat. */
const STEM = { share: 0.035, least: 14, most: 46 }
const TRANSOM = { share: 0.01, least: 6, most: 14 }
const rake = (length: number, of: { share: number, least: number, most: number }) => Math.min(of.most, Math.max(of.least, length * of.share))

/**
 * The whole session as a half-model on its board: the sheer above, the keel's rocker below, stem to the left,
 * transom to the right, the lifts it is glued up from, and the planks let into its side.
 */
export function drawHalfModel({ ctx, theme, strip, view, height }: HalfModel, sounds: Sounds, full: number): void {
  if (strip.line.lengthMs === 0) return
  const left = toX(view, 0)
  const right = toX(view, strip.line.lengthMs)
  const length = right - left
  const deck = Math.round(height * 0.44)
  const keel = height - 3
  const knots = sampleSheer(strip, sounds, view, 4)
  const y = (value: number) => deck - 2 - Math.min(1, value / full) * (deck - 7)
  const inside = withinLine(knots.high, toX(view, knots.firstMs), knots.knotMs / view.msPerPx, left, right)
  const values = Float32Array.from(inside.length > 1 ? inside : [0, 0])
  const sheer = new Path2D()
  const hull = new Path2D()
  for (const path of [sheer, hull]) {
    path.moveTo(left, y(values[0]!))
    traceCurve(path, values, left, length / (values.length - 1), y)
  }
  const stem = rake(length, STEM)
  const rise = (keel - deck) * 0.34
  hull.lineTo(right - rake(length, TRANSOM), keel - rise)
  hull.bezierCurveTo(right - length * 0.28, keel + 1, left + length * 0.34, keel + 2, left + stem, keel - rise * 0.8)
  hull.quadraticCurveTo(left + stem * 0.3, keel - rise * 1.6, left, y(values[0]!))
  hull.closePath()
  ctx.fillStyle = theme.tone('well')
  ctx.fill(hull)
  ctx.save()
  ctx.clip(hull)
  ctx.fillStyle = theme.tone('ink-faint', 0.3)
  for (let lift = deck - 6; lift > 4; lift -= 6) ctx.fillRect(left, lift, length, 0.75)
  drawInlays(ctx, theme, strip, view, { top: deck + 1, bottom: keel - 1 })
  ctx.restore()
  ctx.strokeStyle = theme.tone('ink-soft')
  ctx.lineWidth = 1
  ctx.stroke(hull)
  ctx.strokeStyle = theme.tone('ink')
  ctx.lineWidth = 1.25
  ctx.stroke(sheer)
}

function withinLine(values: Float32Array, x0: number, step: number, left: number, right: number): number[] {
  return [...values].filter((_, index) => x0 + index * step >= left - step / 2 && x0 + index * step <= right + step / 2)
}

/** Planks as inlays: filled where inked, ruled off where pencilled. */
function drawInlays(ctx: CanvasRenderingContext2D, theme: Theme, strip: Strip, view: View, room: { top: number, bottom: number }): void {
  const each = (room.bottom - room.top) / Math.max(1, strip.planks.length)
  for (const [lane, planks] of strip.planks.entries()) {
    const y = Math.round(room.top + lane * each)
    const tall = Math.max(3, Math.round(each) - 2)
    for (const plank of planks) {
      if (plank.kind === 'bare') continue
      const x = toX(view, plank.startMs)
      const end = toX(view, plank.endMs)
      const width = Math.max(1, end - x - (end - x > 3 ? 1 : 0))
      ctx.fillStyle = theme.tone(plank.kind === 'inked' ? 'bottle' : 'brass')
      if (plank.kind === 'inked') ctx.fillRect(x, y, width, tall)
      else {
        ctx.fillRect(x, y, width, 1)
        ctx.fillRect(x, y + tall - 1, width, 1)
      }
    }
  }
  ctx.fillStyle = theme.tone('ink-soft')
  for (const clip of strip.clips) if (clip.lineMs > 0) ctx.fillRect(Math.round(toX(view, clip.lineMs)), room.top - 2, 1, room.bottom - room.top + 4)
}
