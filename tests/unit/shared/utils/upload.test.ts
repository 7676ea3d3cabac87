import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fingerprintRanges, formatBytes, MAX_CLIP_BYTES, partRange, planParts } from '#shared/utils/upload'

const MIB = 1024 * 1024

describe('cutting a file into parts', () => {
  it('keeps within what S3 allows, and covers the file without gap or overlap', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: MAX_CLIP_BYTES }), (size) => {
      const { partSizeBytes, partCount } = planParts(size)
      expect(partSizeBytes).toBeGreaterThanOrEqual(8 * MIB)
      expect(partCount).toBeLessThanOrEqual(10_000)
      expect(partRange(size, partSizeBytes, 1).start).toBe(0)
      expect(partRange(size, partSizeBytes, partCount).end).toBe(size)
      const middle = Math.ceil(partCount / 2)
      if (middle < partCount) expect(partRange(size, partSizeBytes, middle).end).toBe(partRange(size, partSizeBytes, middle + 1).start)
    }))
  })

  it.each([
    [1, 8 * MIB, 1],
    [8 * MIB, 8 * MIB, 1],
    [8 * MIB + 1, 8 * MIB, 2],
    [1024 * MIB, 8 * MIB, 128],
    [MAX_CLIP_BYTES, 32 * MIB, 1491],
  ])('%i bytes: parts of %i, %i of them', (size, partSizeBytes, partCount) => {
    expect(planParts(size)).toEqual({ partSizeBytes, partCount })
  })

  it('refuses an empty file and one above 50 GB, in words', () => {
    expect(() => planParts(0)).toThrow('The file is empty')
    expect(() => planParts(MAX_CLIP_BYTES + 1)).toThrow('50 GB at most')
    expect(() => planParts(1.5)).toThrow('whole number')
  })
})

describe('samples for a fingerprint', () => {
  it('takes small files whole and a bounded amount of large ones, first and last bytes included', () => {
    expect(fingerprintRanges(0)).toEqual([])
    expect(fingerprintRanges(1000)).toEqual([{ start: 0, end: 1000 }])
    fc.assert(fc.property(fc.integer({ min: MIB + 1, max: MAX_CLIP_BYTES }), (size) => {
      const ranges = fingerprintRanges(size)
      expect(ranges[0]!.start).toBe(0)
      expect(ranges.at(-1)!.end).toBe(size)
      expect(ranges.reduce((sum, { start, end }) => sum + end - start, 0)).toBe(MIB)
      expect(ranges.every(({ start, end }) => Number.isInteger(start) && end <= size)).toBe(true)
    }))
  })
})

it.each([[0, '0 bytes'], [1, '1 byte'], [999, '999 bytes'], [1500, '1.5 kB'], [12_345_678, '12 MB'], [999_900_000, '1.0 GB'], [50_000_000_000, '50 GB']])('%i bytes reads %s', (bytes, words) => {
  expect(formatBytes(bytes)).toBe(words)
})
