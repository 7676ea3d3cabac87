import { ellipsis } from '#shared/utils/ribband/planks'
import { lowerBound } from '#shared/utils/ribband/search'
import { toX, viewEnd } from '#shared/utils/ribband/scale'
import type { Strip } from '#shared/utils/ribband/strip'
import { captionFont, crisp, figureFont, textWidth, type Pen } from './pen'

/** Room a caption needs before its words are written instead of a dash. */
const WORDS_PX = 44
/** Captions longer than this are not looked for beyond the left edge. */
const LONGEST_CUE_MS = 60_000

/** Captions: dashes while they are many, their words once there is room. Words come from the preferred band. */
export function drawWords({ ctx, theme, strip, layout, view }: Pen, preferredLane: number): void {
  const { top, height } = layout.words
  const y = crisp(top + height / 2)
  const end = viewEnd(view)
  const font = captionFont(theme)
  let drawn = -Infinity
  let written = -Infinity
  ctx.textAlign = 'left'
  ctx.textBaseline = 'alphabetic'
  const dashes = new Path2D()
  for (let index = lowerBound(strip.cueStarts.length, i => strip.cueStarts[i]!, view.startMs - LONGEST_CUE_MS); index < strip.cues.length; index++) {
    const { cue, lane, startMs, endMs } = strip.cues[index]!
    if (startMs > end) break
    if (endMs < view.startMs) continue
    const x1 = toX(view, startMs)
    const x2 = toX(view, endMs)
    if (x2 - x1 >= WORDS_PX) {
      if (lane !== preferredLane && strip.lanes.length > 1) continue
      const from = Math.max(x1, 0, written)
      const room = toX(view, nextStart(strip, index, lane) ?? endMs + 6 * WORDS_PX * view.msPerPx) - from - 12
      const text = ellipsis(cue.text.replace(/\s+/g, ' '), room, part => textWidth(ctx, part, font), 3)
      dashes.moveTo(crisp(x1), top + 3)
      dashes.lineTo(crisp(x1), top + height - 3)
      if (text === '') continue
      ctx.font = font
      ctx.fillStyle = theme.tone('ink-soft')
      ctx.fillText(text, from + 6, y + 4)
      written = from + textWidth(ctx, text, font)
    }
    else if (x2 > drawn + 0.5) {
      dashes.moveTo(Math.max(x1, drawn), y)
      dashes.lineTo(Math.max(x2 - 1.5, x1 + 0.75, drawn + 0.5), y)
      drawn = x2
    }
  }
  ctx.strokeStyle = theme.tone('ink-faint', 0.75)
  ctx.lineWidth = 1
  ctx.stroke(dashes)
}

/** Where the next caption of the same band begins: words may run on until there. */
function nextStart(strip: Strip, index: number, lane: number): number | null {
  for (let next = index + 1; next < Math.min(strip.cues.length, index + 8); next++) {
    if (strip.cues[next]!.lane === lane && strip.cues[next]!.startMs > strip.cues[index]!.startMs) return strip.cues[next]!.startMs
  }
  return null
}

/** Clip edges: a line through the band, and a butt strap where the next clip follows without a gap. */
export function drawJoints({ ctx, theme, strip, layout, view }: Pen): void {
  for (const clip of strip.clips) {
    if (clip.lineEndMs < view.startMs || clip.lineMs > viewEnd(view)) continue
    const { planks, pictures } = layout.lanes[clip.lane]!
    const bottom = pictures.top + pictures.height
    ctx.fillStyle = theme.tone('ink-soft')
    for (const lineMs of [clip.lineMs, clip.lineEndMs]) {
      const x = Math.round(toX(view, lineMs))
      ctx.fillRect(x - 0.5, planks.top + planks.height + 1, 1, bottom - planks.top - planks.height + 2)
    }
    const x = toX(view, clip.lineMs)
    if (clip.lineMs > 0 && !strip.folds.some(fold => fold.lineMs === clip.lineMs)) {
      ctx.fillStyle = theme.tone('ink')
      ctx.fillRect(Math.round(x) - 6, bottom + 1, 12, 3)
    }
  }
}

/** Half the width of a break, and its swing: slighter where breaks stand close. */
const BREAK = { wide: 3.5, slight: 1.5, closeBelowPx: 90 }

/** Long-break lines where hours without footage are left out, with how long when there is room. */
export function drawFolds({ ctx, theme, strip, layout, view }: Pen): void {
  const top = layout.sheer.top - 8
  const bottom = layout.base
  let free = -Infinity
  const isClose = strip.folds.some((fold, index) => index > 0 && (fold.lineMs - strip.folds[index - 1]!.lineMs) / view.msPerPx < BREAK.closeBelowPx)
  for (const [index, fold] of strip.folds.entries()) {
    const x = toX(view, fold.lineMs)
    if (x < -20 || x > view.widthPx + 20) continue
    const next = strip.folds[index + 1]
    const room = (next ? toX(view, next.lineMs) : view.widthPx) - x
    const half = isClose ? BREAK.slight : BREAK.wide
    const curve = (path: Path2D, offset: number, from: number, to: number) => {
      for (let part = 0; part <= 40; part++) {
        const y = from + (to - from) * part / 40
        path.lineTo(x + offset + Math.sin((y - top) / (bottom - top) * Math.PI * 4) * half * 0.6, y)
      }
    }
    const paper = new Path2D()
    curve(paper, -half, top, bottom)
    curve(paper, half, bottom, top)
    paper.closePath()
    ctx.fillStyle = theme.tone('sheet')
    ctx.fill(paper)
    ctx.strokeStyle = theme.tone('ink-soft')
    ctx.lineWidth = 1
    for (const offset of [-half, half]) {
      const line = new Path2D()
      curve(line, offset, top, bottom)
      ctx.stroke(line)
    }
    const font = figureFont(theme, 12, 450)
    const text = `${lengthWords(fold.missingMs)} later`
    const width = textWidth(ctx, text, font)
    if (x > free && width + 22 < room) {
      ctx.fillStyle = theme.tone('sheet')
      ctx.fillRect(x + 8, layout.sheer.top - 11, width + 5, 15)
      ctx.font = font
      ctx.textAlign = 'left'
      ctx.textBaseline = 'alphabetic'
      ctx.fillStyle = theme.tone('ink-soft')
      ctx.fillText(text, x + 10, layout.sheer.top)
      free = x + width + 20
    }
  }
}

/** '45 s', '12 min', '3 h 5 min'. */
function lengthWords(ms: number): string {
  const seconds = Math.round(ms / 1000)
  if (seconds < 90) return `${Math.max(1, seconds)} s`
  const minutes = Math.round(seconds / 60)
  if (minutes < 60) return `${minutes} min`
  return minutes % 60 === 0 ? `${minutes / 60} h` : `${Math.floor(minutes / 60)} h ${minutes % 60} min`
}
