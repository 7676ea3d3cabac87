import { partOf } from '../drawing/bench'
import { drawBoat, drawBottom, drawChineLog, drawFastenings, drawFrame, drawSide, drawTransom, type BoatState } from '../drawing/boat'
import { grip, hammer, longPlane, palm, person, pinch, shaving, stick } from '../drawing/figures'
import { blend, colour } from '../drawing/palette'
import { edgeAt, overturn } from '../drawing/pram'
import { drawFloorShadow, drawShop } from '../drawing/shop'
import { Stage, type Camera } from '../drawing/stage'
import { add, ease, mix, ramp, type Vec } from '../drawing/vector'
import { sway, type Moment, type Scene } from './scene'
import { ivo, maud } from './strongback'

/** The edges planed flat and the bottom glued and nailed on, late on a sunny day. */

const SIDES: BoatState = { sides: { 1: {}, [-1]: {} } }
const high: Camera = { at: [-700, -3000, 2700], to: [1850, -20, 1000], lens: 1.32 }

function evening(view: Moment['view'], camera: Camera): Stage {
  const stage = new Stage(view, camera)
  drawShop(stage, { beam: 0.4, sky: '#f0d9ae' })
  drawFloorShadow(stage)
  return stage
}

const top = (x: number, k: number): Vec => {
  const [, y, z] = edgeAt('chine', x, 1)
  return overturn([x, (y - 16) * k, z - 4])
}
const chineRun = (k: number): Vec[] => Array.from({ length: 40 }, (_, i) => top(mix(190, 3545, i / 39), k))

const edgePlane: Scene = ({ p, t, view }) => {
  const stage = evening(view, { at: [300, -2500, 2350], to: [1850, -120, 1180], lens: 1.45 })
  drawBoat(stage, SIDES)
  drawFastenings(stage, 1, 1, 'side')
  for (const k of [1, -1]) stage.stroke(partOf(chineRun(k), mix(0.15, 0.92, ramp(p, 0.15, 0.95))), { stroke: colour.plyEdge, width: 7, layer: 6.5 })
  const x = mix(900, 2900, ramp(p, 0.1, 0.95)) + sway(t, 1.7) * 170
  const at = add(top(x, 1), [0, -10, 14])
  stage.sprite(at, `${longPlane}<g transform="translate(150 -70)">${grip()}</g>`, { layer: 9, turn: -3 })
  stage.sprite(add(at, [-125, -20, 70]), palm(), { layer: 9.1, flip: true, turn: 20 })
  for (let i = 0; i < 7 * p; i++) stage.sprite(add(top(1100 + i * 250, 1), [0, -60, -90 - (i * 97 % 260)]), shaving(i * 80), { layer: 7 })
  return stage.toSvg()
}

const bottomDrop: Scene = ({ p, t, view }) => {
  const stage = evening(view, high)
  const lift = 640 * (1 - ease(p, 0.1, 0.42)) + 520 * ease(p, 0.86, 1)
  drawBoat(stage, { ...SIDES, bottom: { over: 26, lift } })
  drawFastenings(stage, 1, 1, 'side')
  const reach = 0.7 + 0.03 * sway(t, 2)
  stage.sprite([-470, -300, 0], person({ reach }), { layer: 8, flip: true })
  stage.sprite([4200, -300, 0], person({ jersey: colour.mustard, apron: '#8d857a', cap: colour.green, hair: colour.graphite, reach }), { layer: 8 })
  return stage.toSvg()
}

const bottomGlue: Scene = ({ p, t, view }) => {
  const stage = evening(view, { at: [-350, -2350, 2450], to: [1500, -60, 1120], lens: 1.4 })
  drawBoat(stage, SIDES)
  const near = ramp(p, 0.12, 0.62)
  const far = ramp(p, 0.62, 0.98)
  for (const [k, share] of [[1, 1], [-1, 1]] as const) stage.stroke(partOf(chineRun(k), share), { stroke: colour.plyWet, width: 8, layer: 6.4, opacity: 0.8 })
  const bead = (k: number, share: number) => {
    if (share > 0) stage.stroke(partOf(chineRun(k), share).map((q, i) => add(q, [0, i % 2 ? 5 : -5, 3])), { stroke: blend(colour.glue, '#ffffff', 0.1), width: 8, layer: 6.6 })
  }
  bead(1, near)
  bead(-1, far)
  if (far > 0) stage.sprite([mix(900, 2700, far), 1050, 0], person({ jersey: colour.mustard, apron: '#8d857a', cap: colour.green, hair: colour.graphite, reach: 0.25 + 0.06 * sway(t, 1) }), { layer: 2.5 })
  else stage.sprite(add(partOf(chineRun(1), Math.max(0.02, near * 0.92)).at(-1)!, [0, -4, 6 + sway(t, 0.7) * 6]), stick + `<g transform="translate(62 -110)">${pinch({ gloved: true })}</g>`, { layer: 9 })
  return stage.toSvg()
}

const bottomNails: Scene = ({ p, t, view }) => {
  const close = p > 0.42 && p < 0.8
  const stage = evening(view, close ? { at: [1150, -1750, 2150], to: [1850, -430, 1300], lens: 1.5 } : high)
  drawBoat(stage, { ...SIDES, bottom: { over: 26, lift: 560 * (1 - ease(p, 0.04, 0.24)) } })
  const share = ramp(p, 0.38, 0.98)
  for (const side of [1, -1] as const) drawFastenings(stage, side, share, 'bottom', 76)
  if (close) {
    const blow = Math.abs(sway(t, 0.8))
    const at = add(top(Math.max(1500, 1880 - share * 900), 1), [0, 0, 14])
    stage.sprite(add(at, [0, 0, blow * 120]), `<g transform="rotate(${-blow * 26})">${hammer}<g transform="translate(196 26)">${grip()}</g></g>`, { layer: 9 })
    stage.sprite(add(at, [-170, -10, 6]), palm(), { layer: 8.8, flip: true })
  }
  else {
    stage.sprite([-420, -420, 0], maud, { layer: 8, flip: true })
    stage.sprite([4200, -300, 0], ivo, { layer: 8 })
  }
  return stage.toSvg()
}

/** Seen from the floor between the rails, looking up and aft. */
const underHull: Scene = ({ p, t, view }) => {
  const stage = new Stage(view, { at: [420, -90, 640], to: [2000, 60, 1075], lens: 0.95 })
  drawShop(stage, { beam: 0, sky: '#f0d9ae' })
  drawBottom(stage, { layer: 1, fill: blend(colour.ply, colour.shadow, 0.2) })
  for (const side of [1, -1] as const) {
    drawSide(stage, side, { layer: 2 })
    drawChineLog(stage, side, 1, { layer: 3 })
  }
  for (const name of ['forward', 'middle', 'after'] as const) drawFrame(stage, name)
  drawTransom(stage, 'stern')
  const scraped = ramp(p, 0.15, 0.95)
  for (let i = 0; i < 9; i++) {
    if (i / 9 < scraped) continue
    const [x, y, z] = top(1180 + i * 75, -0.93)
    stage.sprite([x, y, z - 36], `<path d="M-14 -8Q0 -14 14 -8Q10 6 2 ${20 + i % 3 * 9}Q-8 6 -14 -8Z" fill="${colour.glue}" stroke="${colour.bronze}" stroke-width="2"/>`, { layer: 6 })
  }
  const [x, y, z] = top(1180 + 675 * scraped, -0.93)
  stage.sprite([x, y, z - 40 + sway(t, 1.1) * 5], `<g transform="rotate(116)">${stick}</g><g transform="translate(84 108)">${pinch({ gloved: true })}</g>`, { layer: 9 })
  return stage.toSvg()
}

const hullHero: Scene = ({ p, view }) => {
  const k = ease(p, 0.02, 0.85)
  const angle = mix(-2.25, -1.92, k)
  const stage = evening(view, { at: [1850 + 4300 * Math.cos(angle), 4000 * Math.sin(angle), mix(1600, 2050, k)], to: [1950, 0, 880], lens: 1.3 })
  drawBoat(stage, { ...SIDES, bottom: {} })
  for (const where of ['side', 'bottom'] as const) drawFastenings(stage, 1, 1, where)
  stage.sprite([4350, 850, 0], maud, { layer: 2.5 })
  stage.sprite([4750, 500, 0], ivo, { layer: 2.6 })
  return stage.toSvg()
}

export const bottomScenes: Record<string, (moment: Moment) => string> = {
  'edge-plane': edgePlane, 'bottom-drop': bottomDrop, 'bottom-glue': bottomGlue, 'bottom-nails': bottomNails, 'under-hull': underHull, 'hull-hero': hullHero,
}
