import { blend, colour } from './palette'
import { edgeLine, overturn } from './pram'
import type { Stage } from './stage'
import type { Vec } from './vector'

/** The apple store: boards, two windows, a stove, sheets against the wall. */
export interface ShopLight { sky?: string, beam?: number }

const WALL_Y = 2300
const END_X = 6300

export function drawShop(stage: Stage, light: ShopLight = {}): void {
  const { width, height } = stage.view
  stage.raw(-9, `<rect width="${width}" height="${height}" fill="${colour.wall}"/>`)
  const quad = (points: Vec[], fill: string, layer: number, line = false) =>
    stage.face(points, { fill, shaded: false, layer, stroke: line ? colour.graphite : fill, width: line ? 1.4 : 1 })
  quad([[-6000, WALL_Y, 0], [9000, WALL_Y, 0], [9000, WALL_Y, 4200], [-6000, WALL_Y, 4200]], colour.wall, -8)
  quad([[-6000, -3600, 0], [9000, -3600, 0], [9000, WALL_Y, 0], [-6000, WALL_Y, 0]], colour.floor, -8)
  for (let x = -5600; x < 9000; x += 420) stage.line([[x, WALL_Y, 130], [x, WALL_Y, 3600]], { layer: -7, stroke: blend(colour.wallShade, colour.shadow, 0.18), width: 1, opacity: 0.6 })
  for (let y = -3400; y < WALL_Y; y += 520) stage.line([[-6000, y, 0], [9000, y, 0]], { layer: -7, stroke: blend(colour.floor, colour.shadow, 0.35), width: 1, opacity: 0.45 })
  quad([[-6000, WALL_Y - 20, 0], [9000, WALL_Y - 20, 0], [9000, WALL_Y - 20, 130], [-6000, WALL_Y - 20, 130]], blend(colour.wallShade, colour.shadow, 0.25), -7, true)
  quad([[END_X, WALL_Y, 0], [END_X, -3600, 0], [END_X, -3600, 4200], [END_X, WALL_Y, 4200]], blend(colour.wall, colour.shadow, 0.13), -7)
  for (let y = WALL_Y - 300; y > -3600; y -= 420) stage.line([[END_X, y, 0], [END_X, y, 3600]], { layer: -6, stroke: colour.shadow, width: 1, opacity: 0.25 })
  stage.line([[END_X, WALL_Y, 0], [END_X, WALL_Y, 4000]], { layer: -6, width: 1.4 })
  drawDoor(stage)
  for (const x of [300, 2700]) drawWindow(stage, x, light)
  drawSheets(stage)
  drawRack(stage)
}

function drawWindow(stage: Stage, x: number, { sky = colour.sky, beam = 0.3 }: ShopLight): void {
  const [w, low, high] = [1150, 1180, 2260]
  const at = (dx: number, z: number, y = WALL_Y - 10): Vec => [x + dx, y, z]
  const pane = (a: number, b: number, c: number, d: number, fill: string, layer: number, off = 0) =>
    stage.face([at(a, c, WALL_Y - 10 - off), at(b, c, WALL_Y - 10 - off), at(b, d, WALL_Y - 10 - off), at(a, d, WALL_Y - 10 - off)], { fill, shaded: false, layer, stroke: colour.graphite, width: 1.5 })
  pane(-60, w + 60, low - 60, high + 60, colour.sill, -6)
  pane(0, w, low, high, sky, -5)
  const hill: Vec[] = [at(0, low), at(w, low), at(w, low + 230), at(w * 0.7, low + 310), at(w * 0.4, low + 240), at(w * 0.15, low + 330), at(0, low + 280)]
  stage.face(hill, { fill: '#9fb79a', shaded: false, layer: -4.6 })
  stage.face([at(w * 0.5, low), at(w, low), at(w, low + 120), at(w * 0.72, low + 170)], { fill: '#829f80', shaded: false, layer: -4.5 })
  for (const k of [1 / 3, 2 / 3]) pane(w * k - 14, w * k + 14, low, high, colour.sill, -4)
  pane(0, w, (low + high) / 2 - 14, (low + high) / 2 + 14, colour.sill, -4)
  pane(-110, w + 110, low - 110, low - 55, colour.sill, -4, 60)
  if (beam <= 0) return
  for (const k of [0, 1, 2]) {
    const a = x + w * k / 3 - 700
    stage.face([[a, 950, 1], [a + w / 3 - 60, 950, 1], [a + w / 3 - 760, -900, 1], [a - 700, -900, 1]], { fill: '#fff0c4', shaded: false, layer: -3, opacity: beam })
  }
}

function drawSheets(stage: Stage): void {
  const lean = (x: number, wide: number, high: number, y: number, fill: string) =>
    stage.face([[x, y, 0], [x + wide, y, 0], [x + wide, WALL_Y - 40, high], [x, WALL_Y - 40, high]], { fill, shaded: false, layer: 0, stroke: colour.graphite, width: 1.5, bias: 0 })
  lean(4250, 1220, 2300, 1900, blend(colour.ply, colour.wallShade, 0.3))
  lean(4400, 1220, 2240, 1820, colour.ply)
  lean(4800, 420, 1800, 1780, colour.plyEdge)
  for (const [i, x] of [-900, -780, -640, -560].entries()) {
    stage.beam([x - 40, 1800 - i * 10, 0], [x + 90, WALL_Y - 60, 2500 - i * 170], 60, 26, i % 2 ? colour.fir : colour.spruce, { layer: 0 })
  }
}

/** The double door in the end wall, one leaf open to the yard. */
function drawDoor(stage: Stage): void {
  const at = (y: number, z: number): Vec => [END_X - 8, y, z]
  const leaf = (a: number, b: number, fill: string, layer: number) =>
    stage.face([at(a, 0), at(b, 0), at(b, 2250), at(a, 2250)], { fill, shaded: false, layer, stroke: colour.graphite, width: 1.5 })
  leaf(900, -1100, colour.sill, -6)
  leaf(820, -80, colour.greenLight, -5.5)
  leaf(-80, -1020, '#dbe6dc', -5.5)
  stage.face([at(-80, 0), at(-1020, 0), at(-1020, 700), at(-500, 820), at(-80, 640)], { fill: '#9fb79a', shaded: false, layer: -5.4 })
  for (const z of [300, 1900]) stage.line([at(780, z), at(-40, z)], { layer: -5.3, width: 4, stroke: colour.green })
}

/** Hand tools hung between the windows. */
function drawRack(stage: Stage): void {
  const y = WALL_Y - 30
  stage.face([[1640, y, 1900], [2540, y, 1900], [2540, y, 1950], [1640, y, 1950]], { fill: colour.bench, shaded: false, layer: -4, stroke: colour.graphite, width: 1.2 })
  const hang = (x: number, drawing: string) => stage.sprite([x, y - 10, 1900], drawing, { layer: -3 })
  const line = `stroke="${colour.graphite}" stroke-width="7" stroke-linejoin="round"`
  hang(1740, `<path d="M-12 0L-60 420L70 420L40 0Z" fill="${colour.steel}" ${line}/><path d="M-30 -50h80v70h-80z" fill="${colour.sapele}" ${line}/>`)
  hang(1960, `<path d="M-10 0h20v330h-20z" fill="${colour.fir}" ${line}/><path d="M-75 330h150v80h-150z" fill="${colour.iron}" ${line}/>`)
  hang(2150, `<path d="M-8 0h16v250h-16z" fill="${colour.steel}" ${line}/><path d="M-20 -20h40v-90h-40z" fill="${colour.redLead}" ${line} transform="translate(0 20)"/>`)
  hang(2300, `<path d="M-70 0a70 70 0 1 0 140 0a70 70 0 1 0 -140 0z" fill="none" stroke="${colour.brass}" stroke-width="26" transform="translate(0 90)"/>`)
  hang(2440, `<path d="M-8 0h16v180h-16zM-8 180l-14 150h44l-14 -150z" fill="${colour.steel}" ${line}/>`)
}

/** The boat's shadow on the floor. */
export function drawFloorShadow(stage: Stage, share = 1): void {
  const rim = [...edgeLine('sheer', 1, 16), ...edgeLine('sheer', -1, 16).reverse()].map((p): Vec => {
    const q = overturn(p)
    return [q[0] + 60, q[1] * 1.02 - 30, 2]
  })
  stage.face(rim, { fill: colour.shadow, shaded: false, layer: -2, opacity: 0.3 * share })
}
