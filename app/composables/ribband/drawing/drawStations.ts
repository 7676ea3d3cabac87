import { formatClock } from '#shared/utils/time/clock'
import { fitLabels, labelX, thinMarks, type Label } from '#shared/utils/ribband/marks'
import { toX } from '#shared/utils/ribband/scale'
import type { Strip } from '#shared/utils/ribband/strip'
import { crisp, figureFont, textWidth, type Pen } from './pen'

const FAINT_LEAST_PX = 14
const TENTHS_BELOW_MS_PER_PX = 20

interface Stand extends Label { lane: number }

let lastStanding: { strip: Strip, msPerPx: number, font: string, stands: Stand[] } | null = null

/** Where chapters meet and clips begin, as far as their times have room at the foot. The same ones while the strip is moved. */
function standing({ ctx, theme, strip, view }: Pen): Stand[] {
  const font = figureFont(theme, 13, 550)
  const { msPerPx } = view
  // Hundreds of times are set only when the scale changes, not on every move.
  if (lastStanding?.strip !== strip || lastStanding.msPerPx !== msPerPx || lastStanding.font !== font) {
    const places = [
      ...strip.clips.map(clip => ({ lineMs: clip.lineMs, sessionMs: clip.startMs, lane: -1 })),
      ...strip.stations,
    ].sort((a, b) => a.lineMs - b.lineMs || b.lane - a.lane)
    const labels = places.map((place): Stand => {
      const text = formatClock(place.sessionMs, { tenths: msPerPx < TENTHS_BELOW_MS_PER_PX })
      return { lineMs: place.lineMs, text, widthPx: textWidth(ctx, text, font), lane: place.lane }
    })
    lastStanding = { strip, msPerPx, font, stands: fitLabels(labels, msPerPx, 14) }
  }
  return lastStanding.stands.filter(label => toX(view, label.lineMs) > -4 && toX(view, label.lineMs) < view.widthPx + 4)
}

/**
 * Station lines stand from above the sheer down to the base, each with its time at the foot. Stations whose
 * time has no room get a fainter line beside their planks only, and none once they would be a fence.
 */
export function drawStations(pen: Pen): void {
  const { ctx, theme, strip, layout, view } = pen
  const stands = standing(pen)
  ctx.lineWidth = 1
  ctx.strokeStyle = theme.tone('rule-strong', 0.8)
  ctx.beginPath()
  for (const { lineMs, lane } of stands) {
    if (lane < 0) continue
    const x = crisp(toX(view, lineMs))
    ctx.moveTo(x, layout.sheer.top - 8)
    ctx.lineTo(x, layout.base)
  }
  ctx.stroke()
  ctx.strokeStyle = theme.tone('rule-strong', 0.4)
  ctx.beginPath()
  for (const [lane, bands] of layout.lanes.entries()) {
    const marks = thinMarks(strip.stationPlaces[lane] ?? [], view, FAINT_LEAST_PX)
    if (marks.length > view.widthPx / FAINT_LEAST_PX / 2) continue
    for (const lineMs of marks) {
      const x = crisp(toX(view, lineMs))
      ctx.moveTo(x, lane === 0 ? layout.words.top : bands.planks.top - 6)
      ctx.lineTo(x, bands.pictures.top + bands.pictures.height)
    }
  }
  ctx.stroke()
  ctx.font = figureFont(theme, 13, 550)
  ctx.textAlign = 'center'
  ctx.textBaseline = 'alphabetic'
  ctx.fillStyle = theme.tone('ink')
  for (const label of stands) {
    ctx.fillRect(Math.round(toX(view, label.lineMs)), layout.base, 1, 6)
    ctx.fillText(label.text, labelX(view, label), layout.stationTimes.top + 15)
  }
}
