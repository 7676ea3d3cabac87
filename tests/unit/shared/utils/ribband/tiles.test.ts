import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { layTiles, tileAt } from '#shared/utils/ribband/tiles'

const sheets = (count: number, intervalMs = 5000, columns = 4, rows = 3) => ({
  tileWidth: 160, tileHeight: 90, columns, rows, count,
  timesMs: Array.from({ length: count }, (_, n) => n * intervalMs),
  images: Array.from({ length: Math.ceil(count / (columns * rows)) }, (_, n) => `sheet${n}`),
})

describe('tileAt', () => {
  it('finds the picture nearest in time and its place in the sheets', () => {
    expect(tileAt(sheets(30), 66_000)).toEqual({ index: 13, image: 1, x: 160, y: 0, width: 160, height: 90, atMs: 65_000 })
    expect(tileAt(sheets(30), 67_600)!.index).toBe(14)
  })

  it('uses true times, not the interval', () => {
    expect(tileAt({ ...sheets(3), timesMs: [0, 8300, 9000] }, 8700)!.index).toBe(2)
  })

  it('has none without pictures, and none for pictures whose image is missing', () => {
    expect(tileAt(sheets(0), 5)).toBeNull()
    expect(tileAt({ ...sheets(30), images: ['sheet0'] }, 140_000)!.index).toBe(11)
  })

  it('always lies within its image, and its image among the images', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 500 }), fc.integer({ min: 1, max: 16 }), fc.integer({ min: 1, max: 15 }), fc.integer({ min: -1000, max: 3_000_000 }), (count, columns, rows, at) => {
      const given = sheets(count, 5000, columns, rows)
      const tile = tileAt(given, at)!
      expect(given.images[tile.image]).toBeDefined()
      expect(tile.x + tile.width).toBeLessThanOrEqual(columns * 160)
      expect(tile.y + tile.height).toBeLessThanOrEqual(rows * 90)
      expect(tile.index).toBeLessThan(count)
    }))
  })
})

describe('layTiles', () => {
  it('lays one picture a slot, counted from the clip’s start', () => {
    const laid = layTiles(sheets(100), 21_000, 61_000, 20_000)
    expect(laid.map(one => [one.fromMs, one.toMs, one.tile.atMs])).toEqual([[20_000, 40_000, 30_000], [40_000, 60_000, 50_000], [60_000, 80_000, 70_000]])
  })

  it('lays each picture once at its own time when slots are finer than pictures', () => {
    const laid = layTiles(sheets(100), 7000, 16_000, 1000)
    expect(laid.map(one => [one.fromMs, one.toMs])).toEqual([[5000, 6000], [10_000, 11_000], [15_000, 16_000]])
  })

  it('covers what is asked for without gaps while pictures are closer than slots', () => {
    fc.assert(fc.property(fc.nat(400_000), fc.integer({ min: 1, max: 100_000 }), fc.integer({ min: 5001, max: 50_000 }), (from, length, slot) => {
      const laid = layTiles(sheets(100), from, from + length, slot)
      expect(laid[0]!.fromMs).toBeLessThanOrEqual(from)
      expect(laid.at(-1)!.toMs).toBeGreaterThanOrEqual(from + length)
      for (let index = 1; index < laid.length; index++) expect(laid[index]!.fromMs).toBe(laid[index - 1]!.toMs)
    }))
  })

  it('is empty where nothing can be laid', () => {
    expect([layTiles(sheets(0), 0, 10, 5), layTiles(sheets(5), 10, 10, 5), layTiles(sheets(5), 0, 10, 0)]).toEqual([[], [], []])
  })
})
