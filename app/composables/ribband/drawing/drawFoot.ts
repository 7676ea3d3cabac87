import { msToFrame, frameToMs } from '#shared/utils/time/frames'
import { formatClock } from '#shared/utils/time/clock'
import { fitLabels, labelX, type Label } from '#shared/utils/ribband/marks'
import { clockStep, finerStep, ticks, toX, viewEnd } from '#shared/utils/ribband/scale'
import { crisp, figureFont, textWidth, type Pen } from './pen'

/** The base line, the scale of the drawing below it, and at full size its frames. */
export function drawFoot(pen: Pen): void {
  const { ctx, theme, strip, layout, view } = pen
  const left = Math.max(0, toX(view, 0))
  const right = Math.min(view.widthPx, toX(view, strip.line.lengthMs))
  ctx.fillStyle = theme.tone('ink')
  ctx.fillRect(left, layout.base, Math.max(0, right - left), 1.5)
  drawScale(pen)
  drawFrames(pen)
}

const BAR_PX = 4

/** A graphic scale: bars by turns open and filled, as at the foot of a drawing. */
function drawScale({ ctx, theme, strip, layout, view }: Pen): void {
  const font = figureFont(theme, 11.5, 450)
  const step = clockStep(view.msPerPx, 84)
  const bar = finerStep(step, view.msPerPx, 14) ?? step
  const y = layout.scale.top
  const end = viewEnd(view)
  ctx.strokeStyle = theme.tone('rule-strong')
  ctx.fillStyle = theme.tone('rule-strong')
  ctx.lineWidth = 1
  ctx.beginPath()
  for (const { startMs, endMs, lineMs } of strip.line.stretches) {
    const from = Math.max(startMs, startMs + view.startMs - lineMs - bar)
    const to = Math.min(endMs, startMs + end - lineMs + bar)
    if (to <= from) continue
    const x = (sessionMs: number) => toX(view, lineMs + sessionMs - startMs)
    for (let index = Math.floor(from / bar); index * bar < to; index++) {
      if (index % 2 === 0) continue
      const [x1, x2] = [x(Math.max(startMs, index * bar)), x(Math.min(endMs, (index + 1) * bar))]
      if (x2 > x1) ctx.fillRect(x1, y, x2 - x1, BAR_PX)
    }
    ctx.rect(Math.max(-2, crisp(x(startMs))), y + 0.5, Math.min(view.widthPx + 4, x(endMs)) - Math.max(-2, x(startMs)), BAR_PX - 1)
  }
  ctx.stroke()
  ctx.font = font
  ctx.textAlign = 'center'
  ctx.fillStyle = theme.tone('ink-soft')
  const labels = ticks(strip.line, { ...view, startMs: view.startMs - step, widthPx: view.widthPx + 2 * step / view.msPerPx }, step).map((tick): Label => {
    const text = tickWords(tick.sessionMs, step)
    return { lineMs: tick.lineMs, text, widthPx: textWidth(ctx, text, font) }
  })
  for (const label of fitLabels(labels, view.msPerPx, 8)) {
    const x = toX(view, label.lineMs)
    if (x >= 0 && x <= view.widthPx) ctx.fillText(label.text, labelX(view, label), y + BAR_PX + 13)
  }
}

function tickWords(ms: number, step: number): string {
  if (step >= 1000) return formatClock(ms)
  const digits = step >= 100 ? 1 : 2
  return `${formatClock(ms)}.${String(Math.floor(ms % 1000 / 10 ** (3 - digits))).padStart(digits, '0')}`
}

const LEAST_FRAME_PX = 6

/** At full size, a tick on the base line for every frame. */
function drawFrames({ ctx, theme, strip, layout, view }: Pen): void {
  ctx.fillStyle = theme.tone('ink-faint')
  for (const clip of strip.clips) {
    const rate = clip.clip.video?.frameRate
    if (!rate || clip.lane > 0 || clip.lineEndMs < view.startMs || clip.lineMs > viewEnd(view)) continue
    if (1000 * rate.denominator / rate.numerator / view.msPerPx < LEAST_FRAME_PX) continue
    const exact = { num: rate.numerator, den: rate.denominator }
    const last = Math.min(clip.lineEndMs, viewEnd(view)) - clip.lineMs
    for (let frame = msToFrame(Math.max(0, Math.floor(view.startMs - clip.lineMs)), exact); frameToMs(frame, exact) <= last; frame++) {
      ctx.fillRect(Math.round(toX(view, clip.lineMs + frameToMs(frame, exact))) - 0.5, layout.base - 4, 1, 4)
    }
  }
}
