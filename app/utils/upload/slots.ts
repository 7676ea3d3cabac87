/**
 * Lets only so many run at once; the rest wait in line. One for files and one for parts keeps memory and the
 * line to the storage within bounds however many files are dropped.
 */
export class Slots {
  private taken = 0
  private readonly line: (() => void)[] = []

  constructor(private readonly size: number) {}

  /** Runs `work` when a slot is free. A wait that is aborted leaves the line. */
  async run<Result>(signal: AbortSignal, work: () => Promise<Result>): Promise<Result> {
    await this.take(signal)
    try {
      return await work()
    }
    finally {
      this.taken--
      this.line.shift()?.()
    }
  }

  private take(signal: AbortSignal): Promise<void> {
    if (signal.aborted) return Promise.reject(signal.reason)
    if (this.taken < this.size) {
      this.taken++
      return Promise.resolve()
    }
    return new Promise((resolve, reject) => {
      const leave = () => {
        this.line.splice(this.line.indexOf(enter), 1)
        reject(signal.reason)
      }
      const enter = () => {
        signal.removeEventListener('abort', leave)
        this.taken++
        resolve()
      }
      signal.addEventListener('abort', leave, { once: true })
      this.line.push(enter)
    })
  }
}
