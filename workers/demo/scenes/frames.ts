import { benchStage, lieOn, mug, partOf } from '../drawing/bench'
import { grip, hammer, palm, pencil, pinch } from '../drawing/figures'
import { write } from '../drawing/lettering'
import { blend, colour } from '../drawing/palette'
import { frameCorners } from '../drawing/pram'
import type { Stage } from '../drawing/stage'
import { add, clamp, ease, flat, mix, on, ramp, type Place, type Point, type Vec } from '../drawing/vector'
import { potDrawing } from './bowBench'
import { sway, type Moment, type Scene } from './scene'

/** The middle frame, laid on its drawing and put together on gussets. */

const camera = { at: [40, -1250, 1060] as Vec, to: [0, -95, 0] as Vec, lens: 1.42 }
const paper = flat([0, -330, 2])
const { chine, sheer } = frameCorners('middle')
const high = sheer[1] - chine[1]
const legs = 120

/** A futtock with its leg, on the paper: u across, v up from the chine. */
function futtock(side: 1 | -1): Point[] {
  const tilt = (sheer[0] - chine[0]) / high
  const at = (v: number, inset: number): Point => [side * (chine[0] + tilt * v - inset), v]
  return [at(0, 0), at(high, 0), [side * sheer[0], high + legs], [side * (sheer[0] - 46), high + legs], at(high, 46), at(0, 46)]
}

const floor: Point[] = [[-chine[0] + 50, 4], [chine[0] - 50, 4], [chine[0] - 50, 66], [-chine[0] + 50, 66]]
const gusset = (side: 1 | -1): Point[] => [[side * (chine[0] - 3), 3], [side * (chine[0] + 32), 158], [side * (chine[0] - 16), 158], [side * (chine[0] - 168), 70], [side * (chine[0] - 168), 3]]

function paperSheet(stage: Stage): void {
  stage.face([[-760, -350, 1], [760, -350, 1], [770, 370, 1], [-765, 370, 1]], { fill: colour.paper, shaded: false, layer: 0, stroke: colour.graphite, width: 1.2 })
  const line = (points: Point[], width = 1.6, dash?: string) => stage.stroke(points.map(([u, v]) => on(paper, u, v, 1)), { layer: 1, width, dash, stroke: colour.pencil })
  line([[0, -20], [0, 690]], 1, '14 5 3 5')
  line([[-740, high], [740, high]], 0.9)
  for (const side of [1, -1] as const) line([...futtock(side), futtock(side)[0]!])
  line([...floor, floor[0]!])
  write(stage, paper, 'FRAME 2', -710, 640, 26, { layer: 1 })
}

const frameDrawing: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, camera)
  paperSheet(stage)
  const k = ease(p, 0.12, 0.32)
  lieOn(stage, paper, floor, 19)
  stage.plate(paper, floor, 19, colour.fir, { layer: 3 })
  lieOn(stage, paper, futtock(-1), 19)
  stage.plate(paper, futtock(-1), 19, colour.fir, { layer: 3 })
  const slide: Place = { ...paper, o: add(paper.o, [mix(180, 0, k), mix(-60, 0, k), mix(30, 0, k)]) }
  stage.plate(slide, futtock(1), 19, colour.fir, { layer: 3 })
  const bevel: Place = flat([chine[0] - 70, -330 + 250, 22], 77)
  if (p > 0.36) {
    stage.plate(bevel, [[-20, -10], [230, -10], [230, 12], [-20, 12]], 3, colour.steel, { layer: 6 })
    stage.plate({ ...flat([chine[0] - 70, -330 + 250, 24], -8) }, [[-16, -14], [150, -14], [150, 14], [-16, 14]], 9, colour.sapele, { layer: 6 })
    write(stage, paper, '12 3/4°', 180, 300, 30, { layer: 2 })
  }
  if (p < 0.36) stage.sprite(on(slide, sheer[0] - 60, 330, 24), palm(), { layer: 9 })
  else if (p < 0.72) {
    stage.sprite(on(paper, chine[0] + 40 + ramp(p, 0.55, 0.7) * 46, 250 + ramp(p, 0.55, 0.7) * 200, 24), pencil + `<g transform="translate(36 -30)">${pinch()}</g>`, { layer: 9 })
  }
  else {
    const leg = ease(p, 0.74, 0.84)
    stage.sprite(on(paper, sheer[0] - 20, mix(330, high + 90, leg) + sway(t, 1.4) * 14 * leg, 24), palm(), { layer: 9 })
  }
  stage.sprite(on(paper, -400, 40, 24), palm(), { layer: 9, flip: true })
  return stage.toSvg()
}

const corner = { at: [300, -1120, 800] as Vec, to: [380, -205, 0] as Vec, lens: 1.65 }

const frameGussets: Scene = ({ p, t, view }) => {
  const measuring = p > 0.72 && p < 0.87
  const stage = benchStage(view, measuring ? camera : corner)
  paperSheet(stage)
  for (const side of [1, -1] as const) {
    lieOn(stage, paper, futtock(side), 19)
    stage.plate(paper, futtock(side), 19, colour.fir, { layer: 3 })
  }
  stage.plate(paper, floor, 19, colour.fir, { layer: 3 })
  const glueSpot = [...gusset(1), gusset(1)[0]!]
  stage.stroke(partOf(glueSpot, ramp(p, 0, 0.1)).map(([u, v]) => on(paper, u * 0.97, v * 0.9 + 4, 20)), { stroke: colour.glue, width: 10, layer: 4 })
  stage.plate({ ...paper, o: add(paper.o, [0, 0, 19]) }, gusset(-1), 6, colour.ply, { layer: 4 })
  nails(stage, -1, 6)
  const off = ease(p, 0.5, 0.6)
  const back = ease(p, 0.64, 0.7)
  const away = off * (1 - back)
  const lay: Place = { ...paper, o: add(paper.o, [mix(160, 0, ease(p, 0.02, 0.12)) + away * 150, away * 60, 19 + mix(60, 0, ease(p, 0.02, 0.12)) + away * 90]) }
  stage.plate(lay, gusset(1), 6, away > 0.05 || (off > 0.9 && back < 0.9) ? blend(colour.ply, colour.glue, 0.5) : colour.ply, { layer: 4.5 })
  const first = Math.floor(ramp(p, 0.2, 0.36) * 5)
  const again = Math.floor(ramp(p, 0.88, 1) * 6)
  if (p < 0.48) nails(stage, 1, Math.min(2, first))
  if (p > 0.86) nails(stage, 1, again)
  stage.sprite([-640, -250, 0], potDrawing(colour.glue, 1), { layer: 5, size: 0.8 })
  stage.sprite([800, 120, 0], mug, { layer: 2 })
  const hammering = (p > 0.2 && p < 0.38) || p > 0.88
  if (measuring) {
    const tape = ease(p, 0.73, 0.82)
    stage.plate({ ...flat([-sheer[0], paper.o[1] + high - 8, 22]) }, [[0, 0], [mix(60, sheer[0] * 2, tape), 0], [mix(60, sheer[0] * 2, tape), 22], [0, 22]], 2, colour.mustard, { layer: 6 })
    stage.sprite([mix(-sheer[0] + 60, sheer[0] + 6, tape), paper.o[1] + high + 4, 24], `<circle r="34" fill="${colour.mustard}" stroke="${colour.graphite}" stroke-width="3"/><circle r="15" fill="${colour.graphite}"/><g transform="translate(24 10)">${grip()}</g>`, { layer: 9 })
    if (tape > 0.98) write(stage, paper, '50 3/4', -60, high + 50, 32, { layer: 6 })
  }
  else if (hammering) {
    const at = on(paper, chine[0] - 40, 60, 26)
    const blow = clamp(Math.abs(sway(t, 0.9)))
    stage.sprite(add(at, [0, 0, blow * 90]), `<g transform="rotate(${-blow * 24})">${hammer}<g transform="translate(196 26)">${grip()}</g></g>`, { layer: 9 })
  }
  else stage.sprite(on(lay, chine[0] - 70, 90, 12), palm(), { layer: 9 })
  stage.sprite(on(paper, -380, 40, 24), palm(), { layer: 9, flip: true })
  return stage.toSvg()
}

function nails(stage: Stage, side: 1 | -1, count: number): void {
  const spots: Point[] = [[-20, 26], [-60, 26], [-110, 26], [6, 126], [-4, 90], [-40, 84]]
  for (const [u, v] of spots.slice(0, count)) stage.sprite(on(paper, side * (chine[0] + u), v, 26), `<circle r="6" fill="${colour.bronze}" stroke="${colour.graphite}" stroke-width="2"/>`, { layer: 6 })
}

export const frameScenes: Record<string, (moment: Moment) => string> = { 'frame-drawing': frameDrawing, 'frame-gussets': frameGussets }
