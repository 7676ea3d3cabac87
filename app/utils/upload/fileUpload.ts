import type { ClipReference, UploadBegun } from '#shared/types/uploads'
import { partRange, planParts } from '#shared/utils/upload'
import { PartSender } from './partSender'
import type { Slots } from './slots'
import { Speedometer } from './speed'
import type { RequestProblem, UploadOutside, UploadProgress } from './types'

type Begun = Extract<UploadBegun, { kind: 'upload' }>

const REPORT_MS = 200

/**
 * The upload of one file from beginning to end. Only slices of it are ever read. What has been sent is known to the
 * storage, what has been hashed is remembered here, so pausing, a lost line or a reload cost only parts in flight.
 */
export class FileUpload {
  readonly progress: UploadProgress = { state: 'waiting', clipId: null, sentBytes: 0, bytesPerSecond: null, secondsLeft: null, message: '', double: null }
  private readonly hashes = new Map<number, string>()
  private readonly speed = new Speedometer()
  private fingerprint: string | null = null
  private stopper: AbortController | null = null
  private lastReport = 0

  constructor(
    readonly file: File,
    private readonly outside: UploadOutside,
    private readonly slots: { files: Slots, parts: Slots },
    private readonly changed: (progress: UploadProgress) => void,
  ) {}

  /** Begins or goes on. Resolves when the upload is done, refused, paused or has failed; never rejects. */
  async run(): Promise<void> {
    if (this.stopper) return
    const stopper = this.stopper = new AbortController()
    this.set({ state: 'waiting', message: '' })
    try {
      // An empty or far too large file need not wait in line to hear it.
      planParts(this.file.size)
      await this.slots.files.run(stopper.signal, () => this.work(stopper.signal))
    }
    catch (error) {
      if (!stopper.signal.aborted) this.fail(error)
    }
    finally {
      if (this.stopper === stopper) this.stopper = null
    }
  }

  /** Stops sending; parts that arrived are kept. */
  pause(): void {
    this.stopper?.abort(new DOMException('Paused', 'AbortError'))
    this.stopper = null
    if (!['done', 'double'].includes(this.progress.state)) this.set({ state: 'paused', message: 'Paused. What was sent is kept.', bytesPerSecond: null, secondsLeft: null })
  }

  private async work(signal: AbortSignal): Promise<void> {
    this.set({ state: 'checking', message: '' })
    this.fingerprint ??= await this.outside.fingerprint(this.file)
    const begun = await this.begin(signal)
    this.set({ state: 'sending', clipId: begun.clipId, message: '' })
    await this.send(begun, signal)
    this.set({ state: 'done', sentBytes: this.file.size, bytesPerSecond: null, secondsLeft: null, message: '' })
  }

  private async begin(signal: AbortSignal): Promise<Begun> {
    const input = { name: this.file.name, sizeBytes: this.file.size, contentType: this.file.type, fingerprint: this.fingerprint! }
    const first = await this.ask(signal, () => this.outside.begin(input))
    if (first.kind === 'upload') return first
    this.set({ message: `It looks like ${first.candidate.name}, which is here already. Comparing the two…` })
    for (let number = 1; number <= first.partCount; number++) await this.hashPart(number, first.partSizeBytes, signal)
    const contentHash = await this.outside.combine(Array.from({ length: first.partCount }, (_, i) => this.hashes.get(i + 1)!))
    const second = await this.ask(signal, () => this.outside.begin({ ...input, contentHash }))
    if (second.kind === 'upload') return second
    throw new Error('The site did not begin the upload.')
  }

  private async send(begun: Begun, signal: AbortSignal): Promise<void> {
    const sender = new PartSender(this.file, begun, this.outside, this.slots.parts, {
      hash: (number, stop) => this.hashPart(number, begun.partSizeBytes, stop),
      sent: bytes => this.reportSent(bytes),
      offline: waiting => this.set(waiting ? { state: 'offline', message: 'No connection. This goes on by itself when it is back.', bytesPerSecond: null, secondsLeft: null } : { state: 'sending', message: '' }),
    })
    for (let tries = 0; ; tries++) {
      const parts = await sender.sendAll(signal)
      this.set({ state: 'finishing', secondsLeft: null })
      try {
        await this.ask(signal, () => this.outside.complete(begun.clipId, parts))
        return
      }
      catch (error) {
        const missing = (error as Partial<RequestProblem>).data?.missing
        if (!Array.isArray(missing) || tries >= 3) throw error
        sender.forget(missing as number[])
        this.set({ state: 'sending' })
      }
    }
  }

  private async hashPart(number: number, partSizeBytes: number, signal: AbortSignal): Promise<string> {
    const known = this.hashes.get(number)
    if (known) return known
    const { start, end } = partRange(this.file.size, partSizeBytes, number)
    const hash = await this.outside.hash(this.file.slice(start, end), signal)
    signal.throwIfAborted()
    this.hashes.set(number, hash)
    return hash
  }

  /** Asks the site, waiting out a lost connection. */
  private async ask<Answer>(signal: AbortSignal, request: () => Promise<Answer>): Promise<Answer> {
    for (;;) {
      signal.throwIfAborted()
      const { state, message } = this.progress
      try {
        return await request()
      }
      catch (error) {
        const { status } = error as Partial<RequestProblem>
        if (status !== 0 && status !== 502 && status !== 503 && status !== 504) throw error
        this.set({ state: 'offline', message: 'The site cannot be reached. This goes on by itself when it is back.', bytesPerSecond: null, secondsLeft: null })
        await this.outside.whenOnline(signal)
        this.set({ state, message })
      }
    }
  }

  private fail(error: unknown): void {
    const problem = error as Partial<RequestProblem> & { message?: string, name?: string }
    const where = problem.data as Partial<ClipReference> | undefined
    if (problem.code === 'conflict' && where?.clipId && where.sessionId) {
      this.set({ state: 'double', double: where as ClipReference, message: problem.message ?? '', bytesPerSecond: null, secondsLeft: null })
      return
    }
    const unreadable = problem.name === 'NotReadableError' || problem.name === 'NotFoundError'
    this.set({ state: 'failed', bytesPerSecond: null, secondsLeft: null, message: unreadable ? 'The file cannot be read any more: it was moved, changed or its card was taken out. What was sent is kept; pick the file again to go on.' : problem.message || 'The upload stopped. What was sent is kept; try again to go on.' })
  }

  private reportSent(bytes: number): void {
    const at = this.outside.now()
    this.speed.mark(bytes, at)
    if (at - this.lastReport < REPORT_MS && bytes < this.file.size) return
    this.lastReport = at
    this.set({ sentBytes: bytes, bytesPerSecond: this.speed.bytesPerSecond, secondsLeft: this.speed.secondsLeft(this.file.size - bytes) })
  }

  private set(change: Partial<UploadProgress>): void {
    if (change.state && change.state !== 'sending') this.speed.reset()
    Object.assign(this.progress, change)
    this.changed({ ...this.progress })
  }
}
