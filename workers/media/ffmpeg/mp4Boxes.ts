import type { FileHandle } from 'node:fs/promises'

/*
 * The few things about an MP4/MOV that ffprobe does not report: whether its index stands in front, whether its last
 * box runs past the end of the file, and what its edit lists do. Only box headers and edit lists are read, by position,
 * so size of the file does not matter. Layout: ISO/IEC 14496-12 (ISO base media file format), §4.2, §8.6.6.
 */

export interface Mp4Layout {
  /** The index (moov) stands before the first media data (mdat), or the file is fragmented. */
  fastStart: boolean
  hasIndex: boolean
  hasMedia: boolean
  /** Bytes that the boxes claim beyond the end of the file; 0 for a whole file. */
  missingBytes: number
  /** Some edit list does more than hide the few frames that encoders need to get going. */
  hasEditList: boolean
}

interface Box { type: string, start: number, body: number, end: number }

const KNOWN_FIRST = new Set(['ftyp', 'moov', 'mdat', 'free', 'skip', 'wide', 'pnot', 'styp', 'moof', 'sidx', 'uuid'])
/** Encoders delay the first picture by up to four frames, and AAC its first sound by 2112 samples. */
const TRIFLING_S = 0.2
const MOST_BOXES = 100_000
const MOST_EDITS = 10_000
/** ffprobe refuses more, with a message; looking at their edits would be wasted. */
const MOST_TRACKS = 16

/**
 * Reads the layout of an MP4 or MOV file.
 * @returns null when the file is of another kind
 */
export async function readMp4Layout(file: FileHandle, size: number): Promise<Mp4Layout | null> {
  const layout: Mp4Layout = { fastStart: false, hasIndex: false, hasMedia: false, missingBytes: 0, hasEditList: false }
  let first = true
  for await (const box of boxes(file, 0, size)) {
    if (first && !KNOWN_FIRST.has(box.type)) return null
    first = false
    if (box.end > size) layout.missingBytes = box.end - size
    if (box.type === 'moov') {
      layout.hasIndex = true
      layout.fastStart = !layout.hasMedia
      layout.hasEditList = await anyRealEdit(file, box, size)
    }
    if (box.type === 'mdat') layout.hasMedia = true
  }
  return first ? null : layout
}

async function* boxes(file: FileHandle, from: number, to: number): AsyncGenerator<Box> {
  let at = from
  for (let n = 0; n < MOST_BOXES && at + 8 <= to; n++) {
    const head = await read(file, at, 16)
    if (head.length < 8) return
    let size = head.readUInt32BE(0)
    let body = at + 8
    // 1 means that a 64-bit size follows, 0 that the box goes on to the end.
    if (size === 1 && head.length === 16) {
      size = Number(head.readBigUInt64BE(8))
      body = at + 16
    }
    else if (size === 0) size = to - at
    if (size < body - at) return
    yield { type: head.toString('latin1', 4, 8), start: at, body, end: at + size }
    at += size
  }
}

async function child(file: FileHandle, parent: Box, size: number, type: string): Promise<Box | null> {
  for await (const box of boxes(file, parent.body, Math.min(parent.end, size))) {
    if (box.type === type) return box
  }
  return null
}

async function anyRealEdit(file: FileHandle, moov: Box, size: number): Promise<boolean> {
  const mvhd = await child(file, moov, size, 'mvhd')
  const movieScale = mvhd ? await timescale(file, mvhd) : 0
  if (!movieScale) return false
  let tracks = 0
  for await (const trak of boxes(file, moov.body, Math.min(moov.end, size))) {
    if (trak.type !== 'trak') continue
    if (++tracks > MOST_TRACKS) break
    const edts = await child(file, trak, size, 'edts')
    const elst = edts && await child(file, edts, size, 'elst')
    const mdia = await child(file, trak, size, 'mdia')
    const mdhd = mdia && await child(file, mdia, size, 'mdhd')
    if (!elst || !mdhd) continue
    const scale = await timescale(file, mdhd)
    const media = await mediaDuration(file, mdhd)
    if (scale && editsMatter(await edits(file, elst), movieScale, scale, media)) return true
  }
  return false
}

interface Edit { duration: number, mediaTime: number }

function editsMatter(list: Edit[], movieScale: number, scale: number, media: number): boolean {
  const delays = list.filter(edit => edit.mediaTime === -1)
  const shown = list.filter(edit => edit.mediaTime !== -1)
  if (shown.length > 1) return true
  if (delays.some(edit => edit.duration / movieScale > TRIFLING_S)) return true
  const only = shown[0]
  if (!only) return false
  if (only.mediaTime / scale > TRIFLING_S) return true
  // Duration 0 means "the rest" in fragmented files.
  return only.duration > 0 && media > 0 && (media - only.mediaTime) / scale - only.duration / movieScale > TRIFLING_S
}

async function edits(file: FileHandle, elst: Box): Promise<Edit[]> {
  const head = await read(file, elst.body, 8)
  if (head.length < 8) return []
  const wide = head[0] === 1
  const entry = wide ? 20 : 12
  const room = Math.floor((elst.end - elst.body - 8) / entry)
  const count = Math.min(head.readUInt32BE(4), room, MOST_EDITS)
  const data = await read(file, elst.body + 8, count * entry)
  const list: Edit[] = []
  for (let at = 0; at + entry <= data.length; at += entry) {
    list.push(wide
      ? { duration: Number(data.readBigUInt64BE(at)), mediaTime: Number(data.readBigInt64BE(at + 8)) }
      : { duration: data.readUInt32BE(at), mediaTime: data.readInt32BE(at + 4) })
  }
  return list
}

/** mvhd and mdhd share their beginning: version, creation, modification, timescale, duration. */
async function timescale(file: FileHandle, header: Box): Promise<number> {
  const data = await read(file, header.body, 24)
  if (data.length < 24) return 0
  return data.readUInt32BE(data[0] === 1 ? 20 : 12)
}

async function mediaDuration(file: FileHandle, mdhd: Box): Promise<number> {
  const data = await read(file, mdhd.body, 32)
  if (data.length < 24) return 0
  return data[0] === 1 ? Number(data.readBigUInt64BE(24)) : data.readUInt32BE(16)
}

async function read(file: FileHandle, at: number, length: number): Promise<Buffer> {
  const buffer = Buffer.alloc(length)
  const { bytesRead } = await file.read(buffer, 0, length, at)
  return buffer.subarray(0, bytesRead)
}
