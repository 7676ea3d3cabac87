import { blend, colour } from './palette'
import {
  cheekOutlines, edgeAt, edgeLine, frameCorners, FRAMES, overturn, overturnPlace, transomOutline, transomPlace,
  type FrameName, type TransomName,
} from './pram'
import type { Ink, Stage } from './stage'
import { add, clamp, ease, mix, on, scale, type Point, type Vec } from './vector'

/** The parts of the pram as they stand upside down on the strongback. */

export const RAIL_TOP = 470
const SPALL = RAIL_TOP + 28

const sides = [1, -1] as const
export type Side = typeof sides[number]

export function drawStrongback(stage: Stage): void {
  const length: [number, number] = [-140, 3860]
  for (const y of [-254, 254]) {
    stage.beam([length[0], y, RAIL_TOP - 70], [length[1], y, RAIL_TOP - 70], 38, 140, colour.spruce, { layer: 3 })
    for (const x of [120, 1860, 3600]) stage.beam([x, y, 0], [x, y, RAIL_TOP - 140], 90, 70, blend(colour.spruce, colour.pine, 0.5), { layer: 2 })
  }
  for (const x of [120, 1000, 1860, 2740, 3600]) stage.beam([x, -235, RAIL_TOP - 60], [x, 235, RAIL_TOP - 60], 45, 90, colour.spruce, { layer: 3, bias: -130 })
}

/** A frame on its legs; `lift` raises it (mm) while it is being put down. */
export function drawFrame(stage: Stage, name: FrameName, lift = 0, shift = 0): void {
  const x = FRAMES[name]
  const { chine, sheer } = frameCorners(name)
  const at = (y: number, z: number, dx = 0): Vec => add(overturn([x + dx, y, z]), [0, shift, lift])
  const spall = (y: number): Vec => [x - 22, y + shift, SPALL + lift]
  stage.beam(spall(-sheer[0] - 40), spall(sheer[0] + 40), 22, 58, colour.pine)
  for (const side of sides) {
    const [c, s] = [at(chine[0] * side - 22 * side, chine[1] + 6), at((sheer[0] - 22) * side, sheer[1])]
    stage.beam([s[0], s[1], SPALL - 24 + lift], s, 19, 44, colour.fir, { up: [0, 1, 0] })
    stage.beam(s, c, 19, 44, colour.fir, { up: [0, 1, 0] })
    const corner: Point[] = [[0, 0], [0, 150], [-46, 150], [-170, 46], [-170, 0]]
    const tilt = (sheer[0] - chine[0]) / (sheer[1] - chine[1])
    const points = corner.map(([u, v]): Vec => at((chine[0] + u + v * tilt - 3) * side, chine[1] + v + 3, -12))
    stage.face(points, { fill: colour.ply, stroke: colour.graphite, width: 1.3, bias: 6 })
  }
  stage.beam(at(-chine[0] + 16, chine[1] + 33), at(chine[0] - 16, chine[1] + 33), 19, 62, colour.fir)
}

export function drawTransom(stage: Stage, name: TransomName, options: { lift?: number, post?: boolean, cheeks?: boolean } = {}): void {
  const { lift = 0, post = true, cheeks = true } = options
  const raised = overturnPlace(transomPlace(name))
  const place = { ...raised, o: add(raised.o, [0, 0, lift]) }
  if (cheeks) for (const outline of cheekOutlines(name)) stage.plate(place, outline, 19, colour.sapele, { bias: -4 })
  stage.plate({ ...place, o: add(place.o, scale(place.n, -9)) }, transomOutline(name), 9, colour.ply)
  if (post) {
    const top = on(place, 0, 240, 30)
    const foot: Vec = [top[0] + place.n[0] * 120, 0, RAIL_TOP - 20 + lift]
    stage.beam(foot, top, 60, 40, colour.pine, { up: [0, 1, 0], bias: -6 })
    stage.beam([foot[0], -290, RAIL_TOP + 20 + lift], [foot[0], 290, RAIL_TOP + 20 + lift], 40, 50, colour.pine)
  }
}

/** A chine log; `bent` runs 0 (straight out from the bow notch) to 1 (home at the stern). */
export function drawChineLog(stage: Stage, side: Side, bent = 1, ink: Ink = {}): void {
  const over = 150
  const start = edgeAt('chine', 170, side)
  const pieces = 30
  const points = Array.from({ length: pieces + 1 }, (_, i): Vec => {
    const x = mix(170 - 40, 3560 + over, i / pieces)
    const home = edgeAt('chine', x, side)
    const free: Vec = [x, start[1] + side * (x - 170) * 0.3, start[2] - (x - 170) * 0.26 + ((x - 170) / 1000) ** 2 * 10]
    const k = ease(bent * 1.7 - (x - 170) / 3400 * 0.7, 0, 1)
    const inset = 14
    return overturn([x, mix(free[1], home[1] - inset * side, k), mix(free[2], home[2] + inset, k)])
  })
  drawRod(stage, points, 29, colour.fir, ink)
}

/** A bent square rod through points. */
export function drawRod(stage: Stage, points: Vec[], thick: number, fill: string, ink: Ink = {}): void {
  const h = thick / 2
  const shifted = (y: number, z: number) => points.map(p => add(p, [0, y * h, z * h]))
  const [a, b, c, d] = [shifted(-1, -1), shifted(-1, 1), shifted(1, 1), shifted(1, -1)]
  const style = { ...ink, fill, stroke: colour.graphite, width: 1.2 }
  for (const [p, q] of [[a, b], [b, c], [c, d], [d, a]] as const) stage.strip(p, q, style)
}

export interface SideOptions {
  /** 0 flat beside the boat, 1 wrapped home. */
  bent?: number
  /** Millimetres that the sheet still stands over its lines. */
  over?: number
  fill?: string
  /** Millimetres that it is held away. */
  away?: number
  layer?: number
}

/** The two edges of a side panel, in the boat's own place. */
export function sideEdges(side: Side, { bent = 1, over = 0, away = 0 }: SideOptions = {}): { chine: Vec[], sheer: Vec[] } {
  const middle = { chine: edgeAt('chine', 1950, side), sheer: edgeAt('sheer', 1950, side) }
  const shape = (edge: 'chine' | 'sheer') => edgeLine(edge, side, 28, over).map((p): Vec => {
    const fromMiddle = clamp(Math.abs(p[0] - 1950) / 1900)
    const k = clamp(bent * 1.5 - fromMiddle * 0.5 * (1 - bent))
    const y = mix(middle[edge][1], p[1], clamp(k))
    return [p[0], y + side * (5 + away), p[2] + (edge === 'chine' ? -over : over)]
  })
  return { chine: shape('chine'), sheer: shape('sheer') }
}

export function drawSide(stage: Stage, side: Side, options: SideOptions = {}): void {
  const { chine, sheer } = sideEdges(side, options)
  const { layer = 5 } = options
  const rows = 3
  for (let row = 0; row < rows; row++) {
    const line = (k: number) => chine.map((p, i) => overturn(add(scale(p, 1 - k), scale(sheer[i]!, k))))
    const [low, high] = [line(row / rows), line((row + 1) / rows)]
    const fill = options.fill ?? colour.ply
    stage.strip(low, high, { fill, inside: blend(fill, colour.plyEdge, 0.2), outline: false, layer })
    if (row > 0) stage.line(low, { layer, stroke: blend(fill, colour.bronze, 0.4), width: 0.8, opacity: 0.45, bias: 14 })
    const edge = { stroke: colour.graphite, width: 1.8, layer, bias: 24 }
    if (row === 0) stage.line(low, edge)
    if (row === rows - 1) stage.line(high, edge)
    stage.line([low[0]!, high[0]!], edge)
    stage.line([low.at(-1)!, high.at(-1)!], edge)
  }
}

/** The bottom, oversize or trimmed, `lift` above its place. */
export function drawBottom(stage: Stage, options: { over?: number, lift?: number, fill?: string, layer?: number } = {}): void {
  const { over = 0, lift = 0, fill = colour.ply, layer = 5 } = options
  const lines = [-1, -0.5, 0, 0.5, 1].map(k => edgeLine('chine', 1, 28, over).map(([x, y, z]): Vec => add(overturn([x, (y + over + 6) * k, z - 4]), [0, 0, lift])))
  for (let row = 1; row < lines.length; row++) {
    stage.strip(lines[row - 1]!, lines[row]!, { fill, inside: blend(fill, colour.shadow, 0.25), outline: false, layer })
  }
  const edge = { stroke: colour.graphite, width: 1.8, layer, bias: 40 }
  const rim = [lines[0]!, lines.at(-1)!]
  for (const line of rim) {
    stage.line(line, edge)
    stage.strip(line, line.map(p => add(p, [0, 0, -9])), { fill: colour.plyEdge, stroke: colour.graphite, width: 1, layer, bias: 22 })
  }
  stage.line([rim[0]![0]!, rim[1]![0]!], edge)
  stage.line([rim[0]!.at(-1)!, rim[1]!.at(-1)!], edge)
  stage.line(lines[2]!, { stroke: colour.pencil, width: 1, opacity: 0.6, layer, bias: 44, dash: '7 5' })
}

/** Heads of screws or nails along the chine; `share` of them are in, counted from amidships. */
export function drawFastenings(stage: Stage, side: Side, share: number, where: 'side' | 'bottom', every = 100): void {
  for (let x = 260; x <= 3480; x += every) {
    if (Math.abs(x - 1880) / 1640 > share) continue
    const chine = edgeAt('chine', x, side)
    const at = where === 'side'
      ? overturn([x, chine[1] + 7 * side, chine[2] + 18])
      : overturn([x, chine[1] - 16 * side, chine[2] - 6])
    const k = stage.sizeAt(at)
    stage.sprite(at, `<circle r="${Math.max(5, 1.7 / k)}" fill="${colour.bronze}" stroke="${colour.graphite}" stroke-width="1.5"/>`, { bias: 60, layer: 8 })
  }
}

export function drawBraces(stage: Stage, share = 1): void {
  const braces: [Vec, Vec][] = [
    [[640, 0, RAIL_TOP + 30], [FRAMES.forward - 14, 0, 1150]],
    [[1500, -180, RAIL_TOP + 20], [FRAMES.middle - 14, -180, 1235]],
    [[2350, 180, RAIL_TOP + 20], [FRAMES.after - 14, 180, 1220]],
  ]
  braces.forEach(([foot, head], i) => {
    if (share * 3 > i) stage.beam(foot, add(foot, scale(add(head, scale(foot, -1)), clamp(share * 3 - i))), 20, 60, colour.pine, { up: [0, 1, 0] })
  })
}

export interface BoatState {
  transoms?: boolean
  chines?: boolean
  braces?: boolean
  sides?: Partial<Record<Side, SideOptions>>
  bottom?: { over?: number, lift?: number, fill?: string }
  /** The side turned to the camera. */
  near?: Side
}

/** The boat as far as it has got, on the strongback; skins cover what lies behind them. */
export function drawBoat(stage: Stage, state: BoatState = {}): void {
  const { near = 1, sides: skins = {}, bottom } = state
  const far = near === 1 ? -1 : 1
  drawStrongback(stage)
  for (const name of ['forward', 'middle', 'after'] as const) drawFrame(stage, name)
  if (state.transoms ?? true) for (const name of ['bow', 'stern'] as const) drawTransom(stage, name)
  if (state.chines ?? true) for (const side of sides) if (!skins[side]) drawChineLog(stage, side)
  if (state.braces ?? true) drawBraces(stage)
  if (skins[far]) drawSide(stage, far, { layer: 4, ...skins[far] })
  if (skins[near]) drawSide(stage, near, { layer: 6, ...skins[near] })
  if (bottom) drawBottom(stage, { layer: 7, ...bottom })
}
