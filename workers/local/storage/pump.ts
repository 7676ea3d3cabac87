import type { Writable } from 'node:stream'

const BUFFER_BYTES = 256 * 1024
const MAX_SPARE = 32
/**
 * Buffers waiting for their next use. Fresh ones for every read would keep the garbage collector
 * busier than the disk: it took more than half of the time of a large download.
 */
const spare: Buffer[] = []

/**
 * Passes bytes to a stream through two buffers in turn: one is filled while the other is sent.
 * A buffer is used again only once the stream has let go of it.
 */
export class Pump {
  private readonly buffers = [takeBuffer(), takeBuffer()]
  private readonly sent: Promise<void>[] = [Promise.resolve(), Promise.resolve()]
  private readonly waiting = new Set<(error: Error) => void>()
  private gone = false
  private turn = 0

  constructor(private readonly sink: Writable) {
    if (sink.destroyed) this.gone = true
    else sink.once('close', this.onClose)
  }

  /** Some writes are never answered once the client is gone, so this answers for them. */
  private readonly onClose = () => {
    this.gone = true
    for (const reject of this.waiting) reject(clientGone())
  }

  /** Fills a buffer by `read` and hands it on. Resolves to the number of bytes; 0 at the end of the source. */
  async pass(read: (buffer: Buffer) => Promise<{ bytesRead: number }>): Promise<number> {
    const turn = this.turn
    this.turn = 1 - turn
    await this.sent[turn]
    const buffer = this.buffers[turn]!
    const { bytesRead } = await read(buffer)
    if (this.gone) throw clientGone()
    if (bytesRead > 0) this.sent[turn] = this.write(buffer.subarray(0, bytesRead))
    return bytesRead
  }

  private write(bytes: Buffer): Promise<void> {
    const written = new Promise<void>((resolve, reject) => {
      this.waiting.add(reject)
      this.sink.write(bytes, (error) => {
        this.waiting.delete(reject)
        if (error) reject(error)
        else resolve()
      })
    })
    // Looked at on this buffer's next turn; until then a failure is not an unhandled one.
    written.catch(() => undefined)
    return written
  }

  /** Waits for the last bytes and ends the stream. After a failure the buffers are left to the collector. */
  async finish(): Promise<void> {
    await Promise.all(this.sent)
    this.sink.off('close', this.onClose)
    for (const buffer of this.buffers) if (spare.length < MAX_SPARE) spare.push(buffer)
    this.sink.end()
  }
}

const clientGone = () => new Error('The client went away.')

function takeBuffer(): Buffer {
  return spare.pop() ?? Buffer.allocUnsafeSlow(BUFFER_BYTES)
}
