import { toX, viewEnd, type View } from '#shared/utils/ribband/scale'
import { fairKnots, knotSpacing, monotoneSlopes, soundAt, type SoundPyramid } from '#shared/utils/ribband/sheer'
import type { Strip } from '#shared/utils/ribband/strip'
import { crisp, type Pen } from './pen'

export type Sounds = ReadonlyMap<string, SoundPyramid>

/** Knots of the sheer in sight: how loud it gets (`high`) and how quiet between (`low`). */
export interface SheerKnots { firstMs: number, knotMs: number, high: Float32Array, low: Float32Array }

const LEAST_KNOT_PX = 3
/** A knot beyond either edge, and two more for the fairing's reach. */
const BEYOND = 3

/** Loudest of all cameras at each knot. Knots stand at multiples of their spacing, whatever is in sight. */
export function sampleSheer(strip: Strip, sounds: Sounds, view: View, leastPx = LEAST_KNOT_PX): SheerKnots {
  const perSecond = Math.max(1, ...[...sounds.values()].map(sound => sound.perSecond))
  const { knotMs, layer } = knotSpacing(view.msPerPx, leastPx, perSecond)
  const first = Math.floor(view.startMs / knotMs) - BEYOND
  const count = Math.ceil(viewEnd(view) / knotMs) + BEYOND - first + 1
  const high = new Float32Array(count)
  const low = new Float32Array(count)
  for (const clip of strip.clips) {
    const sound = sounds.get(clip.id)
    if (!sound) continue
    const own = layer - Math.round(Math.log2(perSecond / sound.perSecond))
    const from = Math.max(0, Math.ceil(clip.lineMs / knotMs) - first)
    const to = Math.min(count - 1, Math.floor(clip.lineEndMs / knotMs) - first)
    for (let index = from; index <= to; index++) {
      const heard = soundAt(sound, (first + index) * knotMs - clip.lineMs, own)
      if (heard.high > high[index]!) high[index] = heard.high
      if (heard.low > low[index]!) low[index] = heard.low
    }
  }
  return { firstMs: first * knotMs, knotMs, high: fairKnots(high), low: fairKnots(low) }
}

/** Traces a fair curve through knots; `y` turns loudness into a height. Continues the current path. */
export function traceCurve(ctx: CanvasRenderingContext2D | Path2D, values: Float32Array, x0: number, step: number, y: (value: number) => number): void {
  const slopes = monotoneSlopes(values)
  ctx.lineTo(x0, y(values[0]!))
  for (let index = 0; index < values.length - 1; index++) {
    const x = x0 + index * step
    ctx.bezierCurveTo(
      x + step / 3, y(values[index]! + slopes[index]! / 3),
      x + step * 2 / 3, y(values[index + 1]! - slopes[index + 1]! / 3),
      x + step, y(values[index + 1]!),
    )
  }
}

/** The sheer: body and waterlines, the constant part of the sound as a denser body, and the line itself on top. */
export function drawSheer({ ctx, theme, strip, layout, view }: Pen, sounds: Sounds, full: number): void {
  const { top, height } = layout.sheer
  const foot = top + height
  const left = Math.max(0, toX(view, 0))
  const right = Math.min(view.widthPx, toX(view, strip.line.lengthMs))
  if (right <= left) return
  ctx.save()
  ctx.beginPath()
  ctx.rect(left, 0, right - left, layout.base)
  ctx.clip()
  if (sounds.size > 0) {
    const knots = sampleSheer(strip, sounds, view)
    const x0 = toX(view, knots.firstMs)
    const step = knots.knotMs / view.msPerPx
    const y = (value: number) => foot - 1 - Math.min(1.06, value / full) * (height - 6)
    const end = x0 + step * (knots.high.length - 1)
    const body = (values: Float32Array) => {
      const path = new Path2D()
      path.moveTo(x0, foot)
      traceCurve(path, values, x0, step, y)
      path.lineTo(end, foot)
      path.closePath()
      return path
    }
    const whole = body(knots.high)
    ctx.fillStyle = theme.tone('well', 0.75)
    ctx.fill(whole)
    const steady = body(knots.low)
    ctx.fillStyle = theme.tone('ink', 0.1)
    ctx.fill(steady)
    drawHatching(ctx, steady, { left, right, top, foot, from: toX(view, 0), colour: theme.tone('ink', 0.3) })
    drawWaterlines(ctx, whole, { left, right, top, foot, colour: theme.tone('ink-faint', 0.34) })
    ctx.beginPath()
    traceCurve(ctx, knots.high, x0, step, y)
    ctx.strokeStyle = theme.tone('ink')
    ctx.lineWidth = 1.5
    ctx.lineJoin = 'round'
    ctx.stroke()
  }
  ctx.restore()
  drawSilences(ctx, strip, view, crisp(foot - 5), theme.tone('ink-faint', 0.7))
  ctx.fillStyle = theme.tone('rule-strong')
  ctx.fillRect(left, foot, right - left, 1)
}

const HATCH_PX = 5

/** The steady part of the sound, hatched as a drawing hatches what is solid. The lines move with the line. */
function drawHatching(ctx: CanvasRenderingContext2D, body: Path2D, at: { left: number, right: number, top: number, foot: number, from: number, colour: string }): void {
  const rise = at.foot - at.top
  ctx.save()
  ctx.clip(body)
  ctx.strokeStyle = at.colour
  ctx.lineWidth = 0.75
  ctx.beginPath()
  const first = at.left - rise - ((at.left - rise - at.from) % HATCH_PX)
  for (let x = first; x < at.right; x += HATCH_PX) {
    ctx.moveTo(x, at.foot)
    ctx.lineTo(x + rise, at.top)
  }
  ctx.stroke()
  ctx.restore()
}

/** Level hairlines inside the body only, as waterlines run on a lines plan. */
function drawWaterlines(ctx: CanvasRenderingContext2D, body: Path2D, at: { left: number, right: number, top: number, foot: number, colour: string }): void {
  ctx.save()
  ctx.clip(body)
  ctx.fillStyle = at.colour
  for (let part = 1; part < 5; part++) {
    ctx.fillRect(at.left, Math.round(at.foot - (at.foot - at.top) * part / 5), at.right - at.left, 0.75)
  }
  ctx.restore()
}

const LEAST_SILENCE_PX = 14

/** Silences as dimension lines: a hairline between two short ticks. */
function drawSilences(ctx: CanvasRenderingContext2D, strip: Strip, view: View, y: number, colour: string): void {
  const from = view.startMs
  const to = viewEnd(view)
  ctx.strokeStyle = colour
  ctx.lineWidth = 1
  ctx.beginPath()
  for (const clip of strip.clips) {
    if (clip.lane > 0 || clip.lineEndMs < from || clip.lineMs > to) continue
    for (const silence of clip.clip.silences) {
      const start = clip.lineMs + silence.startMs
      const end = clip.lineMs + silence.endMs
      if (end < from || start > to || (end - start) / view.msPerPx < LEAST_SILENCE_PX) continue
      const [x1, x2] = [crisp(toX(view, start)) + 2, crisp(toX(view, end)) - 2]
      ctx.moveTo(x1, y - 2.5)
      ctx.lineTo(x1, y + 2.5)
      ctx.moveTo(x1, y)
      ctx.lineTo(x2, y)
      ctx.moveTo(x2, y - 2.5)
      ctx.lineTo(x2, y + 2.5)
    }
  }
  ctx.stroke()
}
