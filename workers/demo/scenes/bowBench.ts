import { benchStage, lieOn, partOf, upTo } from '../drawing/bench'
import { brush, grip, jigsaw, palm, pencil, pinch, stick } from '../drawing/figures'
import { write } from '../drawing/lettering'
import { blend, colour } from '../drawing/palette'
import { cheekOutlines, transomOutline, transomSize } from '../drawing/pram'
import type { Stage } from '../drawing/stage'
import { add, ease, flat, mix, on, ramp, type Place, type Point, type Vec } from '../drawing/vector'
import { sway, type Moment, type Scene } from './scene'

/** The bow transom on the bench: marked out, sawn, framed, sealed and glued. */

const camera = { at: [-50, -980, 830] as Vec, to: [0, -62, 20] as Vec, lens: 1.72 }
const lying: Place = flat([0, -235, 0])
const raised: Place = flat([0, -250, 46])
const size = transomSize('bow')
const outline = transomOutline('bow')
const BLANK: Point[] = [[-395, -45], [395, -45], [395, 500], [-395, 500]]
const hands = { layer: 9 }

function closed(points: Point[]): Point[] {
  return [...points, points[0]!]
}

function pencilled(stage: Stage, place: Place, points: Point[], share: number, width = 2): void {
  if (share <= 0) return
  stage.stroke(partOf(points, share).map(([u, v]) => on(place, u, v, 10)), { stroke: colour.pencil, width, layer: 6 })
}

const tipOf = (place: Place, points: Point[], share: number): Vec => {
  const [u, v] = partOf(points, share).at(-1)!
  return on(place, u, v, 11)
}

function blank(stage: Stage, place: Place): void {
  lieOn(stage, place, BLANK, 9)
  stage.plate(place, BLANK, 9, colour.ply)
  for (const v of [40, 150, 265, 390]) stage.stroke([-390, -140, 120, 390].map((u, i) => on(place, u, v + [0, 9, -5, 4][i]!, 9.5)), { stroke: colour.bronze, width: 1, opacity: 0.25, layer: 5.5 })
}

export const bowMark: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, camera)
  blank(stage, lying)
  const middle: Point[] = [[0, -45], [0, 500]]
  const bottom: Point[] = [[-size.bottom / 2, 0], [size.bottom / 2, 0]]
  const top: Point[] = outline.slice(2)
  const left: Point[] = [[-size.bottom / 2, 0], [-size.top / 2, size.height]]
  const right: Point[] = [[size.bottom / 2, 0], [size.top / 2, size.height]]
  const strokes: [Point[], number, number][] = [[middle, 0.2, 0.37], [top, 0.46, 0.6], [bottom, 0.66, 0.75], [left, 0.83, 0.9], [right, 0.91, 0.99]]
  for (const [points, from, to] of strokes) pencilled(stage, lying, points, ramp(p, from, to), points === middle ? 1.4 : 2)
  if (p > 0.37) write(stage, lying, 'CL', 10, 470, 18, { layer: 6 })
  if (p > 0.62) write(stage, lying, '26', -32, size.height + 42, 22, { layer: 6 })
  if (p > 0.77) write(stage, lying, '18 1/8', -120, 14, 20, { layer: 6 })
  const rule = strokes.find(([, from, to]) => p > from - 0.05 && p < to + 0.02) ?? (p < 0.2 ? strokes[0]! : strokes.find(([, from]) => p < from) ?? strokes.at(-1)!)
  if (rule[0] !== top) {
    const [a, b] = [rule[0][0]!, rule[0].at(-1)!]
    const angle = Math.atan2(b[1] - a[1], b[0] - a[0])
    const edge: Place = { ...lying, o: on(lying, a[0], a[1], 9), u: [Math.cos(angle), Math.sin(angle), 0], v: [Math.sin(angle), -Math.cos(angle), 0] }
    const long = Math.hypot(b[0] - a[0], b[1] - a[1])
    stage.plate(edge, [[-40, 3], [long + 40, 3], [long + 40, 36], [-40, 36]], 2, colour.steel, { layer: 6.5 })
    const holdAt = on(edge, long * 0.32, 22, 4)
    stage.sprite(holdAt, palm(), { ...hands, flip: true, turn: -4 })
  }
  const share = ramp(p, rule[1], rule[2])
  const still = share > 0 && share < 1
  stage.sprite(add(tipOf(lying, rule[0], share), [0, 0, still ? 0 : 26 + sway(t, 4) * 2]), pencil + `<g transform="translate(36 -30)">${pinch()}</g>`, hands)
  return stage.toSvg()
}

export const bowSaw: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, camera)
  blank(stage, raised)
  pencilled(stage, raised, closed(outline), 1)
  pencilled(stage, raised, [[0, -45], [0, 500]], 1, 1.2)
  const cut = transomOutline('bow', 9)
  const path: Point[] = [[size.bottom / 2 + 4, -45], cut[1]!, cut[2]!, ...cut.slice(3).map(([u, v], i): Point => [u, v + (i === 4 ? 10 : 0)])]
  const share = 0.02 + 0.36 * ramp(p, 0.3, 0.62) + 0.42 * ramp(p, 0.74, 0.98)
  const done = partOf(path, share)
  stage.stroke(done.map(([u, v]) => on(raised, u, v, 10)), { stroke: colour.graphite, width: 4.5, layer: 6 })
  const at = on(raised, ...done.at(-1)!, 10)
  for (let i = 0; i < 14 * share + 3; i++) {
    const [u, v] = done[Math.floor(i / 17 * done.length)]!
    stage.sprite(on(raised, u + (i * 37 % 60) - 10, v + (i * 53 % 50) - 25, 10), `<ellipse rx="${7 + i % 3 * 4}" ry="3.5" fill="${colour.plyEdge}" fill-opacity="0.9"/>`, { layer: 6.2 })
  }
  const busy = (p > 0.3 && p < 0.62) || p > 0.74
  const shake = busy ? Math.round(t * 10) % 2 * 1.5 : 0
  stage.sprite(on(raised, -330, 380, 14), palm(), { ...hands, flip: true, turn: 4 })
  stage.sprite(add(at, [0, 0, shake]), jigsaw + `<g transform="translate(66 -116)">${grip()}</g>`, hands)
  return stage.toSvg()
}

interface Glueing {
  /** Share of the transom that is wet. */
  wet?: number
  cheekWet?: boolean
  /** Millimetres each cheek is away from its place: bottom, port, starboard. */
  away?: [number, number, number]
  lift?: number
  beads?: number
  squeeze?: number
  marks?: number
}

const TILT: Record<number, Vec> = { 0: [0, -1, 0], 1: [1, 0.1, 0], 2: [-1, 0.1, 0] }

function assembly(stage: Stage, state: Glueing): void {
  const { wet = 0, away = [0, 0, 0], lift = 0, beads = 0, squeeze = 0 } = state
  for (const x of [-170, 170]) stage.beam([x, -330, 23], [x, 330, 23], 60, 44, colour.pine, { layer: 0 })
  lieOn(stage, raised, outline, 70)
  stage.plate(raised, outline, 9, colour.ply, { layer: 2 })
  if (wet > 0) stage.face(upTo(outline, mix(-360, 360, wet)).map(([u, v]) => on(raised, u, v, 9.4)), { fill: colour.plyWet, shaded: false, layer: 2.5, opacity: 0.62 })
  stage.stroke([on(raised, 0, 0, 10), on(raised, 0, size.height + 30, 10)], { stroke: colour.pencil, width: 1, layer: 3 })
  const cheeks = cheekOutlines('bow')
  cheeks.forEach((points, i) => {
    if (beads > 0) {
      const line = centreLine(points, i)
      stage.stroke(partOf(line, ramp(beads, i * 0.33, i * 0.33 + 0.33)).map(([u, v], k) => on(raised, u, v + (k % 2 ? 5 : -5), 11)), { stroke: colour.glue, width: 13, layer: 3 })
    }
  })
  cheeks.forEach((points, i) => {
    if (away[i]! >= 900) return
    const dir = TILT[i]!
    const o = add(raised.o, [dir[0] * away[i]!, dir[1] * away[i]!, away[i]! > 0 ? Math.min(lift, away[i]!) + 1 : 9])
    stage.plate({ ...raised, o }, points, 19, state.cheekWet ? colour.sapeleWet : colour.sapele, { layer: 4 + (i === 0 ? 0.2 : 0) })
    if (squeeze > 0 && i === 0) squeezeOut(stage, squeeze)
  })
  if (state.marks) {
    const marks: Point[][] = [[[-size.bottom / 2 + 30, 62], [-size.bottom / 2 + 14, 30]], [[size.bottom / 2 - 30, 62], [size.bottom / 2 - 14, 30]], [[40, 30], [60, 64]]]
    marks.forEach((mark, i) => {
      const k = ramp(state.marks!, i / 3, (i + 1) / 3)
      if (k > 0) stage.stroke(partOf(mark, k).map(([u, v]) => on(raised, u, v, 29)), { stroke: colour.plyEdge, width: 2.4, layer: 6 })
    })
  }
}

function centreLine(points: Point[], index: number): Point[] {
  const [a, b] = index === 0 ? [[-size.bottom / 2 + 25, 23], [size.bottom / 2 - 25, 23]] as const : [midway(points[0]!, points[3]!), midway(points[1]!, points[2]!)]
  return Array.from({ length: 15 }, (_, i): Point => [mix(a[0], b[0], i / 14), mix(a[1], b[1], i / 14)])
}

const midway = (p: Point, q: Point): Point => [(p[0] + q[0]) / 2, (p[1] + q[1]) / 2]

function squeezeOut(stage: Stage, share: number): void {
  const [, right, left] = cheekOutlines('bow')
  const inner = (points: Point[]): Point[] => [points[3]!, points[2]!]
  for (const [from, to] of [inner(right!), inner(left!), [[-size.bottom / 2 + 50, 47], [size.bottom / 2 - 50, 47]] as Point[]]) {
    for (let i = 0; i <= 9; i++) {
      const k = i / 9
      const at = on(raised, mix(from![0], to![0], k), mix(from![1], to![1], k), 11)
      stage.sprite(at, `<ellipse rx="${(7 + i * 5 % 4) * share}" ry="${4.5 * share}" fill="${colour.glue}" stroke="${colour.bronze}" stroke-width="1"/>`, { layer: 5 })
    }
  }
}

export const bowDryFit: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, camera)
  const slide = (from: number): number => 170 * (1 - ease(p, from, from + 0.09))
  const away: [number, number, number] = [slide(0.42), slide(0.53), slide(0.61)]
  assembly(stage, { away, lift: 30, marks: ramp(p, 0.9, 0.99) })
  const which = p < 0.51 ? 0 : p < 0.6 ? 1 : 2
  const spots: Point[] = [[60, 20], [size.top / 2 - 55, 250], [-size.top / 2 + 55, 250]]
  if (p < 0.74) {
    const dir = TILT[which]!
    const at = add(on(raised, ...spots[which]!, 34), [dir[0] * away[which]!, dir[1] * away[which]!, sway(t, 3)])
    stage.sprite(at, palm(), { ...hands, flip: which === 2, turn: which === 2 ? 6 : 0 })
  }
  else {
    const marks: Point[] = [[-size.bottom / 2 + 22, 45], [size.bottom / 2 - 22, 45], [50, 48]]
    const i = Math.min(2, Math.floor(ramp(p, 0.9, 1) * 3))
    stage.sprite(add(on(raised, ...marks[i]!, 29), [0, 0, p > 0.9 ? 0 : 24]), pencil + `<g transform="translate(36 -30)">${pinch()}</g>`, hands)
    stage.sprite(on(raised, -size.top / 2 + 50, 290, 34), palm(), { ...hands, flip: true, turn: 4 })
  }
  return stage.toSvg()
}

export const bowSeal: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, camera)
  const wet = ramp(p, 0.28, 0.9)
  assembly(stage, { wet, away: [900, 900, 900], marks: 0 })
  const cheeks = cheekOutlines('bow')
  cheeks.forEach((points, i) => stage.plate({ ...flat([i === 0 ? -20 : i === 1 ? 230 : -300, i === 0 ? -395 : -240, 0], i === 0 ? 0 : i === 1 ? -8 : 8) }, points, 19, wet > 0.98 ? colour.sapeleWet : colour.sapele, { layer: 3 }))
  stage.sprite([-430, 60, 0], potDrawing(colour.brass, 0), { layer: 4, size: 0.75 })
  const at = wet > 0 ? on(raised, mix(-300, 300, wet), 200 + sway(t, 1.6) * 150, 12) : on(raised, -260, 260, 60)
  stage.sprite(at, brush(colour.plyWet) + `<g transform="translate(92 -112)">${pinch({ gloved: true })}</g>`, hands)
  return stage.toSvg()
}

/** A plastic pot with mixed glue. `thick` 0 is clear resin, 1 stands up like peanut butter. */
export function potDrawing(contents: string, thick: number): string {
  const line = `stroke="${colour.graphite}" stroke-width="3" stroke-linejoin="round"`
  return `<ellipse cx="8" cy="2" rx="84" ry="20" fill="${colour.shadow}" fill-opacity="0.3"/><path d="M-82 -124L-68 0Q0 22 68 0L82 -124Z" fill="#f2eee2" ${line}/>`
    + `<path d="M-78 -92L-66 -2Q0 20 66 -2L78 -92Q0 -72 -78 -92Z" fill="${contents}" fill-opacity="0.55"/>`
    + `<ellipse cx="0" cy="-124" rx="82" ry="24" fill="#fbf8ee" ${line}/><ellipse cx="0" cy="-118" rx="72" ry="18" fill="${contents}" stroke="${blend(contents, colour.graphite, 0.4)}" stroke-width="2"/>`
    + (thick > 0.3 ? `<path d="M-34 -118Q-20 ${-124 - 34 * thick} 6 ${-122 - 12 * thick}Q28 ${-132 - 26 * thick} 44 -116Q0 -106 -34 -118Z" fill="${blend(contents, '#ffffff', 0.18)}" stroke="${blend(contents, colour.graphite, 0.4)}" stroke-width="2"/>` : '')
}

export const bowSpread: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, camera)
  const beads = ramp(p, 0.02, 0.52)
  const down = (from: number): number => p < from ? 900 : 150 * (1 - ease(p, from, from + 0.12))
  const away: [number, number, number] = [down(0.55), down(0.7), down(0.83)]
  assembly(stage, { wet: 1, cheekWet: true, beads, away, lift: 60 })
  stage.sprite([-440, 40, 0], potDrawing(colour.glue, 1), { layer: 1, size: 0.7 })
  if (p < 0.55) {
    const index = Math.min(2, Math.floor(beads * 3))
    const line = centreLine(cheekOutlines('bow')[index]!, index)
    const at = on(raised, ...partOf(line, ramp(beads, index / 3, (index + 1) / 3)).at(-1)!, 14)
    stage.sprite(add(at, [sway(t, 0.8) * 6, 0, 0]), stick + `<g transform="translate(62 -110)">${pinch({ gloved: true })}</g>`, hands)
  }
  else {
    const which = p < 0.7 ? 0 : p < 0.83 ? 1 : 2
    const spot: Point = [[0, 22], [size.top / 2 - 50, 240], [-size.top / 2 + 50, 240]][which] as unknown as Point
    const dir = TILT[which]!
    const k = Math.min(150, away[which]!)
    stage.sprite(add(on(raised, ...spot, 34), [dir[0] * k, dir[1] * k, k * 0.3]), palm({ gloved: true }), { ...hands, flip: which === 2 })
  }
  return stage.toSvg()
}

const CLAMPS: { at: Point, side: 1 | -1 }[] = [
  { at: [120, 26], side: 1 }, { at: [-120, 26], side: -1 }, { at: [size.bottom / 2 + 8, 130], side: 1 },
  { at: [-size.bottom / 2 - 8, 130], side: -1 }, { at: [size.top / 2 - 42, 320], side: 1 }, { at: [-size.top / 2 + 42, 320], side: -1 },
]

function clampOnEdge(turn: number): string {
  const line = `stroke="${colour.graphite}" stroke-width="3" stroke-linejoin="round"`
  const k = Math.cos(turn) * 34
  return `<path d="M-16 -104L74 -104L78 36L60 36L58 -86L-16 -86Z" fill="${colour.iron}" ${line}/><path d="M-6 -150L6 -150L6 -4L-6 -4Z" fill="${colour.steel}" ${line}/>`
    + `<path d="M-20 -10L20 -10L16 2L-16 2Z" fill="${colour.redLead}" ${line}/><path d="M${-k} -148L${k} -154" stroke="${colour.graphite}" stroke-width="13" stroke-linecap="round"/><path d="M${-k} -148L${k} -154" stroke="${colour.fir}" stroke-width="8" stroke-linecap="round"/>`
}

function clamped(stage: Stage, count: number, t: number, p: number): void {
  CLAMPS.forEach(({ at, side }, i) => {
    const k = ramp(count, i, i + 1)
    if (k <= 0) return
    stage.sprite(add(on(raised, ...at, 28), [0, 0, 120 * (1 - ease(k, 0, 0.6))]), clampOnEdge(k < 1 ? t * 6 : 0.2 * i), { layer: 7, flip: side < 0, bias: 30 - i, size: 0.9 })
  })
  if (count < 6 && p >= 0) {
    const { at, side } = CLAMPS[Math.min(5, Math.floor(count))]!
    stage.sprite(add(on(raised, ...at, 165), [0, 0, 60 * (1 - (count % 1))]), grip({ gloved: true }), { ...hands, flip: side < 0 })
  }
}

export const bowClamps: Scene = ({ p, t, view }) => {
  const near = ease(p, 0.5, 0.75)
  const stage = benchStage(view, { at: [mix(-50, 60, near), mix(-980, -820, near), mix(830, 560, near)], to: [mix(0, 70, near), mix(-62, -90, near), 30], lens: 1.72 })
  assembly(stage, { wet: 1, cheekWet: true, beads: 1, squeeze: ramp(p, 0.15, 0.7) })
  clamped(stage, 6.01 * ramp(p, 0.02, 0.5), t, p)
  return stage.toSvg()
}

export const bowScrape: Scene = ({ p, t, view }) => {
  const stage = benchStage(view, camera)
  assembly(stage, { wet: 1, cheekWet: true, beads: 1, squeeze: 1 - ramp(p, 0.05, 0.62) })
  clamped(stage, 6.01, 0, -1)
  const k = ramp(p, 0.04, 0.62)
  if (p < 0.72) stage.sprite(on(raised, mix(-190, 190, k), 52 + sway(t, 1.2) * 8, 14), stick + `<g transform="translate(62 -110)">${pinch({ gloved: true })}</g>`, hands)
  return stage.toSvg()
}

export const bowScenes: Record<string, (moment: Moment) => string> = {
  'bow-mark': bowMark, 'bow-saw': bowSaw, 'bow-dry-fit': bowDryFit, 'bow-seal': bowSeal, 'bow-spread': bowSpread, 'bow-clamps': bowClamps, 'bow-scrape': bowScrape,
}
