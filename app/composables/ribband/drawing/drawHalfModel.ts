import { toX, type View } from '#shared/utils/ribband/scale'
import type { Strip } from '#shared/utils/ribband/strip'
import type { Theme } from './pen'
import { sampleSheer, traceCurve, type Sounds } from './drawSheer'

export interface HalfModel { ctx: CanvasRenderingContext2D, theme: Theme, strip: Strip, view: View, height: number }

const STEM_PX = 18
const TRANSOM_PX = 7

/**
 * The whole session as a half-model on its board: the sheer above, the keel's rocker below, stem to the left,
 * transom to the right, and the planks let into its side.
 */
export function drawHalfModel({ ctx, theme, strip, view, height }: HalfModel, sounds: Sounds, full: number): void {
  if (strip.line.lengthMs === 0) return
  const left = toX(view, 0)
  const right = toX(view, strip.line.lengthMs)
  const deck = height * 0.46
  const keel = height - 4
  const knots = sampleSheer(strip, sounds, view, 4)
  const hull = new Path2D()
  const sheer = new Path2D()
  const y = (value: number) => deck - Math.min(1, value / full) * (deck - 5)
  const x0 = toX(view, knots.firstMs)
  const step = knots.knotMs / view.msPerPx
  const inside = withinLine(knots.high, x0, step, left, right)
  hull.moveTo(left, inside.length > 0 ? y(inside[0]!.value) : deck)
  for (const path of [hull, sheer]) {
    if (inside.length > 0) {
      path.moveTo(left, y(inside[0]!.value))
      traceCurve(path, Float32Array.from(inside, knot => knot.value), left, (right - left) / (inside.length - 1 || 1), y)
    }
    else path.lineTo(right, deck)
  }
  hull.lineTo(right - TRANSOM_PX, keel - 7)
  hull.bezierCurveTo(right - (right - left) * 0.3, keel + 3, left + (right - left) * 0.3, keel + 3, left + STEM_PX, keel - 6)
  hull.quadraticCurveTo(left + 4, keel - 12, left, inside.length > 0 ? y(inside[0]!.value) : deck)
  hull.closePath()
  ctx.fillStyle = theme.tone('well')
  ctx.fill(hull)
  ctx.save()
  ctx.clip(hull)
  drawLet(ctx, theme, strip, view, deck + 2, height)
  ctx.restore()
  ctx.strokeStyle = theme.tone('ink-soft')
  ctx.lineWidth = 1
  ctx.stroke(hull)
  ctx.strokeStyle = theme.tone('ink')
  ctx.lineWidth = 1.25
  ctx.stroke(sheer)
}

function withinLine(values: Float32Array, x0: number, step: number, left: number, right: number): { value: number }[] {
  return [...values].map((value, index) => ({ value, x: x0 + index * step })).filter(knot => knot.x >= left - step / 2 && knot.x <= right + step / 2)
}

/** Planks as inlays: filled where inked, ruled off where pencilled. */
function drawLet(ctx: CanvasRenderingContext2D, theme: Theme, strip: Strip, view: View, top: number, height: number): void {
  const room = height - 6 - top
  const each = room / Math.max(1, strip.planks.length)
  for (const [lane, planks] of strip.planks.entries()) {
    const y = top + lane * each
    const tall = Math.max(3, each - 2)
    for (const plank of planks) {
      if (plank.kind === 'bare') continue
      const x = toX(view, plank.startMs)
      const width = Math.max(1, toX(view, plank.endMs) - x - (toX(view, plank.endMs) - x > 3 ? 1 : 0))
      if (plank.kind === 'inked') {
        ctx.fillStyle = theme.tone('bottle')
        ctx.fillRect(x, y, width, tall)
      }
      else {
        ctx.fillStyle = theme.tone('brass')
        ctx.fillRect(x, y + tall - 1.5, width, 1.5)
        ctx.fillRect(x, y, width, 1)
      }
    }
  }
  ctx.fillStyle = theme.tone('ink-soft')
  for (const clip of strip.clips) if (clip.lineMs > 0) ctx.fillRect(Math.round(toX(view, clip.lineMs)), top - 2, 1, height)
}
