import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { ChapterView } from '#shared/types/session'
import { apply, edgeRange, inkedInTheWay, inverse, join, mark, moveEdge, retag, SHORTEST_CHAPTER_MS, split } from '#shared/utils/chapters/edits'

let serial = 0
const newId = () => `new-${++serial}`
const chapter = (id: string, startMs: number, endMs: number, more: Partial<ChapterView> = {}): ChapterView => ({
  id, clipId: 'clip', startMs, endMs, stepId: 'step', operation: 'glue', partIds: [], inking: 'inked', confidence: null, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null, ...more,
})
const tag = { stepId: 'other', operation: 'fasten' as const, partIds: [] }
const spans = (chapters: ChapterView[]) => chapters.map(one => [one.startMs, one.endMs])
const overlapping = (chapters: ChapterView[]) => chapters.some((a, i) => chapters.some((b, j) => i !== j && a.clipId === b.clipId && a.startMs < b.endMs && b.startMs < a.endMs))

describe('mark', () => {
  it('parts a chapter that stands round it', () => {
    const before = [chapter('a', 0, 10_000)]
    expect(spans(apply(before, mark(before, 'clip', 4000, 6000, tag, newId)))).toEqual([[0, 4000], [4000, 6000], [6000, 10_000]])
  })
  it('cuts neighbours back and removes what is wholly inside', () => {
    const before = [chapter('a', 0, 3000), chapter('b', 3000, 5000), chapter('c', 5000, 9000)]
    expect(spans(apply(before, mark(before, 'clip', 2000, 6000, tag, newId)))).toEqual([[0, 2000], [2000, 6000], [6000, 9000]])
  })
  it('leaves other clips alone', () => {
    const before = [chapter('a', 0, 3000, { clipId: 'other' })]
    expect(mark(before, 'clip', 0, 3000, tag, newId).put).toHaveLength(1)
  })
  it('names the inked chapters it would cut', () => {
    const before = [chapter('a', 0, 3000), chapter('b', 3000, 5000, { inking: 'pencilled' })]
    expect(inkedInTheWay(before, 'clip', 2000, 4000).map(one => one.id)).toEqual(['a'])
  })
})

describe('split and join', () => {
  it('come back to one chapter', () => {
    const before = [chapter('a', 0, 10_000, { note: 'clamped' })]
    const halves = apply(before, split(before[0]!, 4000, newId)!)
    expect(spans(halves)).toEqual([[0, 4000], [4000, 10_000]])
    const whole = apply(halves, join(halves, halves[0]!)!)
    expect(spans(whole)).toEqual([[0, 10_000]])
  })
  it('refuses to leave a sliver', () => {
    expect(split(chapter('a', 0, 10_000), 100, newId)).toBeNull()
  })
})

describe('moveEdge', () => {
  const before = [chapter('a', 0, 4000), chapter('b', 4000, 8000), chapter('c', 9000, 12_000)]
  it('takes a touching neighbour along', () => {
    expect(spans(apply(before, moveEdge(before, before[1]!, 'start', 3000, 12_000)!))).toEqual([[0, 3000], [3000, 8000], [9000, 12_000]])
  })
  it('leaves a neighbour across a gap until it is reached', () => {
    expect(spans(apply(before, moveEdge(before, before[1]!, 'end', 8500, 12_000)!))[1]).toEqual([4000, 8500])
    expect(spans(apply(before, moveEdge(before, before[1]!, 'end', 10_000, 12_000)!)).slice(1)).toEqual([[4000, 10_000], [10_000, 12_000]])
  })
  it('pushes a neighbour until it is as short as a chapter may be', () => {
    expect(edgeRange(before, before[1]!, 'start', 12_000)).toEqual({ min: SHORTEST_CHAPTER_MS, max: 8000 - SHORTEST_CHAPTER_MS })
    expect(edgeRange(before, before[1]!, 'end', 12_000)).toEqual({ min: 4000 + SHORTEST_CHAPTER_MS, max: 12_000 - SHORTEST_CHAPTER_MS })
    expect(spans(apply(before, moveEdge(before, before[1]!, 'start', -5, 12_000)!))[0]).toEqual([0, SHORTEST_CHAPTER_MS])
  })
  it('stops at a neighbour that may not be changed, and comes away from it alone', () => {
    const mayChange = (one: ChapterView) => one.id !== 'a'
    expect(edgeRange(before, before[1]!, 'start', 12_000, mayChange)).toEqual({ min: 4000, max: 8000 - SHORTEST_CHAPTER_MS })
    expect(moveEdge(before, before[1]!, 'start', 3000, 12_000, mayChange)).toBeNull()
    expect(moveEdge(before, before[1]!, 'start', 5000, 12_000, mayChange)!.put.map(one => one.id)).toEqual(['b'])
  })
  it('goes exactly as far as its range says, and stays where it has no room', () => {
    const cuts = fc.uniqueArray(fc.nat(20_000), { minLength: 4, maxLength: 12 }).map(list => list.sort((a, b) => a - b))
    fc.assert(fc.property(cuts, fc.nat(), fc.integer({ min: -500, max: 21_000 }), fc.constantFrom('start' as const, 'end' as const), (times, pick, at, edge) => {
      const list = Array.from({ length: times.length - 1 }, (_, i) => chapter(`${i}`, times[i]!, times[i + 1]!)).filter((_, i) => i % 3 !== 2)
      const one = list[pick % list.length]!
      const { min, max } = edgeRange(list, one, edge, 20_000)
      const after = apply(list, moveEdge(list, one, edge, at, 20_000) ?? { put: [], remove: [] })
      const moved = after.find(other => other.id === one.id)!
      expect(edge === 'start' ? moved.startMs : moved.endMs).toBe(Math.min(max, Math.max(min, at)))
      expect(overlapping(after)).toBe(false)
    }))
  })
  it('stops at the clip\'s end', () => {
    expect(moveEdge(before, before[2]!, 'end', 99_000, 12_500)!.put[0]!.endMs).toBe(12_500)
  })
})

it('takes the step away when a stretch shows no work', () => {
  expect(retag(chapter('a', 0, 1000, { inking: 'pencilled', confidence: 0.4 }), { operation: 'none' }).put[0]).toMatchObject({ stepId: null, operation: 'none', inking: 'inked', confidence: null })
})

describe('any run of edits', () => {
  const step = fc.record({ kind: fc.constantFrom('mark', 'split', 'join', 'start', 'end'), at: fc.integer({ min: 0, max: 60_000 }), length: fc.integer({ min: SHORTEST_CHAPTER_MS, max: 20_000 }), pick: fc.nat() })
  it('never overlaps, never leaves a sliver, and can be taken back', () => {
    fc.assert(fc.property(fc.array(step, { maxLength: 25 }), (steps) => {
      let now: ChapterView[] = []
      for (const { kind, at, length, pick } of steps) {
        const chosen = now[pick % (now.length || 1)]
        const edit = kind === 'mark' ? mark(now, 'clip', at, at + length, tag, newId)
          : !chosen ? null
              : kind === 'split' ? split(chosen, at, newId)
                : kind === 'join' ? join(now, chosen)
                  : moveEdge(now, chosen, kind as 'start' | 'end', at, 80_000)
        if (!edit) continue
        const before = now
        now = apply(now, edit).map(one => ({ ...one, version: one.version + (edit.put.some(put => put.id === one.id) ? 1 : 0) }))
        expect(overlapping(now)).toBe(false)
        expect(now.every(one => one.endMs - one.startMs >= SHORTEST_CHAPTER_MS)).toBe(true)
        const back = inverse(edit, before, now, new Map(now.map(one => [one.id, one.version])))!
        expect(spans(apply(now, back))).toEqual(spans(before))
      }
    }), { numRuns: 200 })
  })
})

it('does not take back what somebody else has changed since', () => {
  const before = [chapter('a', 0, 4000)]
  const edit = retag(before[0]!, { operation: 'cut' })
  expect(inverse(edit, before, [{ ...before[0]!, version: 3 }], new Map([['a', 2]]))).toBeNull()
})
