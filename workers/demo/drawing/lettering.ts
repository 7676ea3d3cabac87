import { colour } from './palette'
import type { Ink, Stage } from './stage'
import { on, type Place, type Vec } from './vector'

/** Pencil figures as strokes in a box 0.6 wide and 1 high, y up. */
const STROKES: Record<string, string> = {
  0: '30,100 5,80 5,20 30,0 55,20 55,80 30,100', 1: '15,80 32,100 32,0', 2: '5,82 30,100 55,80 5,0 56,0', 3: '6,100 52,100 26,62 54,32 30,0 5,14',
  4: '42,0 42,100 4,30 58,30', 5: '52,100 12,100 8,58 36,64 56,34 34,0 5,10', 6: '48,100 10,50 6,20 30,0 54,22 32,52 10,40', 7: '4,100 56,100 22,0',
  8: '30,54 8,78 30,100 52,78 30,54 4,24 30,0 56,24 30,54', 9: '50,60 28,50 8,74 30,100 52,80 48,40 24,0', '/': '4,0 54,100', '°': '14,100 4,88 14,76 24,88 14,100',
  C: '54,84 30,100 6,70 6,28 30,0 54,14', L: '8,100 8,0 52,0', B: '8,0 8,100 46,88 40,56 8,54 52,34 46,6 8,0', O: '30,100 5,70 5,28 30,0 55,28 55,70 30,100', W: '0,100 14,0 30,60 46,0 60,100',
  S: '52,86 28,100 8,80 50,24 28,0 6,12', T: '2,100 58,100 30,100 30,0', E: '52,100 8,100 8,52 40,52 8,52 8,0 54,0', R: '8,0 8,100 46,88 44,58 8,52 54,0', N: '8,0 8,100 52,0 52,100',
  P: '8,0 8,100 50,86 46,54 8,48', I: '30,100 30,0', F: '50,100 8,100 8,52 40,52 8,52 8,0', M: '4,0 10,100 30,40 50,100 56,0', A: '2,0 30,100 58,0 46,36 14,36', D: '8,0 8,100 42,90 56,50 42,8 8,0', U: '6,100 8,22 30,0 52,22 54,100', K: '8,0 8,100 8,44 52,100 20,56 54,0',
}

/** Writes on a place in pencil, `high` mm, starting at u, v. */
export function write(stage: Stage, place: Place, text: string, u: number, v: number, high: number, ink: Ink = {}): void {
  let at = u
  for (const letter of text) {
    const stroke = STROKES[letter]
    if (stroke) {
      const points = stroke.split(' ').map((pair): Vec => {
        const [x, y] = pair.split(',').map(Number) as [number, number]
        return on(place, at + (x / 100 + y / 700) * high, v + y / 100 * high, 1)
      })
      stage.stroke(points, { stroke: colour.pencil, width: 1.6, ...ink })
    }
    at += high * (letter === ' ' ? 0.45 : 0.78)
  }
}
