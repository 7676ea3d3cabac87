import { DomainError } from '../errors'

/** Frames per second as the exact fraction that containers store: 30000/1001, 25/1. */
export interface FrameRate { num: number, den: number }

const MS_PER_S = 1000n

/**
 * The frame on screen at a millisecond of a clip.
 *
 * Frame n is shown for the half-open stretch from n·den/num s up to, not including, (n+1)·den/num s,
 * so this is floor(ms · num / (1000 · den)), in whole numbers.
 * @throws DomainError 'bad-input' for a rate that is no positive fraction or a time that is no whole millisecond from 0 on
 */
export function msToFrame(ms: number, rate: FrameRate): number {
  const { num, den } = exactRate(rate)
  return Number(whole(ms, 'time in milliseconds') * num / (MS_PER_S * den))
}

/**
 * The first whole millisecond at which a frame is on screen: ceil(frame · 1000 · den / num).
 *
 * Rounded up, so that `msToFrame(frameToMs(n)) === n` for every rate up to 1000 frames a second;
 * rounding down or to the nearest would land in the frame before. Also the in-point of a frame, and
 * as `frameToMs(n + 1)` the out-point after it.
 * @throws DomainError 'bad-input' as msToFrame
 */
export function frameToMs(frame: number, rate: FrameRate): number {
  const { num, den } = exactRate(rate)
  const scaled = whole(frame, 'frame number') * MS_PER_S * den
  return Number((scaled + num - 1n) / num)
}

/** Rates whose timecode may drop numbers: 30000/1001 and 60000/1001, multiples of 30 slowed by 1000/1001. */
export function canDropFrames(rate: FrameRate): boolean {
  return dropsPerMinute(rate) > 0
}

/**
 * SMPTE ST 12-1 timecode of a frame: `HH:MM:SS:FF`, or `HH:MM:SS;FF` with drop-frame counting.
 *
 * Timecode counts at the nominal rate (30 for 30000/1001). Drop-frame leaves out the first two frame
 * numbers of every minute but each tenth (four at 60000/1001), so that clock and timecode stay together;
 * no frame is dropped. Hours run on past 24 rather than wrapping: clips are shorter, and a wrapped
 * number would point elsewhere.
 * @throws DomainError 'bad-input' for drop-frame at a rate that has none
 */
export function frameToTimecode(frame: number, rate: FrameRate, options: { drop?: boolean } = {}): string {
  const fps = nominalRate(rate)
  let count = Number(whole(frame, 'frame number'))
  if (options.drop) count += droppedBefore(count, rate, fps)
  const parts = [Math.floor(count / (fps * 3600)), Math.floor(count / (fps * 60)) % 60, Math.floor(count / fps) % 60]
  const frames = String(count % fps).padStart(fps > 100 ? 3 : 2, '0')
  return `${parts.map(n => String(n).padStart(2, '0')).join(':')}${options.drop ? ';' : ':'}${frames}`
}

const TIMECODE = /^(\d{2,}):(\d{2}):(\d{2})([:;.])(\d{2,3})$/

/**
 * The frame that a timecode names. `;` or `.` before the frames means drop-frame, `:` does not.
 * @throws DomainError 'bad-input' for what is no timecode at this rate, including numbers that drop-frame leaves out
 */
export function timecodeToFrame(timecode: string, rate: FrameRate): number {
  const match = TIMECODE.exec(timecode.trim())
  const fps = nominalRate(rate)
  if (!match) throw badInput(`“${timecode.slice(0, 40)}” is not a timecode. Write it as 01:02:03:04.`)
  const [hours, minutes, seconds, frames] = [match[1], match[2], match[3], match[5]].map(Number) as [number, number, number, number]
  const drop = match[4] !== ':'
  if (minutes > 59 || seconds > 59 || frames >= fps) {
    throw badInput(`“${timecode}” is not a timecode at ${fps} frames a second: minutes and seconds go to 59, frames to ${fps - 1}.`)
  }
  const totalMinutes = hours * 60 + minutes
  const count = totalMinutes * 60 * fps + seconds * fps + frames
  if (!drop) return count
  const dropped = requireDrops(rate)
  if (seconds === 0 && frames < dropped && minutes % 10 !== 0) {
    throw badInput(`“${timecode}” does not exist: drop-frame timecode leaves out the first ${dropped} numbers of that minute.`)
  }
  return count - dropped * (totalMinutes - Math.floor(totalMinutes / 10))
}

function droppedBefore(frame: number, rate: FrameRate, fps: number): number {
  const dropped = requireDrops(rate)
  const perMinute = fps * 60 - dropped
  const perTenMinutes = fps * 600 - dropped * 9
  const tens = Math.floor(frame / perTenMinutes)
  const rest = frame % perTenMinutes
  // The first minute of ten keeps all its numbers, so the second starts `dropped` frames later than the others would.
  const minutes = rest < fps * 60 ? 0 : 1 + Math.floor((rest - fps * 60) / perMinute)
  return dropped * (tens * 9 + minutes)
}

function dropsPerMinute(rate: FrameRate): number {
  const { num, den } = exactRate(rate)
  const fps = nominalRate(rate)
  return num * 1001n === BigInt(fps) * 1000n * den && fps % 30 === 0 ? fps / 15 : 0
}

function requireDrops(rate: FrameRate): number {
  const drops = dropsPerMinute(rate)
  if (drops === 0) throw badInput(`Drop-frame timecode exists at 30000/1001 and 60000/1001 frames a second, not at ${rate.num}/${rate.den}.`)
  return drops
}

/** The whole number of frames that timecode counts in a second: the nearest to the rate, 30 for 30000/1001. */
function nominalRate(rate: FrameRate): number {
  const { num, den } = exactRate(rate)
  return Number((2n * num + den) / (2n * den)) || 1
}

function exactRate(rate: FrameRate): { num: bigint, den: bigint } {
  if (!Number.isSafeInteger(rate.num) || !Number.isSafeInteger(rate.den) || rate.num <= 0 || rate.den <= 0) {
    throw badInput(`${rate.num}/${rate.den} is not a frame rate. It is a fraction of two whole numbers above 0, such as 30000/1001.`)
  }
  return { num: BigInt(rate.num), den: BigInt(rate.den) }
}

function whole(value: number, what: string): bigint {
  if (!Number.isSafeInteger(value) || value < 0) throw badInput(`${value} is not a ${what}: it must be a whole number from 0 on.`)
  return BigInt(value)
}

function badInput(message: string): DomainError {
  return new DomainError('bad-input', message)
}
