import { drawBoat, drawChineLog } from '../drawing/boat'
import { blockPlane, brush, chisel, clampTool, grip, palm, person, pinch, shaving } from '../drawing/figures'
import { blend, colour } from '../drawing/palette'
import { edgeAt, FRAMES, overturn } from '../drawing/pram'
import { drawFloorShadow } from '../drawing/shop'
import type { Stage } from '../drawing/stage'
import { add, ease, mix, ramp, type Vec } from '../drawing/vector'
import { sway, type Moment, type Scene } from './scene'
import { ivo, maud, screwing, shopStage } from './strongback'

/** The chine logs: bent in, glued, screwed, bevelled. */

const chineAt = (x: number, side: 1 | -1 = 1): Vec => {
  const [, y, z] = edgeAt('chine', x, side)
  return overturn([x, y - 14 * side, z + 14])
}

function clampOn(stage: Stage, x: number, side: 1 | -1 = 1, size = 0.9): void {
  stage.sprite(add(chineAt(x, side), [0, -18 * side, 0]), clampTool(44, x), { layer: 7, turn: 8, size })
}

const chineSpring: Scene = ({ p, t, view }) => {
  const stage = shopStage(view, { at: [-650, -3700, 2150], to: [1900, -60, 830], lens: 1.32 })
  drawFloorShadow(stage)
  drawBoat(stage, { chines: false })
  drawChineLog(stage, -1)
  const bent = ease(p, 0.3, 0.72)
  drawChineLog(stage, 1, bent, { layer: 6 })
  stage.sprite([900, 930, 0], maud, { layer: 2.5 })
  stage.sprite([mix(4330, 3850, bent), mix(-1300, -620, bent), 0], person({ jersey: colour.mustard, apron: '#8d857a', cap: colour.green, hair: colour.graphite, reach: 0.7 + 0.05 * sway(t, 2) }), { layer: 7 })
  return stage.toSvg()
}

const chineSight: Scene = ({ p, t, view }) => {
  const close = ease(p, 0.55, 0.68)
  const stage = shopStage(view, close < 0.5
    ? { at: [4700, -1250, 1700], to: [1700, -250, 1090], lens: 1.6 }
    : { at: [650, -1500, 1750], to: [FRAMES.forward + 40, -390, 1215], lens: 1.5 })
  drawFloorShadow(stage)
  drawBoat(stage)
  for (const x of Object.values(FRAMES)) clampOn(stage, x)
  if (close < 0.5) stage.sprite([-150, 620, 0], ivo, { layer: 2.5, flip: true })
  else {
    const blow = Math.max(0, sway(t, 1.1))
    const at = add(chineAt(FRAMES.forward), [-30, -10, 10])
    stage.sprite(add(at, [0, 0, p > 0.7 ? blow * 4 : 60]), `<g transform="rotate(140)">${chisel}</g><g transform="translate(14 -150)">${grip()}</g>`, { layer: 9 })
  }
  return stage.toSvg()
}

const NOTCH: Vec = chineAt(FRAMES.middle)

const chineGlue: Scene = ({ p, t, view }) => {
  const stage = shopStage(view, { at: [1200, -1500, 1900], to: [FRAMES.middle + 120, -440, 1290], lens: 1.55 })
  drawBoat(stage, { chines: false })
  drawChineLog(stage, -1)
  const wet = ramp(p, 0.12, 0.4)
  const glue = ramp(p, 0.44, 0.8)
  const patch = (grow: number, fill: string, layer: number) => stage.sprite(add(NOTCH, [-10, -4, 0]), `<ellipse rx="${36 * grow}" ry="${26 * grow}" fill="${fill}" stroke="${blend(fill, colour.graphite, 0.4)}" stroke-width="2"/>`, { layer })
  if (wet > 0) patch(wet, colour.plyWet, 6)
  if (glue > 0) patch(glue * 0.8, colour.glue, 6.2)
  const at = add(NOTCH, [sway(t, 1.3) * 22, -20, sway(t, 0.9) * 10 + (p < 0.1 ? 60 : 0)])
  stage.sprite(at, brush(p > 0.44 ? colour.glue : colour.plyWet) + `<g transform="translate(92 -112)">${pinch({ gloved: true })}</g>`, { layer: 9 })
  return stage.toSvg()
}

const chineScrew: Scene = ({ p, t, view }) => {
  const stern = p > 0.5
  const x = stern ? 3545 : FRAMES.middle
  const at = add(chineAt(x), [0, -20, 0])
  const stage = shopStage(view, { at: add(at, [-620, -1180, 560]), to: add(at, [100, 60, -30]), lens: 1.5 })
  drawBoat(stage)
  for (const frame of Object.values(FRAMES)) clampOn(stage, frame + 60)
  for (const [screw, from] of [[FRAMES.middle, 0.4], [3545, 0.8], [3500, 0.95]] as const) {
    if (p > from) stage.sprite(add(chineAt(screw), [0, -18, 0]), `<circle r="8" fill="${colour.bronze}" stroke="${colour.graphite}" stroke-width="2"/><path d="M-5 -5L5 5" stroke="${colour.graphite}" stroke-width="2"/>`, { layer: 7 })
  }
  if (!(p > 0.42 && p < 0.5)) screwing(stage, at, t, true)
  return stage.toSvg()
}

const chineBevel: Scene = ({ p, t, view }) => {
  const across = ramp(p, 0.46, 0.56) * (1 - ramp(p, 0.66, 0.74))
  const stage = shopStage(view, { at: [900, -2050, 2200], to: [2080, -170, 1230], lens: 1.55 })
  drawBoat(stage)
  const bevelled = ramp(p, 0.1, 0.95)
  const line = Array.from({ length: 12 }, (_, i): Vec => add(chineAt(1350 + i * 110 * bevelled), [0, 0, 15]))
  stage.stroke(line, { stroke: colour.plyEdge, width: 9, layer: 6 })
  if (across > 0.02) {
    stage.beam([2350, -760, 1352 - (1 - across) * -90], [2350, 760, 1352 + (1 - across) * 90], 40, 60, colour.steel, { layer: 7 })
    stage.sprite([2350, -600, 1390 + (1 - across) * 90], palm(), { layer: 9 })
  }
  else {
    const x = mix(1500, 2500, (Math.sin(t * 2.4) + 1) / 2)
    stage.sprite(add(chineAt(x), [0, -6, 22]), `${blockPlane}<g transform="translate(64 -56)">${grip()}</g>`, { layer: 9, turn: -4 })
  }
  for (let i = 0; i < 6 * p; i++) stage.sprite(add(chineAt(1500 + i * 190), [0, -60 - i * 7, -70 - (i * 83 % 240)]), shaving(i * 65), { layer: 6.5 })
  return stage.toSvg()
}

export const chineScenes: Record<string, (moment: Moment) => string> = {
  'chine-spring': chineSpring, 'chine-sight': chineSight, 'chine-glue': chineGlue, 'chine-screw': chineScrew, 'chine-bevel': chineBevel,
}
