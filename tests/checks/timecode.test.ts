import { createRequire } from 'node:module'
import { describe, expect, it } from 'vitest'
import { frameToTimecode, timecodeToFrame, type FrameRate } from '#shared/utils/timecode'

// Outside sources: smpte-timecode 1.3.6 from npm (MIT), and the frame ↔ timecode pairs of OpenTimelineIO's tests
// (github.com/AcademySoftwareFoundation/OpenTimelineIO, tests/test_opentime.py at
// bc5fe2d78dc3f8b2a8feb7e04483d85a12e80072, Apache-2.0), which agree with SMPTE ST 12-1.

const NTSC: FrameRate = { num: 30_000, den: 1001 }

const DROP_PAIRS: [number, string][] = [
  [0, '00:00:00;00'], [1, '00:00:00;01'], [2, '00:00:00;02'], [3, '00:00:00;03'],
  [1799, '00:00:59;29'], [1800, '00:01:00;02'], [1801, '00:01:00;03'], [1802, '00:01:00;04'],
  [1803, '00:01:00;05'], [8991, '00:04:59;29'], [8992, '00:05:00;02'], [8993, '00:05:00;03'],
  [8994, '00:05:00;04'], [8995, '00:05:00;05'], [12587, '00:06:59;29'], [12588, '00:07:00;02'],
  [12589, '00:07:00;03'], [12590, '00:07:00;04'], [12591, '00:07:00;05'], [17981, '00:09:59;29'],
  [17982, '00:10:00;00'], [17983, '00:10:00;01'], [17984, '00:10:00;02'], [17985, '00:10:00;03'],
  [215783, '01:59:59;29'], [215784, '02:00:00;00'], [215785, '02:00:00;01'], [215786, '02:00:00;02'],
  [215787, '02:00:00;03'], [269729, '02:29:59;29'], [269730, '02:30:00;00'], [269731, '02:30:00;01'],
  [269732, '02:30:00;02'], [269733, '02:30:00;03'], [1078919, '09:59:59;29'], [1078920, '10:00:00;00'],
  [1078921, '10:00:00;01'], [1078922, '10:00:00;02'], [1078923, '10:00:00;03'], [1084315, '10:02:59;29'],
  [1084316, '10:03:00;02'], [1084317, '10:03:00;03'], [1084318, '10:03:00;04'], [1084319, '10:03:00;05'],
  [10789, '00:05:59;29'], [10790, '00:06:00;02'],
]

const NON_DROP_PAIRS: [number, string][] = [
  [10789, '00:05:59:19'], [10790, '00:05:59:20'], [17981, '00:09:59:11'], [17982, '00:09:59:12'],
  [17983, '00:09:59:13'], [17984, '00:09:59:14'], [1084319, '10:02:23:29'],
]

describe('published values at 30000/1001', () => {
  it('17982 frames are ten minutes, 1800 frames the first after a dropped pair', () => {
    expect(frameToTimecode(17_982, NTSC, { drop: true })).toBe('00:10:00;00')
    expect(frameToTimecode(1800, NTSC, { drop: true })).toBe('00:01:00;02')
  })

  it.each(DROP_PAIRS)('frame %d is %s', (frame, timecode) => {
    expect(frameToTimecode(frame, NTSC, { drop: true })).toBe(timecode)
    expect(timecodeToFrame(timecode, NTSC)).toBe(frame)
  })

  it.each(NON_DROP_PAIRS)('frame %d is %s without dropping', (frame, timecode) => {
    expect(frameToTimecode(frame, NTSC)).toBe(timecode)
    expect(timecodeToFrame(timecode, NTSC)).toBe(frame)
  })
})

interface SmpteTimecode { frameCount: number, toString(): string }
const Timecode = createRequire(import.meta.url)('smpte-timecode') as new (value: number | string, rate: [number, number], drop: boolean) => SmpteTimecode

const RATES: [number, number, boolean][] = [
  [24_000, 1001, false], [24, 1, false], [25, 1, false], [30_000, 1001, false], [30_000, 1001, true], [30, 1, false],
  [50, 1, false], [60_000, 1001, false], [60_000, 1001, true], [60, 1, false],
]

describe('smpte-timecode', () => {
  it.each(RATES)('agrees at %d/%d, drop %s', (num, den, drop) => {
    const rate = { num, den }
    const fps = Math.round(num / den)
    const frames = new Set<number>()
    // Round every minute of the first 21 and round every tenth of a day, and strides in between.
    for (let minute = 0; minute <= 21; minute++) for (let near = -5; near <= 5; near++) frames.add(minute * 60 * fps + near)
    for (let frame = 0; frame < fps * 86_000; frame += 9973) frames.add(frame)
    for (const frame of frames) {
      if (frame < 0) continue
      const theirs = new Timecode(frame, [num, den], drop).toString()
      expect(frameToTimecode(frame, rate, { drop }), `frame ${frame}`).toBe(theirs)
      expect(timecodeToFrame(theirs, rate)).toBe(new Timecode(theirs, [num, den], drop).frameCount)
    }
  })
})
