import { clamp, cross, mix, sub, unit, type Place, type Point, type Vec } from './vector'

/**
 * The offsets of the pram, millimetres, hull the right way up: half-breadths and heights
 * at five stations from the bow. Every view of the boat is drawn from these.
 */
const OFFSETS = {
  sheer: { x: [0, 914, 1829, 2743, 3658], y: [330, 545, 640, 628, 540], z: [700, 566, 494, 478, 520] },
  chine: { x: [170, 1010, 1860, 2710, 3560], y: [230, 442, 530, 512, 420], z: [330, 106, 0, 18, 128] },
}

export const FRAMES = { forward: 1100, middle: 1950, after: 2800 } as const
export type FrameName = keyof typeof FRAMES
export const LENGTH = 3658
export const MIDSHIPS = 1950

/** A fair curve through the stations (Catmull–Rom, even enough spacing). */
function fair(xs: number[], values: number[], x: number): number {
  const last = xs.length - 1
  let i = xs.findIndex(at => at > x) - 1
  if (i < 0) i = x < xs[0]! ? 0 : last - 1
  const at = (k: number) => values[clamp(k, 0, last)]!
  const t = (x - xs[i]!) / (xs[i + 1]! - xs[i]!)
  const slope = (k: number) => k <= 0 ? at(1) - at(0) : k >= last ? at(last) - at(last - 1) : (at(k + 1) - at(k - 1)) / 2
  const [p, q, m, n] = [at(i), at(i + 1), slope(i), slope(i + 1)]
  return (2 * t ** 3 - 3 * t ** 2 + 1) * p + (t ** 3 - 2 * t ** 2 + t) * m + (3 * t ** 2 - 2 * t ** 3) * q + (t ** 3 - t ** 2) * n
}

export type EdgeName = keyof typeof OFFSETS

/** A point of the sheer or the chine; `side` 1 is port, −1 starboard. */
export function edgeAt(edge: EdgeName, x: number, side: 1 | -1): Vec {
  const { x: xs, y, z } = OFFSETS[edge]
  return [x, fair(xs, y, x) * side, fair(xs, z, x)]
}

/** The whole edge from bow to stern in `pieces` lengths; `over` carries it past both ends. */
export function edgeLine(edge: EdgeName, side: 1 | -1, pieces = 24, over = 0): Vec[] {
  const xs = OFFSETS[edge].x
  return Array.from({ length: pieces + 1 }, (_, i) => edgeAt(edge, mix(xs[0]! - over, xs.at(-1)! + over, i / pieces), side))
}

/** Half-breadths and heights of a frame's corners. */
export function frameCorners(name: FrameName): { chine: Point, sheer: Point } {
  const x = FRAMES[name]
  const [c, s] = [edgeAt('chine', x, 1), edgeAt('sheer', x, 1)]
  return { chine: [c[1], c[2]], sheer: [s[1], s[2]] }
}

export type TransomName = 'bow' | 'stern'

/** Width at the sheer and at the bottom and height along the slope of a transom. */
export function transomSize(name: TransomName): { top: number, bottom: number, height: number } {
  const [s, c] = transomEnds(name)
  return { top: s[1] * 2, bottom: c[1] * 2, height: Math.hypot(s[0] - c[0], s[2] - c[2]) }
}

function transomEnds(name: TransomName): [sheer: Vec, chine: Vec] {
  const end = (edge: EdgeName) => edgeAt(edge, name === 'bow' ? OFFSETS[edge].x[0]! : OFFSETS[edge].x.at(-1)!, 1)
  return [end('sheer'), end('chine')]
}

/** Outline on its own place: u across from the centre line, v up from the bottom edge; the top is crowned. */
export function transomOutline(name: TransomName, grow = 0): Point[] {
  const { top, bottom, height } = transomSize(name)
  const crown = name === 'bow' ? 34 : 46
  const points: Point[] = [[-bottom / 2 - grow, -grow], [bottom / 2 + grow, -grow]]
  for (let i = 0; i <= 10; i++) {
    const k = 1 - i / 5
    if (name === 'stern' && i === 5 && !grow) {
      for (const a of [0, 0.25, 0.5, 0.75, 1]) points.push([38 * Math.cos(a * Math.PI), height + crown - 44 - 30 * Math.sin(a * Math.PI)])
      continue
    }
    const notch = name === 'stern' && !grow && (i === 4 || i === 6)
    if (notch && i === 4) points.push([(top / 2) * k, height + crown * (1 - k * k)], [38, height + crown])
    else if (notch) points.push([-38, height + crown], [(top / 2) * k, height + crown * (1 - k * k)])
    else points.push([(top / 2 + grow) * k, height + grow + crown * (1 - k * k)])
  }
  return points
}

/** The three cheeks glued round the inside face: bottom, port, starboard. */
export function cheekOutlines(name: TransomName, wide = 45): Point[][] {
  const { top, bottom, height } = transomSize(name)
  const slope = (top - bottom) / 2 / height
  const side = (s: number): Point[] => {
    const at = (v: number, inset: number): Point => [s * (bottom / 2 + slope * v - inset), v]
    return [at(wide, 2), at(height - 4, 2), at(height - 4, wide), at(wide, wide)]
  }
  return [[[-bottom / 2 + 2, 2], [bottom / 2 - 2, 2], [bottom / 2 + slope * wide - 2, wide], [-bottom / 2 - slope * wide + 2, wide]], side(1), side(-1)]
}

/** Where a transom stands in the hull, the right way up; its inside face looks along n. */
export function transomPlace(name: TransomName): Place {
  const [s, c] = transomEnds(name)
  const v = unit(sub([s[0], 0, s[2]], [c[0], 0, c[2]]))
  const u: Vec = [0, name === 'bow' ? 1 : -1, 0]
  return { o: [c[0], 0, c[2]], u, v, n: cross(u, v) }
}

const KEEL_UP = 1320

/** From the boat's own place, the right way up, to upside down on the strongback. */
export const overturn = (p: Vec): Vec => [p[0], -p[1], KEEL_UP - p[2]]

export function overturnPlace(place: Place): Place {
  const turn = (v: Vec): Vec => [v[0], -v[1], -v[2]]
  return { o: overturn(place.o), u: turn(place.u), v: turn(place.v), n: turn(place.n) }
}
