import { blend, colour, lit } from './palette'
import { add, cross, dot, length, mixVec, scale, sub, unit, type Place, type Point, type Vec, on } from './vector'

export interface View { width: number, height: number }

export interface Camera {
  at: Vec
  to: Vec
  /** Focal length as a share of the picture's height. */
  lens?: number
}

export interface Ink {
  fill?: string
  /** Shade by the way the face looks to the light. */
  shaded?: boolean
  stroke?: string
  width?: number
  opacity?: number
  /** Lower layers are painted first, whatever their distance. */
  layer?: number
  /** Millimetres nearer to the camera than it is, for things lying on others. */
  bias?: number
  dash?: string
}

interface Item { layer: number, depth: number, svg: string }

const LIGHT = unit([-0.5, -0.42, 0.76])
const NEAR = 60

/** A scene being drawn: solid shapes go in, a picture painted from far to near comes out. */
export class Stage {
  private items: Item[] = []
  private readonly right: Vec
  private readonly up: Vec
  private readonly ahead: Vec
  private readonly focal: number

  constructor(readonly view: View, private readonly camera: Camera) {
    this.ahead = unit(sub(camera.to, camera.at))
    this.right = unit(cross(this.ahead, [0, 0, 1]))
    this.up = cross(this.right, this.ahead)
    this.focal = (camera.lens ?? 1.5) * view.height
  }

  /** Screen place and distance of a point; points behind the camera are pushed in front of it. */
  project(p: Vec): { x: number, y: number, depth: number } {
    const d = sub(p, this.camera.at)
    const depth = Math.max(NEAR, dot(d, this.ahead))
    return {
      x: this.view.width / 2 + dot(d, this.right) / depth * this.focal,
      y: this.view.height / 2 - dot(d, this.up) / depth * this.focal,
      depth,
    }
  }

  /** Pixels to a millimetre at a point. */
  sizeAt(p: Vec): number {
    return this.focal / this.project(p).depth
  }

  face(points: Vec[], ink: Ink): void {
    const inFront = this.clip(points)
    if (inFront.length < 3) return
    const screen = inFront.map(p => this.project(p))
    const light = ink.shaded === false ? 0 : this.lightOn(points)
    const fill = ink.fill ? lit(ink.fill, light) : 'none'
    const stroke = ink.stroke ? `stroke="${ink.stroke}" stroke-width="${ink.width ?? 1.5}" stroke-linejoin="round"` : ink.fill && ink.opacity === undefined ? `stroke="${fill}" stroke-width="0.7"` : ''
    if (this.offPicture(screen)) return
    const depth = screen.reduce((sum, p) => sum + p.depth, 0) / screen.length
    this.push(ink, depth, `<path d="${path(screen)}Z" fill="${fill}" ${stroke}${opacity(ink, 'fill')}/>`)
  }

  line(points: Vec[], ink: Ink = {}): void {
    for (let i = 1; i < points.length; i++) {
      const [a, b] = [points[i - 1]!, points[i]!]
      if (this.behind(a) || this.behind(b)) continue
      const screen = [this.project(a), this.project(b)]
      if (this.offPicture(screen)) continue
      this.push({ bias: 18, ...ink }, (screen[0]!.depth + screen[1]!.depth) / 2, strokeOf(screen, this.thinned(ink, a)))
    }
  }

  /** One unbroken stroke, painted at its mean distance. */
  stroke(points: Vec[], ink: Ink = {}): void {
    const screen = points.filter(p => !this.behind(p)).map(p => this.project(p))
    if (screen.length < 2 || this.offPicture(screen)) return
    const depth = screen.reduce((sum, p) => sum + p.depth, 0) / screen.length
    this.push({ bias: 18, ...ink }, depth, strokeOf(screen, this.thinned(ink, points[0]!)))
  }

  /** A surface between two edges of as many points, with its outline drawn. */
  strip(a: Vec[], b: Vec[], ink: Ink & { inside?: string, outline?: boolean }): void {
    for (let i = 1; i < a.length; i++) {
      const quad = [a[i - 1]!, a[i]!, b[i]!, b[i - 1]!]
      const facing = dot(normalOf(quad), sub(this.camera.at, quad[0]!)) > 0
      this.face(quad, { ...ink, fill: facing ? ink.fill : ink.inside ?? ink.fill, stroke: undefined })
    }
    if (ink.outline === false) return
    const edge = { stroke: ink.stroke, width: ink.width, layer: ink.layer, bias: (ink.bias ?? 0) + 14 }
    this.line(a, edge)
    this.line(b, edge)
    this.line([a[0]!, b[0]!], edge)
    this.line([a.at(-1)!, b.at(-1)!], edge)
  }

  /** A squared timber between two points, `wide` across and `deep` along `up`, cut into lengths so that it sorts well. */
  beam(from: Vec, to: Vec, wide: number, deep: number, fill: string, options: Ink & { up?: Vec } = {}): void {
    const along = unit(sub(to, from))
    const side = unit(cross(along, options.up ?? (Math.abs(along[2]) > 0.9 ? [1, 0, 0] : [0, 0, 1])))
    const top = cross(side, along)
    const corner = (p: Vec, s: number, t: number) => add(p, add(scale(side, s * wide / 2), scale(top, t * deep / 2)))
    const pieces = Math.max(1, Math.round(length(sub(to, from)) / 260))
    const ends: [number, number][] = [[-1, -1], [1, -1], [1, 1], [-1, 1]]
    const ink = { ...options, fill }
    for (let piece = 0; piece < pieces; piece++) {
      const [p, q] = [mixVec(from, to, piece / pieces), mixVec(from, to, (piece + 1) / pieces)]
      ends.forEach(([s, t], i) => {
        const [s2, t2] = ends[(i + 1) % 4]!
        const quad = [corner(p, s, t), corner(p, s2, t2), corner(q, s2, t2), corner(q, s, t)]
        const middle = mixVec(quad[0]!, quad[2]!, 0.5)
        const out = sub(middle, mixVec(p, q, 0.5))
        if (dot(out, sub(this.camera.at, middle)) <= 0) return
        this.face(orient(quad, out), ink)
        const edge = { ...options, width: options.width ?? 1.4, bias: (options.bias ?? 0) + 6 }
        this.line([quad[0]!, quad[3]!], edge)
        this.line([quad[1]!, quad[2]!], edge)
      })
    }
    for (const [p, way] of [[from, scale(along, -1)], [to, along]] as const) {
      const end = ends.map(([s, t]) => corner(p, s, t))
      if (dot(way, sub(this.camera.at, p)) > 0) this.face(orient(end, way), { ...ink, fill: blend(fill, colour.plyEdge, 0.35), stroke: colour.graphite, width: options.width ?? 1.4 })
    }
  }

  /** A flat piece cut to an outline and given a thickness on its place. */
  plate(place: Place, outline: Point[], thick: number, fill: string, options: Ink & { edge?: string } = {}): void {
    const low = outline.map(([u, v]) => on(place, u, v))
    const high = outline.map(([u, v]) => on(place, u, v, thick))
    const centre = scale(low.reduce((sum, p) => add(sum, p)), 1 / low.length)
    const line = { stroke: options.stroke ?? colour.graphite, width: options.width ?? 1.5 }
    const above = dot(place.n, sub(this.camera.at, high[0]!)) > 0
    low.forEach((p, i) => {
      const j = (i + 1) % low.length
      const quad = [p, low[j]!, high[j]!, high[i]!]
      const out = sub(mixVec(p, low[j]!, 0.5), centre)
      const way = cross(sub(low[j]!, p), place.n)
      const outward = dot(way, out) > 0 ? way : scale(way, -1)
      if (dot(outward, sub(this.camera.at, p)) > 0) this.face(orient(quad, outward), { ...options, fill: options.edge ?? blend(fill, colour.plyEdge, 0.6), ...line })
    })
    this.face(orient(above ? high : low, above ? place.n : scale(place.n, -1)), { ...options, bias: (options.bias ?? 0) + thick / 2 + 1, fill, ...line })
  }

  /** A flat drawing (millimetres, y down) standing at a point and facing the camera. */
  sprite(at: Vec, drawing: string, options: Ink & { turn?: number, size?: number, flip?: boolean } = {}): void {
    if (this.behind(at)) return
    const p = this.project(at)
    const k = this.focal / p.depth * (options.size ?? 1)
    this.push({ bias: 30, ...options }, p.depth, `<g transform="translate(${n(p.x)} ${n(p.y)}) scale(${n3(options.flip ? -k : k)} ${n3(k)}) rotate(${n(options.turn ?? 0)})">${drawing}</g>`)
  }

  /** Anything already in screen pixels. */
  raw(layer: number, svg: string): void {
    this.items.push({ layer, depth: 0, svg })
  }

  toSvg(): string {
    const { width, height } = this.view
    const body = this.items.sort((a, b) => a.layer - b.layer || b.depth - a.depth).map(item => item.svg).join('')
    return `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${height}" viewBox="0 0 ${width} ${height}">${body}</svg>`
  }

  /** Lines grow finer with distance, as a pencil would draw them. */
  private thinned(ink: Ink, at: Vec): Ink {
    return { ...ink, width: (ink.width ?? 1.5) * Math.min(1.5, Math.max(0.55, this.sizeAt(at) * 3.2)) }
  }

  private push(ink: Ink, depth: number, svg: string): void {
    this.items.push({ layer: ink.layer ?? 5, depth: depth - (ink.bias ?? 0), svg })
  }

  private offPicture(screen: { x: number, y: number }[]): boolean {
    const { width, height } = this.view
    return screen.every(p => p.x < -20) || screen.every(p => p.x > width + 20) || screen.every(p => p.y < -20) || screen.every(p => p.y > height + 20)
  }

  private behind(p: Vec): boolean {
    return dot(sub(p, this.camera.at), this.ahead) < NEAR
  }

  private lightOn(points: Vec[]): number {
    const normal = normalOf(points)
    const towards = dot(normal, sub(this.camera.at, points[0]!)) > 0 ? normal : scale(normal, -1)
    return dot(towards, LIGHT) * 0.62 - 0.18
  }

  private clip(points: Vec[]): Vec[] {
    const inside = (p: Vec) => dot(sub(p, this.camera.at), this.ahead) - NEAR
    const out: Vec[] = []
    points.forEach((p, i) => {
      const q = points[(i + 1) % points.length]!
      const [a, b] = [inside(p), inside(q)]
      if (a >= 0) out.push(p)
      if ((a >= 0) !== (b >= 0)) out.push(mixVec(p, q, a / (a - b)))
    })
    return out
  }
}

function normalOf(points: Vec[]): Vec {
  return unit(cross(sub(points[1]!, points[0]!), sub(points[2]!, points[0]!)))
}

function orient(points: Vec[], out: Vec): Vec[] {
  return dot(normalOf(points), out) >= 0 ? points : [...points].reverse()
}

function strokeOf(screen: { x: number, y: number }[], ink: Ink): string {
  return `<path d="${path(screen)}" fill="none" stroke="${ink.stroke ?? colour.graphite}" stroke-width="${ink.width ?? 1.5}" stroke-linecap="round" stroke-linejoin="round"${ink.dash ? ` stroke-dasharray="${ink.dash}"` : ''}${opacity(ink, 'stroke')}/>`
}

function path(screen: { x: number, y: number }[]): string {
  return screen.map((p, i) => `${i ? 'L' : 'M'}${n(p.x)} ${n(p.y)}`).join('')
}

const n = (value: number) => String(Math.round(value * 10) / 10)
const n3 = (value: number) => String(Math.round(value * 1000) / 1000)
const opacity = (ink: Ink, what: 'fill' | 'stroke') => ink.opacity === undefined ? '' : ` ${what}-opacity="${n3(ink.opacity)}"`
