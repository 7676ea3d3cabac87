import { join } from 'node:path'
import type { PictureSheets, ProbeResult } from '#shared/types/media'
import { fitInto } from './frames'
import type { Frame } from './frames'
import { localFile, runFfmpeg } from './run'

export const TILE_WIDTH = 160
export const TILE_HEIGHT = 90
const COLUMNS = 16
const ROWS = 15
const PER_SHEET = COLUMNS * ROWS
const SCRAP_MS = 200

/** A picture every 5 s; short clips get a dozen, but none closer than a second. */
export function tileInterval(durationMs: number): number {
  return Math.min(5000, Math.max(1000, Math.round(durationMs / 12 / 100) * 100))
}

/**
 * Lays pictures into sheets as they come: tile n shows the picture nearest to n × interval. Holds one sheet in memory
 * (10 MB) and at most one more while it is being written, whatever the length of the clip.
 */
export class SheetMaker {
  readonly tile: { width: number, height: number }
  readonly intervalMs: number
  private readonly count: number
  private readonly timesMs: number[] = []
  private readonly images: string[] = []
  private previous: Frame | null = null
  private sheet: Buffer | null = null
  private writing: Promise<unknown> = Promise.resolve()

  constructor(probe: ProbeResult, private readonly outDir: string, private readonly signal?: AbortSignal) {
    this.tile = fitInto(probe.video!, TILE_WIDTH, TILE_HEIGHT)
    this.intervalMs = tileInterval(probe.durationMs)
    // A last tile that would stand for a few frames only has no picture of its own.
    this.count = Math.max(1, Math.ceil((probe.durationMs - SCRAP_MS) / this.intervalMs))
  }

  take(frame: Frame) {
    const before = this.previous
    this.previous = frame
    // A picture stands for all tiles up to half way to the next one.
    if (before) this.fill(before, tile => tile * this.intervalMs <= (before.timeMs + frame.timeMs) / 2)
  }

  /** Fills what is left with the last picture and waits for the images. null when there was no picture at all. */
  async finish(): Promise<PictureSheets | null> {
    if (!this.previous) return null
    this.fill(this.previous, () => true)
    this.flush()
    await this.writing
    return {
      intervalMs: this.intervalMs,
      tileWidth: this.tile.width,
      tileHeight: this.tile.height,
      columns: COLUMNS,
      rows: ROWS,
      count: this.count,
      timesMs: this.timesMs,
      images: this.images,
    }
  }

  private fill(frame: Frame, belongs: (tile: number) => boolean) {
    while (this.timesMs.length < this.count && belongs(this.timesMs.length)) {
      this.place(frame.rgb, this.timesMs.length % PER_SHEET)
      this.timesMs.push(frame.timeMs)
      if (this.timesMs.length % PER_SHEET === 0) this.flush()
    }
  }

  private place(rgb: Buffer, slot: number) {
    const { width, height } = this.tile
    const stride = COLUMNS * width * 3
    this.sheet ??= Buffer.alloc(stride * ROWS * height)
    const origin = Math.floor(slot / COLUMNS) * height * stride + (slot % COLUMNS) * width * 3
    for (let row = 0; row < height; row++) {
      rgb.copy(this.sheet, origin + row * stride, row * width * 3, (row + 1) * width * 3)
    }
  }

  private flush() {
    if (!this.sheet) return
    const tiles = (this.timesMs.length - 1) % PER_SHEET + 1
    const name = `sheet-${String(this.images.length).padStart(3, '0')}.jpg`
    const rows = Math.ceil(tiles / COLUMNS)
    const pixels = this.sheet.subarray(0, COLUMNS * this.tile.width * 3 * rows * this.tile.height)
    this.images.push(name)
    this.sheet = null
    this.writing = this.writing.then(() => this.write(pixels, rows, join(this.outDir, name)))
    // The failure is reported by finish(); until then it must not end the process as unhandled.
    this.writing.catch(() => {})
  }

  private write(pixels: Buffer, rows: number, path: string) {
    const size = `${COLUMNS * this.tile.width}x${rows * this.tile.height}`
    return runFfmpeg(
      ['-f', 'rawvideo', '-pix_fmt', 'rgb24', '-video_size', size, '-i', 'pipe:0', '-frames:v', '1', '-pix_fmt', 'yuvj420p', '-q:v', '4', '-f', 'mjpeg', localFile(path)],
      { stdin: pixels, signal: this.signal },
    )
  }
}
