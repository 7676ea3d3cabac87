const WINDOW_MS = 8000

/** Speed over the last seconds, steady enough to read and quick enough to notice a change. */
export class Speedometer {
  private marks: { at: number, bytes: number }[] = []

  /** @param bytes sent in all by now; @param at ms on any steady clock */
  mark(bytes: number, at: number): void {
    // Fewer than before: a part was lost and goes again. Old marks would show a speed below zero.
    if (bytes < (this.marks.at(-1)?.bytes ?? 0)) this.marks = []
    this.marks.push({ at, bytes })
    while (this.marks.length > 2 && at - this.marks[1]!.at >= WINDOW_MS) this.marks.shift()
  }

  reset(): void {
    this.marks = []
  }

  /** Bytes a second; null until there is enough to tell. */
  get bytesPerSecond(): number | null {
    const [first, last] = [this.marks[0], this.marks.at(-1)]
    if (!first || !last || last.at - first.at < 1000) return null
    return (last.bytes - first.bytes) / ((last.at - first.at) / 1000)
  }

  /** Seconds for `bytesLeft` at this speed; null when nobody can say. */
  secondsLeft(bytesLeft: number): number | null {
    const speed = this.bytesPerSecond
    return speed ? Math.ceil(bytesLeft / speed) : null
  }
}

/** 'about 3 min left', as coarse as it is sure. */
export function timeLeftWords(seconds: number | null): string {
  if (seconds === null) return ''
  if (seconds < 10) return 'a few seconds left'
  if (seconds < 90) return `about ${Math.ceil(seconds / 10) * 10} s left`
  if (seconds < 5400) return `about ${Math.round(seconds / 60)} min left`
  const hours = Math.floor(seconds / 3600)
  const minutes = Math.round(seconds % 3600 / 600) * 10
  return minutes === 60 ? `about ${hours + 1} h left` : `about ${hours} h${minutes ? ` ${minutes} min` : ''} left`
}
