/** The colours of the shop. */
export const colour = {
  graphite: '#3a332d',
  pencil: '#5a5149',
  wall: '#e8d9bd',
  wallShade: '#d9c6a3',
  floor: '#b9ab92',
  floorLight: '#d8c9a8',
  sky: '#cfe0dc',
  sill: '#f3ead6',
  bench: '#c9a06a',
  ply: '#dfb377',
  plyWet: '#b97a3c',
  plyEdge: '#f0d6a2',
  fir: '#e3ba75',
  spruce: '#ead3a0',
  pine: '#efddb4',
  sapele: '#a65f3a',
  sapeleWet: '#84442a',
  glue: '#b9803f',
  iron: '#56616a',
  steel: '#aeb9bd',
  redLead: '#b5452f',
  green: '#35594a',
  greenLight: '#4b7461',
  mustard: '#c08f33',
  skin: '#e0a982',
  skinShade: '#b97d5c',
  glove: '#6f9db0',
  gloveShade: '#4c7587',
  brass: '#b98b3a',
  bronze: '#8d5c30',
  paper: '#f6efdf',
  shadow: '#6b4f38',
} as const

function channels(hex: string): [number, number, number] {
  const n = Number.parseInt(hex.slice(1), 16)
  return [n >> 16, n >> 8 & 255, n & 255]
}

/** Two colours mixed: 0 is the first, 1 the second. */
export function blend(a: string, b: string, k: number): string {
  const [x, y] = [channels(a), channels(b)]
  return `#${x.map((c, i) => Math.round(c + (y[i]! - c) * k).toString(16).padStart(2, '0')).join('')}`
}

/** A colour in more light (towards 1) or in the shade of the shop (towards −1). */
export function lit(hex: string, light: number): string {
  return light >= 0 ? blend(hex, '#fff4d8', light * 0.55) : blend(hex, colour.shadow, -light * 0.75)
}
