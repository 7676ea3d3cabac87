import { formatClock } from '#shared/utils/time/clock'
import { toX } from '#shared/utils/ribband/scale'
import { crisp, figureFont, textWidth, type Pen } from './pen'

export interface LineRange { startMs: number, endMs: number }
/** An edge being moved: where it stands on the line, and what it meets. */
export interface Guide { lineMs: number, label: string, snapped: boolean }
export interface OverlayMarks { selection: LineRange | null, guide: Guide | null, hoverX: number | null }

/** What changes from moment to moment: selection, the edge in hand, the pointer's hairline. */
export function drawOverlay(pen: Pen, marks: OverlayMarks): void {
  if (marks.hoverX !== null && !marks.guide) drawHairline(pen, marks.hoverX)
  if (marks.selection) drawSelection(pen, marks.selection, marks.guide === null)
  if (marks.guide) drawGuide(pen, marks.guide)
}

function drawHairline({ ctx, theme, layout }: Pen, x: number): void {
  ctx.strokeStyle = theme.tone('ink', 0.45)
  ctx.lineWidth = 1
  ctx.setLineDash([2, 3])
  ctx.beginPath()
  ctx.moveTo(crisp(x), layout.sheer.top - 4)
  ctx.lineTo(crisp(x), layout.base)
  ctx.stroke()
  ctx.setLineDash([])
}

/** The stretch between in and out: hatched like a section over the sheer, held by a clamp on either side. */
function drawSelection(pen: Pen, { startMs, endMs }: LineRange, withLength: boolean): void {
  const { ctx, theme, layout, view } = pen
  const left = toX(view, startMs)
  const right = toX(view, endMs)
  if (right < -10 || left > view.widthPx + 10) return
  const [from, to] = [Math.max(left, -12), Math.min(right, view.widthPx + 12)]
  const top = layout.sheer.top - 4
  const { sheer, base } = layout
  ctx.fillStyle = theme.tone('lead', 0.1)
  ctx.fillRect(from, top, to - from, base - top)
  ctx.save()
  ctx.beginPath()
  ctx.rect(from, top, to - from, sheer.top + sheer.height - top)
  ctx.clip()
  ctx.strokeStyle = theme.tone('lead', 0.34)
  ctx.lineWidth = 1
  ctx.beginPath()
  const rise = sheer.height + 4
  const anchor = left - Math.floor((left - from + rise) / 9) * 9
  for (let x = anchor + Math.floor((from - anchor - rise) / 9) * 9; x < to; x += 9) {
    ctx.moveTo(x, top)
    ctx.lineTo(x + rise, top + rise)
  }
  ctx.stroke()
  ctx.restore()
  drawClamp(pen, left, 1)
  drawClamp(pen, right, -1)
  const font = figureFont(theme, 12.5, 600)
  const text = formatClock(endMs - startMs, { tenths: true })
  const width = textWidth(ctx, text, font) + 12
  if (withLength && to - from > width + 28) chip(pen, (from + to) / 2, top + 10, text, font, 'lead')
}

/** A clamp's frame: jaw above, jaw below, opening towards the selection. */
function drawClamp({ ctx, theme, layout }: Pen, x: number, towards: 1 | -1): void {
  ctx.strokeStyle = theme.tone('lead')
  ctx.lineWidth = 2
  ctx.lineJoin = 'round'
  ctx.beginPath()
  ctx.moveTo(x + towards * 8, layout.sheer.top - 5)
  ctx.lineTo(x, layout.sheer.top - 5)
  ctx.lineTo(x, layout.base)
  ctx.lineTo(x + towards * 8, layout.base)
  ctx.stroke()
}

function drawGuide(pen: Pen, guide: Guide): void {
  const { ctx, theme, layout, view } = pen
  const x = toX(view, guide.lineMs)
  ctx.strokeStyle = theme.tone('lead')
  ctx.lineWidth = guide.snapped ? 2 : 1.25
  ctx.beginPath()
  ctx.moveTo(x, layout.sheer.top - 6)
  ctx.lineTo(x, layout.base + 4)
  ctx.stroke()
  chip(pen, x, layout.sheer.top + 14, guide.label, figureFont(theme, 13, 600), guide.snapped ? 'lead' : 'ink')
}

function chip({ ctx, theme, view }: Pen, centre: number, y: number, text: string, font: string, tone: 'lead' | 'ink'): void {
  const width = textWidth(ctx, text, font) + 14
  const x = Math.min(Math.max(centre, width / 2 + 2), view.widthPx - width / 2 - 2)
  ctx.beginPath()
  ctx.roundRect(x - width / 2, y - 10, width, 20, 2)
  ctx.fillStyle = theme.tone('sheet')
  ctx.fill()
  ctx.strokeStyle = theme.tone(tone)
  ctx.lineWidth = 1
  ctx.stroke()
  ctx.font = font
  ctx.textAlign = 'center'
  ctx.textBaseline = 'alphabetic'
  ctx.fillStyle = theme.tone(tone)
  ctx.fillText(text, x, y + 4.5)
}
