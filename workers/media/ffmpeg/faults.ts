import type { ClipFailure, ClipFailureCode } from '#shared/types/media'
import { RunError } from './run'

/** A clip that cannot be used, with the message that its owner reads. Trying again would not help. */
export class ClipFault extends Error {
  readonly failure: ClipFailure
  constructor(code: ClipFailureCode, message: string, options?: { cause?: unknown }) {
    super(message, options)
    this.name = 'ClipFault'
    this.failure = { code, message }
  }
}

const KEPT = 'The file is kept as uploaded.'
const ACCEPTED = 'Ribband reads MP4, MOV, MKV, WebM, AVI and MPEG-TS clips, and sound as MP3, M4A, WAV, OGG or FLAC.'

/** What each fault says: what happened, what was kept, what to do. `detail` is a fact found in this file. */
const MESSAGES: Record<ClipFailureCode, (detail: string) => string> = {
  'empty-file': () => `The file is empty: it holds no bytes at all. Nothing was lost on the way here; copy the clip from the camera or phone again and upload it.`,
  'not-a-video': d => `This is not a video or sound file${d && `: ${d}`}. ${KEPT} ${ACCEPTED}`,
  'truncated': d => `The clip is cut short${d && `: ${d}`}. ${KEPT} Copy it from the camera or phone again, let the copy finish, and upload that. If the original is cut short too, the recording was interrupted and needs a repair tool.`,
  'too-many-streams': d => `The file claims to hold ${d || 'far too many tracks'}, which no camera writes, so it was not read. ${KEPT} Export the clip again with one picture and one sound track.`,
  'picture-too-large': d => `The picture claims to be ${d || 'far too large'}; more than 40 million pixels a frame are not read. ${KEPT} Export the clip at 8K (7680 × 4320) or smaller.`,
  'forbidden-format': d => `This is ${d || 'a list of other files'}, not a clip: it only points at files elsewhere, and those are never opened. ${KEPT} Upload the clips themselves.`,
  'no-duration': () => `No moment of picture or sound could be found in the file, so it has no length. ${KEPT} Play it on the device that recorded it; if it plays there, export it as MP4 and upload that.`,
  'timed-out': d => `Reading the clip took far too long and was stopped${d && ` (${d})`}. ${KEPT} Try again; if it happens twice, export the clip as MP4 and upload that.`,
  'out-of-space': () => `The worker ran out of disk space while it read the clip. ${KEPT} Free some space on the worker's disk and try again.`,
  'missing-object': () => `The uploaded file could not be found in the storage. Upload the clip again; its chapters and captions are kept.`,
  'damaged': d => `The clip is damaged${d && `: ${d}`}. ${KEPT} Copy it from the camera or phone again and upload that.`,
  'internal': d => `The clip could not be read because of a fault of the program${d && ` (${d})`}. ${KEPT} Try again; if it happens twice, tell whoever runs this site.`,
}

/** Makes the fault for a code, with its message. */
export function clipFault(code: ClipFailureCode, detail = '', options?: { cause?: unknown }): ClipFault {
  return new ClipFault(code, MESSAGES[code](detail), options)
}

/**
 * Reads a failed run as a fault of the clip. Anything that is not a failed run (an abort, a bug) is passed on as it is,
 * so that the queue may try again.
 * @param isMp4 ffmpeg takes some other files for an MP4 without index; whoever knows better says so
 */
export function faultOf(error: unknown, otherwise: ClipFailureCode = 'damaged', isMp4 = true): unknown {
  if (!(error instanceof RunError)) return error
  const { stderr } = error
  const cause = { cause: error }
  if (error.reason === 'timed-out') return clipFault('timed-out', '', cause)
  if (error.reason === 'out-of-space') return clipFault('out-of-space', '', cause)
  if (error.reason === 'not-installed') return clipFault('internal', `${error.program} is not installed`, cause)
  if (/max_streams/.test(stderr)) return clipFault('too-many-streams', 'more than 16 tracks', cause)
  if (/max_pixels|Picture size \d+x\d+ is invalid/.test(stderr)) return clipFault('picture-too-large', '', cause)
  if (error.reason === 'out-of-memory') return clipFault('damaged', 'reading it would take more memory than any clip should need', cause)
  if (isMp4 && /moov atom not found/.test(stderr)) return clipFault('truncated', 'the index that a camera writes at the end of a recording is missing', cause)
  if (/not on whitelist|moov atom not found/i.test(stderr)) return clipFault('not-a-video', 'its contents are of another kind than its name says', cause)
  return clipFault(otherwise, '', cause)
}
