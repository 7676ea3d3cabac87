/** A stretch of time, ms, half open. */
export interface Range { startMs: number, endMs: number }

/** The pieces of a stretch that lie beside `walls`, in order; none is empty. */
export function outside(range: Range, walls: readonly Range[]): Range[] {
  let pieces: Range[] = [{ startMs: range.startMs, endMs: range.endMs }]
  for (const wall of walls) {
    pieces = pieces.flatMap(piece => wall.endMs <= piece.startMs || wall.startMs >= piece.endMs
      ? [piece]
      : [{ startMs: piece.startMs, endMs: Math.min(piece.endMs, wall.startMs) }, { startMs: Math.max(piece.startMs, wall.endMs), endMs: piece.endMs }])
  }
  return pieces.filter(piece => piece.endMs > piece.startMs)
}
