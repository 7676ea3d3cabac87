/** Millimetres: x along the boat from the bow, y to the side, z up. */
export type Vec = readonly [x: number, y: number, z: number]
export type Point = readonly [x: number, y: number]

/** A flat place to build on: `u` and `v` lie in it, `n` stands on it. */
export interface Place { o: Vec, u: Vec, v: Vec, n: Vec }

export const add = (a: Vec, b: Vec): Vec => [a[0] + b[0], a[1] + b[1], a[2] + b[2]]
export const sub = (a: Vec, b: Vec): Vec => [a[0] - b[0], a[1] - b[1], a[2] - b[2]]
export const scale = (a: Vec, k: number): Vec => [a[0] * k, a[1] * k, a[2] * k]
export const dot = (a: Vec, b: Vec): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2]
export const cross = (a: Vec, b: Vec): Vec => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]]
export const length = (a: Vec): number => Math.hypot(...a)
export const unit = (a: Vec): Vec => scale(a, 1 / (length(a) || 1))
export const mix = (a: number, b: number, k: number): number => a + (b - a) * k
export const mixVec = (a: Vec, b: Vec, k: number): Vec => [mix(a[0], b[0], k), mix(a[1], b[1], k), mix(a[2], b[2], k)]
export const clamp = (value: number, low = 0, high = 1): number => Math.min(high, Math.max(low, value))

/** 0 before `from`, 1 after `to`, eased between. */
export function ease(value: number, from: number, to: number): number {
  const k = clamp((value - from) / (to - from))
  return k * k * (3 - 2 * k)
}

/** 0 before `from`, 1 after `to`, straight between. */
export const ramp = (value: number, from: number, to: number): number => clamp((value - from) / (to - from))

/** The point of a place at `u`, `v` along it and `n` off it. */
export const on = (place: Place, u: number, v: number, n = 0): Vec =>
  add(place.o, add(scale(place.u, u), add(scale(place.v, v), scale(place.n, n))))

/** A place lying flat at height z, turned by `degrees` about the upright. */
export function flat(o: Vec, degrees = 0): Place {
  const a = degrees * Math.PI / 180
  return { o, u: [Math.cos(a), Math.sin(a), 0], v: [-Math.sin(a), Math.cos(a), 0], n: [0, 0, 1] }
}
