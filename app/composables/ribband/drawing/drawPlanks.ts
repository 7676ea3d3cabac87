import { BALLOON_PX, fitLabel, plankSpan, planksInSight, type Plank } from '#shared/utils/ribband/planks'
import type { Band } from '#shared/utils/ribband/layout'
import { toX } from '#shared/utils/ribband/scale'
import { figureFont, textWidth, titleFont, wordFont, type Pen } from './pen'

export interface PlankMarks { selectedId: string | null, hoveredId: string | null }

/** Planks laid butt to butt. Inked ones are filled and fastened, pencilled ones open and dashed, bare floor stays bare. */
export function drawPlanks(pen: Pen, marks: PlankMarks): void {
  const { ctx, layout, strip, view, theme } = pen
  for (const [lane, bands] of layout.lanes.entries()) {
    const planks = planksInSight(strip.planks[lane] ?? [], view)
    ctx.fillStyle = theme.tone('rule')
    for (const clip of strip.clips) {
      if (clip.lane === lane) ctx.fillRect(toX(view, clip.lineMs), bands.planks.top + bands.planks.height - 1, (clip.lineEndMs - clip.lineMs) / view.msPerPx, 1)
    }
    for (const plank of planks) drawPlank(pen, plank, bands.planks, marks)
  }
}

const FASTENED_PX = 46

function drawPlank(pen: Pen, plank: Plank, band: Band, marks: PlankMarks): void {
  const { ctx, theme, view } = pen
  const span = plankSpan(plank, view)
  const gap = span.right - span.left > 5 ? 1 : 0.25
  const left = span.left + gap
  const width = span.right - span.left - 2 * gap
  const height = Math.round(band.height * plank.thickness)
  const top = band.top + Math.round((band.height - height) / 2)
  const hovered = marks.hoveredId === plank.chapter.id
  if (plank.kind !== 'bare') {
    shape(ctx, left, top, width, height)
    if (plank.kind === 'inked') {
      ctx.fillStyle = theme.tone('bottle', hovered ? 0.88 : 1)
      ctx.fill()
      if (width > FASTENED_PX) drawFastenings(pen, left, top, width, height)
    }
    else {
      ctx.fillStyle = hovered ? theme.tone('brass-wash', 0.8) : theme.tone('sheet', 0.9)
      ctx.fill()
      drawDashedEdge(pen, left, top, width, height, plank.thickness)
    }
  }
  drawLabel(pen, plank, { left, top, width, height })
  if (marks.selectedId === plank.chapter.id) {
    shape(ctx, left - 0.5, band.top - 2.5, width + 1, band.height + 5)
    ctx.strokeStyle = theme.tone('ink')
    ctx.lineWidth = 2
    ctx.stroke()
  }
}

/** A plank's outline: two corners eased, as where it was planed to meet its neighbour. */
function shape(ctx: CanvasRenderingContext2D, x: number, y: number, width: number, height: number): void {
  ctx.beginPath()
  if (width > 12) ctx.roundRect(x, y, width, height, [1, 5, 1, 5])
  else ctx.rect(x, y, width, height)
}

function drawDashedEdge({ ctx, theme }: Pen, left: number, top: number, width: number, height: number, thickness: number): void {
  ctx.strokeStyle = theme.tone('brass')
  ctx.lineWidth = 0.9 + thickness * 0.6
  if (width < 8) {
    // Too narrow for dashes: its two long edges, open at the butts.
    ctx.beginPath()
    for (const y of [top + 0.75, top + height - 0.75]) {
      ctx.moveTo(left, y)
      ctx.lineTo(left + width, y)
    }
  }
  else {
    ctx.setLineDash([5, 3])
    shape(ctx, left + 0.5, top + 0.75, width - 1, height - 1.5)
  }
  ctx.stroke()
  ctx.setLineDash([])
}

/** Two fastenings at each butt and the lap line of the next strake. */
function drawFastenings({ ctx, theme }: Pen, left: number, top: number, width: number, height: number): void {
  ctx.fillStyle = theme.tone('bottle-on', 0.22)
  ctx.fillRect(left + 4, top + height - 4.5, width - 8, 1)
  ctx.fillStyle = theme.tone('bottle-on', 0.62)
  ctx.beginPath()
  for (const x of [left + 4.5, left + width - 4.5]) {
    for (const y of [top + height * 0.27, top + height * 0.67]) {
      ctx.moveTo(x + 1.25, y)
      ctx.arc(x, y, 1.25, 0, Math.PI * 2)
    }
  }
  ctx.fill()
}

interface Box { left: number, top: number, width: number, height: number }

/** What fits of balloon, operation and title, held in sight while its plank passes the left edge. */
function drawLabel(pen: Pen, plank: Plank, box: Box): void {
  const { ctx, theme, view } = pen
  const left = Math.max(box.left, 0)
  const width = Math.min(box.left + box.width, view.widthPx) - left
  if (width < BALLOON_PX) return
  const fonts = { word: wordFont(theme), title: titleFont(theme) }
  const inset = plank.kind === 'inked' && box.width > FASTENED_PX ? 4 : 0
  const label = fitLabel(plank, width - 2 * inset, (text, as) => textWidth(ctx, text, fonts[as]))
  const colour = plank.kind === 'inked' ? 'bottle-on' : plank.kind === 'pencilled' ? 'brass' : 'ink-faint'
  const middle = box.top + box.height / 2
  const alone = label.balloon && label.word === '' && label.title === ''
  let x = alone ? left + (width - BALLOON_PX) / 2 : left + 7 + inset
  if (label.balloon) {
    drawBalloon(pen, plank, x + BALLOON_PX / 2, middle)
    x += BALLOON_PX + 6
  }
  ctx.textBaseline = 'alphabetic'
  ctx.textAlign = 'left'
  for (const [text, font, alpha] of [[label.word, fonts.word, 1], [label.title, fonts.title, 0.86]] as const) {
    if (text === '') continue
    ctx.font = font
    ctx.fillStyle = theme.tone(colour, alpha)
    ctx.fillText(text, x, middle + 4.5)
    x += textWidth(ctx, text, font) + 6
  }
}

/** A step number in its drafting balloon. */
function drawBalloon({ ctx, theme }: Pen, plank: Plank, x: number, y: number): void {
  const inked = plank.kind === 'inked'
  const text = String(plank.number)
  ctx.beginPath()
  ctx.arc(x, y, BALLOON_PX / 2 - 1, 0, Math.PI * 2)
  ctx.fillStyle = theme.tone('sheet')
  ctx.fill()
  ctx.strokeStyle = theme.tone(inked ? 'bottle' : 'brass')
  ctx.lineWidth = 1.25
  ctx.stroke()
  ctx.font = figureFont(theme, text.length > 2 ? 11 : 13, 650)
  ctx.textAlign = 'center'
  ctx.textBaseline = 'alphabetic'
  ctx.fillStyle = theme.tone('ink')
  ctx.fillText(text, x, y + 4.5)
}
