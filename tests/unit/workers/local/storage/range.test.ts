import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { capForMedia, isMediaElement, isPortioned, parseRange } from '../../../../../workers/local/storage/range'

const part = (start: number, end: number, openEnded = false) => ({ kind: 'part', start, end, openEnded })

describe('parseRange', () => {
  it.each([
    [undefined, { kind: 'whole' }],
    ['bytes=0-0', part(0, 0)],
    ['bytes=0-99', part(0, 99)],
    ['bytes=0-', part(0, 99, true)],
    ['bytes=40-', part(40, 99, true)],
    ['bytes=99-99', part(99, 99)],
    ['bytes=10-1000', part(10, 99)],
    ['bytes=-1', part(99, 99)],
    ['bytes=-30', part(70, 99)],
    ['bytes=-100', part(0, 99)],
    ['bytes=-5000', part(0, 99)],
    ['bytes=100-', { kind: 'unsatisfiable' }],
    ['bytes=100-200', { kind: 'unsatisfiable' }],
    ['bytes=-0', { kind: 'unsatisfiable' }],
    ['bytes=99999999999999999999999-', { kind: 'unsatisfiable' }],
    ['bytes=7-3', { kind: 'whole' }],
    ['bytes=0-1,5-6', { kind: 'whole' }],
    ['bytes=-', { kind: 'whole' }],
    ['bytes=a-b', { kind: 'whole' }],
    ['bytes=1.5-2', { kind: 'whole' }],
    ['items=0-5', { kind: 'whole' }],
    ['', { kind: 'whole' }],
  ])('reads %s of 100 bytes', (header, expected) => {
    expect(parseRange(header, 100)).toEqual(expected)
  })

  it('finds nothing to send in an empty object', () => {
    for (const header of ['bytes=0-', 'bytes=0-0', 'bytes=-5']) expect(parseRange(header, 0)).toEqual({ kind: 'unsatisfiable' })
  })

  it('never leaves the object', () => {
    const text = fc.oneof(fc.nat().map(String), fc.constant(''), fc.bigInt({ min: 0n, max: 10n ** 25n }).map(String))
    fc.assert(fc.property(text, text, fc.nat({ max: 5000 }), (first, last, size) => {
      const range = parseRange(`bytes=${first}-${last}`, size)
      if (range.kind !== 'part') return
      expect(range.start).toBeGreaterThanOrEqual(0)
      expect(range.start).toBeLessThanOrEqual(range.end)
      expect(range.end).toBeLessThan(size)
    }))
  })
})

describe('portions for media elements', () => {
  const element = { 'sec-fetch-dest': 'video' }
  const open = parseRange('bytes=500-', 10_000)

  it('shorten what is asked for to the end', () => {
    expect(capForMedia(open, 1000)).toMatchObject({ start: 500, end: 1499 })
    expect(capForMedia(parseRange('bytes=9900-', 10_000), 1000)).toMatchObject({ start: 9900, end: 9999 })
  })

  it.each(['bytes=500-9000', 'bytes=-9000', 'bytes=10000-', undefined])('leave %s as it is', (header) => {
    const range = parseRange(header, 10_000)
    expect(capForMedia(range, 1000)).toEqual(range)
  })

  it.each([
    [true, 'a video element', element, 'video/mp4', 1000],
    [true, 'an audio element', { 'sec-fetch-dest': 'audio' }, 'audio/mpeg', 1000],
    [false, 'a program', {}, 'video/mp4', 1000],
    [false, 'fetch()', { 'sec-fetch-dest': 'empty' }, 'video/mp4', 1000],
    [false, 'a picture', element, 'image/jpeg', 1000],
    [false, 'a cap that is off', element, 'video/mp4', 0],
  ])('are given (%s) to %s', (expected, _, headers, type, cap) => {
    expect(isPortioned(headers, type, cap)).toBe(expected)
  })

  it('knows a media element without fetch metadata by its codings', () => {
    const browser = { 'accept-encoding': 'identity;q=1, *;q=0', 'user-agent': 'Mozilla/5.0 (X11; Linux x86_64)' }
    expect(isMediaElement(browser)).toBe(true)
    expect(isMediaElement({ ...browser, 'user-agent': 'Lavf/59.27.100' })).toBe(false)
    expect(isMediaElement({ ...browser, 'sec-fetch-dest': 'empty' })).toBe(false)
  })
})
