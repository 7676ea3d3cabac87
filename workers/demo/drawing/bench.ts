import { blend, colour } from './palette'
import { Stage, type Camera, type View } from './stage'
import { on, type Place, type Point, type Vec } from './vector'

/** The bench under the window: its top is z = 0, its middle x = 0. */
export function benchStage(view: View, camera: Camera): Stage {
  const stage = new Stage(view, camera)
  stage.raw(-9, `<rect width="${view.width}" height="${view.height}" fill="${colour.wall}"/>`)
  const flatInk = (fill: string, layer: number) => ({ fill, shaded: false, layer, stroke: colour.graphite, width: 1.6 })
  stage.face([[-2600, 430, -900], [2600, 430, -900], [2600, 430, 1600], [-2600, 430, 1600]], { fill: colour.wall, shaded: false, layer: -8 })
  for (let x = -2400; x < 2600; x += 210) stage.line([[x, 430, 0], [x, 430, 1500]], { layer: -7, stroke: colour.shadow, width: 1, opacity: 0.22 })
  stage.face([[-760, 425, 210], [-60, 425, 210], [-60, 425, 900], [-760, 425, 900]], flatInk(colour.sill, -6))
  stage.face([[-720, 424, 250], [-100, 424, 250], [-100, 424, 900], [-720, 424, 900]], flatInk(colour.sky, -5))
  stage.face([[-720, 423, 250], [-100, 423, 250], [-100, 423, 372], [-330, 423, 410], [-520, 423, 360], [-720, 423, 420]], { fill: '#9fb79a', shaded: false, layer: -4.5 })
  stage.line([[-410, 420, 250], [-410, 420, 900]], { layer: -4, stroke: colour.sill, width: 9 })
  const top: Vec[] = [[-2400, -420, 0], [2400, -420, 0], [2400, 420, 0], [-2400, 420, 0]]
  stage.face(top, flatInk(colour.bench, -3))
  stage.face([[-2400, -420, 0], [2400, -420, 0], [2400, -420, -90], [-2400, -420, -90]], flatInk(blend(colour.bench, colour.shadow, 0.35), -3))
  stage.face([[-2400, -420, -90], [2400, -420, -90], [2400, -420, -1200], [-2400, -420, -1200]], { fill: blend(colour.floor, colour.shadow, 0.45), shaded: false, layer: -4 })
  for (const y of [-230, -20, 200]) stage.line([[-2400, y, 0], [2400, y, 0]], { layer: -2.5, stroke: blend(colour.bench, colour.shadow, 0.6), width: 1.2, opacity: 0.6 })
  for (const x of [-560, -220]) stage.face([[x - 200, 330, 0.5], [x + 80, 330, 0.5], [x + 330, -420, 0.5], [x + 10, -420, 0.5]], { fill: '#ffedbd', shaded: false, layer: -2, opacity: 0.32 })
  return stage
}

/** The soft shadow of a flat piece lying on the bench. */
export function lieOn(stage: Stage, place: Place, outline: Point[], thick: number): void {
  const shift = 6 + thick * 0.5
  const cast = outline.map(([u, v]): Vec => {
    const p = on(place, u, v)
    return [p[0] + shift, p[1] - shift, 0.8]
  })
  stage.face(cast, { fill: colour.shadow, shaded: false, layer: -1, opacity: 0.3 })
}

/** The front part of an outline, up to `most` along u: for brushing and sawing across. */
export function upTo(outline: Point[], most: number): Point[] {
  const out: Point[] = []
  outline.forEach((p, i) => {
    const q = outline[(i + 1) % outline.length]!
    if (p[0] <= most) out.push(p)
    if ((p[0] <= most) !== (q[0] <= most)) {
      const k = (most - p[0]) / (q[0] - p[0])
      out.push([most, p[1] + (q[1] - p[1]) * k])
    }
  })
  return out
}

/** The first `share` of a run of points, by length. */
export function partOf<P extends readonly number[]>(points: P[], share: number): P[] {
  const steps = points.slice(1).map((p, i) => Math.hypot(...p.map((c, k) => c - points[i]![k]!)))
  let left = steps.reduce((a, b) => a + b, 0) * share
  const out = [points[0]!]
  for (const [i, step] of steps.entries()) {
    if (left <= 0) break
    const k = Math.min(1, left / step)
    out.push(points[i]!.map((c, j) => c + (points[i + 1]![j]! - c) * k) as unknown as P)
    left -= step
  }
  return out
}

/** A mug of tea. */
export const mug = `<ellipse cx="6" cy="2" rx="50" ry="12" fill="${colour.shadow}" fill-opacity="0.3"/><path d="M-40 -88L-36 0Q0 12 36 0L40 -88Z" fill="${colour.redLead}" stroke="${colour.graphite}" stroke-width="3"/><path d="M38 -70Q72 -72 66 -42Q60 -20 36 -20" fill="none" stroke="${colour.graphite}" stroke-width="14"/><path d="M38 -70Q72 -72 66 -42Q60 -20 36 -20" fill="none" stroke="${colour.redLead}" stroke-width="8"/><ellipse cx="0" cy="-88" rx="40" ry="11" fill="#7c4a2c" stroke="${colour.graphite}" stroke-width="3"/>`
