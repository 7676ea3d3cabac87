import { drawBoat, drawBraces, drawFrame, drawStrongback, drawTransom, RAIL_TOP } from '../drawing/boat'
import { drill, grip, palm, person } from '../drawing/figures'
import { colour } from '../drawing/palette'
import { edgeAt, FRAMES, overturn, type FrameName } from '../drawing/pram'
import { drawFloorShadow, drawShop } from '../drawing/shop'
import { Stage, type Camera } from '../drawing/stage'
import { add, ease, mix, mixVec, ramp, type Vec } from '../drawing/vector'
import { sway, type Moment, type Scene } from './scene'

/** The skeleton going up on the strongback. */

const NAMES = ['forward', 'middle', 'after'] as const
const maud = person({})
const ivo = person({ jersey: colour.mustard, apron: '#8d857a', cap: colour.green, hair: colour.graphite, reach: 0.6 })
const quarter: Camera = { at: [-900, -3700, 2050], to: [1850, 0, 800], lens: 1.3 }

function shopStage(view: Moment['view'], camera: Camera, beam = 0.14): Stage {
  const stage = new Stage(view, camera)
  drawShop(stage, { beam, sky: '#d3dbd8' })
  return stage
}

const strongbackWide: Scene = ({ p, t, view }) => {
  const k = ease(p, 0.05, 0.4)
  const stage = shopStage(view, { at: [mix(200, -900, k), -3900, 2000], to: [mix(2500, 1850, k), 0, 780], lens: 1.3 })
  drawStrongback(stage)
  stage.sprite([900, 1050, 0], person({ reach: 0.3 + 0.15 * sway(t, 3) }), { layer: 2.5, flip: true })
  stage.sprite([3250, 1000, 0], ivo, { layer: 2.5 })
  return stage.toSvg()
}

const standFrames: Scene = ({ p, t, view }) => {
  if (p > 0.74) {
    const leg = overturn([FRAMES.forward, -420, 880])
    const close = closeUp(view, leg)
    drawBoat(close, { transoms: false, chines: false, braces: false })
    screwing(close, leg, t)
    return close.toSvg()
  }
  const stage = shopStage(view, quarter)
  drawFloorShadow(stage, 0.5 * p)
  drawStrongback(stage)
  NAMES.forEach((name, i) => {
    const from = 0.06 + i * 0.22
    if (p > from) drawFrame(stage, name, 900 * (1 - ease(p, from, from + 0.17)))
  })
  const which = Math.min(2, Math.floor(ramp(p, 0.06, 0.72) * 3))
  const x = Object.values(FRAMES)[which]!
  stage.sprite([mix(x, x + 60, 0.5), 900, 0], maud, { layer: 2.5, flip: which === 2 })
  return stage.toSvg()
}

/** A camera close to a point, from the starboard bow. */
function closeUp(view: Moment['view'], at: Vec): Stage {
  return shopStage(view, { at: add(at, [-620, -1250, 520]), to: add(at, [90, 0, 60]), lens: 1.5 })
}

/** A hand with the drill, its bit at the point. */
function screwing(stage: Stage, at: Vec, t: number, gloved = false): void {
  const push = sway(t, 1.6) * 8
  stage.sprite(add(at, [push + 6, -30, 0]), `<g transform="translate(150 0)">${drill}<g transform="translate(62 84)">${grip({ gloved })}</g></g>`, { layer: 9 })
}

const standTransoms: Scene = ({ p, t, view }) => {
  if (p > 0.6) {
    const foot: Vec = [205, -215, RAIL_TOP + 40]
    const close = closeUp(view, foot)
    drawBoat(close, { chines: false, braces: false })
    screwing(close, foot, t)
    return close.toSvg()
  }
  const k = ease(p, 0.05, 0.5)
  const stage = shopStage(view, { at: [mix(-900, -1350, k), mix(-3700, -3000, k), 2000], to: [mix(1850, 1250, k), 0, 820], lens: 1.3 })
  drawFloorShadow(stage, 0.6)
  drawStrongback(stage)
  NAMES.forEach(name => drawFrame(stage, name))
  if (p > 0.08) drawTransom(stage, 'bow', { lift: 700 * (1 - ease(p, 0.08, 0.3)) })
  if (p > 0.34) drawTransom(stage, 'stern', { lift: 700 * (1 - ease(p, 0.34, 0.54)) })
  stage.sprite([4150, 450, 0], ivo, { layer: 2.5 })
  return stage.toSvg()
}

function centreString(stage: Stage, share: number): void {
  const from = add(overturn(edgeAt('chine', 170, 1)), [-30, 0, 0])
  const to = overturn(edgeAt('chine', 3560, 1))
  const [a, b]: [Vec, Vec] = [[from[0], 0, from[2] + 8], [to[0] + 60, 0, to[2] + 8]]
  stage.stroke([a, mixVec(a, b, share)], { stroke: colour.redLead, width: 2.6, layer: 8 })
}

const sightString: Scene = ({ p, t, view }) => {
  const stage = shopStage(view, { at: [-1500, -260, 1720], to: [1900, 20, 1010], lens: 1.55 })
  drawFloorShadow(stage, 0.8)
  drawStrongback(stage)
  const shift = 95 * (1 - ease(p, 0.36, 0.44) * 0.6 - ease(p, 0.72, 0.8) * 0.4)
  NAMES.forEach(name => drawFrame(stage, name, 0, name === 'after' ? shift : 0))
  drawTransom(stage, 'stern')
  drawTransom(stage, 'bow')
  centreString(stage, ease(p, 0.04, 0.2))
  stage.sprite([3900, 620 + shift, 0], person({ jersey: colour.mustard, apron: '#8d857a', cap: colour.green, hair: colour.graphite, reach: 0.35 + 0.06 * sway(t, 2) }), { layer: 2.5 })
  if (p > 0.3 && p < 0.5) stage.sprite([-560, -170, 1330 + sway(t, 1.5) * 12], palm(), { layer: 9, turn: 30 })
  return stage.toSvg()
}

function level(stage: Stage, name: FrameName, t: number, settle: number): void {
  const chine = overturn(edgeAt('chine', FRAMES[name], 1))
  const z = chine[2] + 4
  stage.beam([FRAMES[name], -330, z + 28], [FRAMES[name], 330, z + 28], 26, 56, colour.brass, { layer: 7 })
  const bubble = 14 * (1 - settle) * sway(t, 1.8)
  stage.sprite([FRAMES[name] - 16, 0, z + 30], `<rect x="-46" y="-17" width="92" height="34" rx="15" fill="#dff0c0" stroke="${colour.graphite}" stroke-width="3"/><ellipse cx="${bubble}" cy="0" rx="20" ry="10" fill="#ffffff" stroke="${colour.graphite}" stroke-width="2"/><path d="M-24 -16V16M24 -16V16" stroke="${colour.graphite}" stroke-width="2.5"/>`, { layer: 8 })
}

const levelFrame: Scene = ({ p, t, view }) => {
  const out = ease(p, 0.52, 0.66)
  const stage = shopStage(view, { at: [mix(900, -900, out), mix(-1250, -2700, out), mix(1760, 2300, out)], to: [mix(1960, 1950, out), mix(-60, 0, out), mix(1230, 850, out)], lens: mix(1.5, 1.4, out) })
  drawBoat(stage, { chines: false, braces: false })
  level(stage, 'middle', t, ease(p, 0.1, 0.4))
  if (p < 0.5) stage.sprite([FRAMES.middle - 30, -250, 1372], palm(), { layer: 9 })
  if (p > 0.6) {
    const corner = (name: FrameName, side: 1 | -1) => add(overturn(edgeAt('sheer', FRAMES[name], side)), [0, 0, 20])
    const [a, b] = [corner('forward', 1), corner('after', -1)]
    stage.stroke([a, mixVec(a, b, ease(p, 0.62, 0.76))], { stroke: colour.mustard, width: 5, layer: 8 })
    const [c, d] = [corner('forward', -1), corner('after', 1)]
    if (p > 0.8) stage.stroke([c, mixVec(c, d, ease(p, 0.8, 0.94))], { stroke: colour.mustard, width: 5, layer: 8 })
  }
  return stage.toSvg()
}

const braces: Scene = ({ p, t, view }) => {
  if (p > 0.36 && p < 0.76) {
    const foot: Vec = [1500, -195, RAIL_TOP + 60]
    const close = closeUp(view, foot)
    drawBoat(close, { chines: false })
    screwing(close, foot, t)
    return close.toSvg()
  }
  const stage = shopStage(view, { at: [-900, -3300, 1900], to: [1750, 0, 860], lens: 1.4 })
  drawFloorShadow(stage)
  drawBoat(stage, { chines: false, braces: false })
  drawBraces(stage, p > 0.76 ? 1 : ramp(p, 0.05, 0.36) * 0.66)
  stage.sprite([2350, 880, 0], maud, { layer: 2.5, flip: true })
  return stage.toSvg()
}

const portraitBow: Scene = ({ p, view }) => {
  const stage = shopStage(view, { at: [-1550, -760, 1650], to: [700, 0, 830], lens: 1.12 })
  drawFloorShadow(stage, 0.7)
  drawStrongback(stage)
  NAMES.forEach(name => drawFrame(stage, name))
  if (p > 0.22) drawTransom(stage, 'bow', { lift: 800 * (1 - ease(p, 0.22, 0.5)) })
  if (p > 0.55) drawTransom(stage, 'stern', { lift: 700 * (1 - ease(p, 0.55, 0.8)) })
  stage.sprite([1900, 900, 0], maud, { layer: 2.5 })
  return stage.toSvg()
}

const portraitFrame: Scene = ({ p, t, view }) => {
  const k = ease(p, 0.66, 0.8)
  const stage = shopStage(view, { at: [mix(-1350, 500, k), mix(-60, -900, k), 1760], to: [mix(1900, 2000, k), mix(0, -20, k), mix(960, 1120, k)], lens: 1.15 })
  drawFloorShadow(stage, 0.8)
  drawStrongback(stage)
  const shift = 95 * (1 - ease(p, 0.24, 0.36) * 0.6 - ease(p, 0.55, 0.65) * 0.4)
  NAMES.forEach(name => drawFrame(stage, name, 0, name === 'after' ? shift : 0))
  drawTransom(stage, 'stern')
  drawTransom(stage, 'bow')
  centreString(stage, ease(p, 0.02, 0.16))
  if (p > 0.78) level(stage, 'middle', t, ease(p, 0.84, 0.97))
  if (p < 0.6) stage.sprite([2950, 800, 0], maud, { layer: 2.5 })
  return stage.toSvg()
}

export const strongbackScenes: Record<string, (moment: Moment) => string> = {
  'strongback-wide': strongbackWide, 'stand-frames': standFrames, 'stand-transoms': standTransoms, 'sight-string': sightString,
  'level-frame': levelFrame, 'braces': braces, 'portrait-bow': portraitBow, 'portrait-frame': portraitFrame,
}
export { ivo, maud, screwing, shopStage }
