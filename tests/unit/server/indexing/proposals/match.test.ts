import { describe, expect, it } from 'vitest'
import fc from 'fast-check'
import { besideWalls, matchMoments, matchStretches } from '#server/indexing/proposals/match'

const stretch = (id: string, startMs: number, endMs: number, what = 'x', clipId = 'c') => ({ id, clipId, startMs, endMs, what })
const same = (a: { what: string }, b: { what: string }) => a.what === b.what

describe('proposals in the place of earlier ones', () => {
  it('keep their row where they cover it, the same work before other work', () => {
    const { standing, added, gone } = matchStretches([stretch('a', 0, 10, 'glue'), stretch('b', 10, 30, 'cut')], [stretch('', 0, 12, 'glue'), stretch('', 12, 20, 'glue'), stretch('', 20, 30, 'cut')], same)
    expect(standing.map(({ old, fresh }) => [old.id, fresh.startMs]).sort()).toEqual([['a', 0], ['b', 20]])
    expect(added.map(one => one.startMs)).toEqual([12])
    expect(gone).toEqual([])
  })

  it('of another clip are others', () => {
    const { standing, added, gone } = matchStretches([stretch('a', 0, 10)], [stretch('', 0, 10, 'x', 'other')], same)
    expect([standing.length, added.length, gone.length]).toEqual([0, 1, 1])
  })

  it('name each earlier and each new one exactly once, and stay when nothing has changed', () => {
    const runs = fc.array(fc.tuple(fc.integer({ min: 0, max: 50 }), fc.integer({ min: 1, max: 20 })), { maxLength: 8 })
      .map(list => list.map(([startMs, length], n) => stretch(String(n), startMs, startMs + length)))
    fc.assert(fc.property(runs, runs, (earlier, fresh) => {
      const { standing, added, gone } = matchStretches(earlier, fresh, same)
      expect(new Set([...standing.map(one => one.old), ...gone]).size).toBe(earlier.length)
      expect(standing.length + gone.length).toBe(earlier.length)
      expect(standing.length + added.length).toBe(fresh.length)
    }))
    const list = [stretch('a', 0, 10), stretch('b', 10, 20)]
    expect(matchStretches(list, list, same).standing.every(({ old, fresh }) => old === fresh)).toBe(true)
  })
})

describe('what people have made', () => {
  it('is a wall that proposals are cut at; scraps are left out', () => {
    const cut = besideWalls([stretch('a', 0, 100)], [stretch('w', 30, 50), stretch('v', 55, 90), stretch('u', 0, 100, 'x', 'other')], 10)
    expect(cut.map(one => [one.startMs, one.endMs])).toEqual([[0, 30], [90, 100]])
  })
})

describe('what is said at a moment', () => {
  const said = (id: string, atMs: number, what: string, proposed = true) => ({ id, clipId: 'c', atMs, what, proposed })

  it('keeps its row when a corrected caption has moved it a little', () => {
    const { standing, added, gone } = matchMoments([said('a', 1000, '3/8')], [said('', 1900, '3/8'), said('', 9000, '3/8')], same)
    expect(standing.map(({ old }) => old.id)).toEqual(['a'])
    expect(added.map(one => one.atMs)).toEqual([9000])
    expect(gone).toEqual([])
  })

  it('stays as a person left it, and is not said again beside that', () => {
    const { standing, added, gone } = matchMoments([said('mended', 1000, '3/8', false), said('old', 1200, '1/2')], [said('', 1000, '3/8')], same)
    expect([standing, added]).toEqual([[], []])
    expect(gone.map(one => one.id)).toEqual(['old'])
  })

  it('said twice within one breath is two facts, one of which may be touched', () => {
    const { standing, added } = matchMoments([said('mended', 1000, '3/8', false), said('own', 1500, '3/8')], [said('', 1000, '3/8'), said('', 1500, '3/8')], same)
    expect(standing.map(({ old }) => old.id)).toEqual(['own'])
    expect(added).toEqual([])
  })
})
