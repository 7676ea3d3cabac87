import { describe, expect, it } from 'vitest'
import { compareFileNames, recordedAtFromName } from '#shared/utils/clipNames'

describe('recordedAtFromName', () => {
  it.each<[string, string | null]>([
    ['VID_20260314_101530.mp4', '2026-03-14T10:15:30'],
    ['20260314_101530.mp4', '2026-03-14T10:15:30'],
    ['PXL_20260314_101530123.mp4', '2026-03-14T10:15:30.123'],
    ['PXL_20260314_101530123.TS.mp4', '2026-03-14T10:15:30.123'],
    ['20260314101530.mov', '2026-03-14T10:15:30'],
    ['20260314T101530Z.mov', '2026-03-14T10:15:30'],
    ['2026-03-14 10.15.30.mov', '2026-03-14T10:15:30'],
    ['2026-03-14 at 10.15.30.mov', '2026-03-14T10:15:30'],
    ['2026-03-14_10-15-30.mkv', '2026-03-14T10:15:30'],
    ['2026-03-14T10:15:30.mp4', '2026-03-14T10:15:30'],
    ['2026_0314_101530_001.mp4', null],
    ['shop 2026.03.14-10h15m30 left.mp4', '2026-03-14T10:15:30'],
    ['take 7 20260314_101530 (2).mp4', '2026-03-14T10:15:30'],
    ['99999999_999999 20260314_101530.mp4', '2026-03-14T10:15:30'],
    ['20240229_000000.mp4', '2024-02-29T00:00:00'],
    ['20260229_101530.mp4', null],
    ['20261314_101530.mp4', null],
    ['20260314_251530.mp4', null],
    ['20260314_106030.mp4', null],
    ['18990314_101530.mp4', null],
    ['20260314.mp4', null],
    ['1234567890123456789.mp4', null],
    ['IMG_0042.MOV', null],
    ['', null],
  ])('%s → %s', (name, expected) => {
    expect(recordedAtFromName(name)).toBe(expected)
  })
})

describe('compareFileNames', () => {
  it('counts as people do', () => {
    const names = ['clip 10.mp4', 'Clip 2.mp4', 'clip 2.mp4', 'clip 1.mp4', 'b.mp4', 'a10b2.mp4', 'a2b10.mp4', 'a2b9.mp4']
    expect(names.sort(compareFileNames)).toEqual(['a2b9.mp4', 'a2b10.mp4', 'a10b2.mp4', 'b.mp4', 'clip 1.mp4', 'Clip 2.mp4', 'clip 2.mp4', 'clip 10.mp4'])
  })

  it('tells any two names apart', () => {
    expect(compareFileNames('a1', 'a01')).not.toBe(0)
    expect(compareFileNames('a', 'a')).toBe(0)
  })
})
