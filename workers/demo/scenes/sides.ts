import { partOf } from '../drawing/bench'
import { drawBoat, drawFastenings, drawRod, sideEdges } from '../drawing/boat'
import { brush, clampTool, grip, jigsaw, palm, pencil, person, pinch, stick } from '../drawing/figures'
import { blend, colour } from '../drawing/palette'
import { edgeAt, edgeLine, FRAMES, overturn } from '../drawing/pram'
import { drawFloorShadow, drawShop } from '../drawing/shop'
import { Stage, type Camera } from '../drawing/stage'
import { add, ease, mix, mixVec, ramp, type Vec } from '../drawing/vector'
import { sway, type Moment, type Scene } from './scene'
import { ivo, maud, screwing } from './strongback'

/** The side panels: wrapped, scribed, cut, glued and screwed. */

const wide: Camera = { at: [-750, -3750, 2150], to: [1850, -40, 850], lens: 1.32 }

function sunny(view: Moment['view'], camera: Camera): Stage {
  const stage = new Stage(view, camera)
  drawShop(stage, { beam: 0.42, sky: '#bfe0e6' })
  drawFloorShadow(stage)
  return stage
}

const skeletonMorning: Scene = ({ p, view }) => {
  const k = ease(p, 0.05, 0.9)
  const stage = sunny(view, { at: [mix(-1500, -950, k), -3600, mix(1750, 2050, k)], to: [1800, 0, 850], lens: 1.3 })
  drawBoat(stage)
  stage.sprite([4500, 900, 0], maud, { layer: 2.5 })
  return stage.toSvg()
}

const sideWrap: Scene = ({ p, t, view }) => {
  const stage = sunny(view, wide)
  const bent = ease(p, 0.34, 0.72)
  const away = 520 * (1 - ease(p, 0.05, 0.3))
  drawBoat(stage, { sides: { 1: { bent, over: 70, away } } })
  const reach = 0.6 + 0.05 * sway(t, 2)
  stage.sprite([mix(-330, -260, bent), mix(-900, -520, bent), 0], person({ reach }), { layer: 8, flip: true })
  stage.sprite([mix(4260, 4180, bent), mix(-1150, -760, bent), 0], person({ jersey: colour.mustard, apron: '#8d857a', cap: colour.green, hair: colour.graphite, reach }), { layer: 8 })
  return stage.toSvg()
}

const sideScribe: Scene = ({ p, t, view }) => {
  const second = p > 0.56
  const stage = sunny(view, second
    ? { at: [600, -2100, 1350], to: [2000, -560, 860], lens: 1.5 }
    : { at: [500, 1250, 1780], to: [1750, -540, 1060], lens: 1.45 })
  drawBoat(stage, { chines: true, sides: { 1: { over: 70 } }, near: second ? 1 : -1 })
  if (second) {
    const sheer = edgeLine('sheer', 1, 24).map(p3 => add(overturn(p3), [0, -16, 0]))
    stage.stroke(partOf(sheer, ramp(p, 0.76, 1)), { stroke: colour.pencil, width: 2.6, layer: 7 })
    drawRod(stage, sheer.map(q => add(q, [0, -8, -16])), 16, colour.plyEdge, { layer: 7 })
    const at = partOf(sheer, Math.max(0.34, ramp(p, 0.76, 1) * 0.9)).at(-1)!
    stage.sprite(at, pencil + `<g transform="translate(36 -30)">${pinch()}</g>`, { layer: 9 })
  }
  else {
    const line = edgeLine('chine', 1, 24).map(p3 => add(overturn([p3[0], p3[1], p3[2] + 32]), [0, 12, 0]))
    stage.stroke(partOf(line, mix(0.2, 0.7, ramp(p, 0.1, 0.54))), { stroke: colour.pencil, width: 2.4, layer: 7 })
    const at = partOf(line, mix(0.2, 0.7, ramp(p, 0.1, 0.54))).at(-1)!
    stage.sprite(add(at, [0, 0, sway(t, 1.2) * 3]), pencil + `<g transform="translate(36 -30)">${pinch()}</g>`, { layer: 9 })
  }
  return stage.toSvg()
}

/** Sheer and chine of the side laid flat: for sawing on the trestles. */
function flatSide(over = 0): { upper: [number, number][], lower: [number, number][] } {
  const { sheer, chine } = sideEdges(1, { over })
  return { upper: sheer.map(([x, , z]) => [x, z * 1.05]), lower: chine.map(([x, , z]) => [x, z * 1.05]) }
}

const sideCut: Scene = ({ p, t, view }) => {
  const stage = new Stage(view, { at: [1500, -2250, 2350], to: [1780, -60, 830], lens: 1.28 })
  drawShop(stage, { beam: 0.42, sky: '#bfe0e6' })
  for (const x of [500, 1750, 3000]) {
    stage.beam([x, -420, 770], [x, 620, 770], 70, 80, colour.spruce, { layer: 3 })
    for (const y of [-350, 540]) for (const dx of [-160, 160]) stage.beam([x + dx, y, 0], [x, y, 740], 60, 50, colour.pine, { layer: 2 })
  }
  const at = ([x, y]: readonly [number, number], z = 832): Vec => [x - 60, y - 330, z]
  const sheet: Vec[] = [at([-120, -90]), at([3760, -90]), at([3760, 840]), at([-120, 840])]
  stage.face(sheet.map(v => add(v, [40, -60, -820])), { fill: colour.shadow, shaded: false, layer: 1, opacity: 0.3 })
  stage.face(sheet.map(v => add(v, [0, 0, -14])), { fill: colour.plyEdge, layer: 4, stroke: colour.graphite })
  stage.face(sheet, { fill: colour.ply, layer: 4.2, stroke: colour.graphite })
  const { upper, lower } = flatSide()
  const loop = [...lower, ...[...upper].reverse(), lower[0]!].map(q => at(q))
  stage.stroke(loop, { stroke: colour.pencil, width: 2, layer: 5 })
  const share = 0.04 + ramp(p, 0.42, 0.98) * 0.36
  const cut = partOf([...upper].reverse().map(q => at([q[0], q[1] + 8])), share * 2)
  stage.stroke(cut, { stroke: colour.graphite, width: 4.5, layer: 5.2 })
  for (const x of [300, 2300, 3300]) stage.sprite([x, -405, 838], clampTool(34, x), { layer: 6, size: 1.1 })
  const shake = p > 0.42 ? Math.round(t * 10) % 2 * 2 : 0
  stage.sprite(add(cut.at(-1)!, [0, 0, shake]), `<g transform="scale(1.4)">${jigsaw}<g transform="translate(66 -116)">${grip()}</g></g>`, { layer: 9 })
  stage.sprite(add(cut.at(-1)!, [-520, -180, 8]), `<g transform="scale(1.3)">${palm()}</g>`, { layer: 8.5, flip: true })
  return stage.toSvg()
}

const seam = (x: number): Vec => {
  const [, y, z] = edgeAt('chine', x, 1)
  return overturn([x, y + 2, z + 14])
}
const seamLine = Array.from({ length: 40 }, (_, i) => seam(mix(200, 3540, i / 39)))
const along: Camera = { at: [150, -2050, 1850], to: [1700, -330, 1130], lens: 1.45 }

const sideSeal: Scene = ({ p, t, view }) => {
  const k = ease(p, 0.02, 0.3)
  const stage = sunny(view, { at: mixVec([-750, -3000, 2050], along.at, k), to: mixVec([1850, -40, 900], along.to, k), lens: mix(1.32, 1.45, k) })
  drawBoat(stage)
  const share = mix(0.06, 0.74, ramp(p, 0.3, 0.98))
  const done = partOf(seamLine, share)
  if (p > 0.3) stage.stroke(done, { stroke: colour.plyWet, width: 14, layer: 7, opacity: 0.8 })
  if (p > 0.26) stage.sprite(add(done.at(-1)!, [0, -6, sway(t, 0.9) * 14]), brush(colour.plyWet) + `<g transform="translate(92 -112)">${pinch({ gloved: true })}</g>`, { layer: 9 })
  return stage.toSvg()
}

const sideGlue: Scene = ({ p, t, view }) => {
  const stage = sunny(view, along)
  drawBoat(stage)
  stage.stroke(seamLine, { stroke: colour.plyWet, width: 14, layer: 6.8, opacity: 0.8 })
  const done = partOf(seamLine, mix(0.05, 0.76, ramp(p, 0.04, 0.96)))
  stage.stroke(done.map((q, i) => add(q, [0, -3, i % 2 ? 6 : -6])), { stroke: blend(colour.glue, '#ffffff', 0.12), width: 9, layer: 7 })
  stage.sprite(add(done.at(-1)!, [0, -6, sway(t, 0.7) * 8]), stick + `<g transform="translate(62 -110)">${pinch({ gloved: true })}</g>`, { layer: 9 })
  return stage.toSvg()
}

function sheerClamps(stage: Stage, share: number): void {
  for (let i = 0; i < 9; i++) {
    if (i / 9 >= share) continue
    const x = 1880 + (i % 2 ? 1 : -1) * Math.ceil(i / 2) * 410
    const at = overturn(add(edgeAt('sheer', x, 1), [0, 0, -22]))
    stage.sprite(add(at, [0, -10, -20]), `<g transform="rotate(180)">${clampTool(30, i)}</g>`, { layer: 8, size: 0.95 })
  }
}

const sideOn: Scene = ({ p, t, view }) => {
  const stage = sunny(view, wide)
  const away = 620 * (1 - ease(p, 0.08, 0.42))
  const bent = ease(p, 0.3, 0.66)
  drawBoat(stage, { sides: { 1: { bent, away } } })
  stage.stroke(seamLine, { stroke: colour.glue, width: 4, layer: 5.5 })
  sheerClamps(stage, ramp(p, 0.72, 0.98))
  const reach = 0.6 + 0.04 * sway(t, 2)
  stage.sprite([-330, mix(-1000, -520, bent), 0], person({ reach }), { layer: 8.5, flip: true })
  stage.sprite([4230, mix(-1250, -760, bent), 0], person({ jersey: colour.mustard, apron: '#8d857a', cap: colour.green, hair: colour.graphite, reach }), { layer: 8.5 })
  return stage.toSvg()
}

const sideScrews: Scene = ({ p, t, view }) => {
  const back = p > 0.62
  const share = ramp(p, 0.12, 0.9)
  const x = 1880 - 1640 * Math.min(share, 0.62)
  const stage = sunny(view, back ? { ...wide, at: [-1300, -3100, 1750], to: [1400, -100, 930], lens: 1.4 } : { at: [1250, -2050, 1750], to: [1800, -560, 1180], lens: 1.5 })
  drawBoat(stage, { sides: { 1: {} } })
  sheerClamps(stage, 1)
  drawFastenings(stage, 1, share, 'side')
  if (!back) screwing(stage, seam(Math.max(x, 1330)), t)
  else stage.sprite([1500, 980, 0], ivo, { layer: 2.5 })
  return stage.toSvg()
}

const bothSides: Scene = ({ p, view }) => {
  const k = ease(p, 0.02, 0.7)
  const angle = mix(-1.95, -2.75, k)
  const stage = new Stage(view, { at: [1850 + 3900 * Math.cos(angle), 3500 * Math.sin(angle), 1950], to: [1900, 0, 880], lens: 1.28 })
  drawShop(stage, { beam: 0.3, sky: '#c9dfdf' })
  drawFloorShadow(stage)
  drawBoat(stage, { sides: { 1: {}, [-1]: {} } })
  drawFastenings(stage, 1, 1, 'side')
  stage.sprite([FRAMES.middle, 1100, 0], maud, { layer: 2.5 })
  return stage.toSvg()
}

export const sideScenes: Record<string, (moment: Moment) => string> = {
  'skeleton-morning': skeletonMorning, 'side-wrap': sideWrap, 'side-scribe': sideScribe, 'side-cut': sideCut,
  'side-seal': sideSeal, 'side-glue': sideGlue, 'side-on': sideOn, 'side-screws': sideScrews, 'both-sides': bothSides,
}
