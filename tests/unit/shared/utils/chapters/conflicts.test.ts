import { describe, expect, it } from 'vitest'
import type { ChapterView } from '#shared/types/session'
import { mark, remove, retag } from '#shared/utils/chapters/edits'
import { alreadyDone, cuttingBack, overTheirs } from '#shared/utils/chapters/conflicts'
import { changeWords, lengthWords } from '#shared/utils/chapters/words'
import type { StepView } from '#shared/types/plan'

let serial = 0
const newId = () => `new-${++serial}`
const chapter = (id: string, startMs: number, endMs: number, more: Partial<ChapterView> = {}): ChapterView => ({
  id, clipId: 'clip', startMs, endMs, stepId: 'step', operation: 'glue', partIds: [], inking: 'inked', confidence: null, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null, ...more,
})

describe('mine over theirs', () => {
  it('names the version as it now is', () => {
    const edit = retag(chapter('a', 0, 5000), { operation: 'cut' })
    expect(overTheirs(edit, { current: [chapter('a', 0, 4000, { version: 5 })], gone: [] }).put).toMatchObject([{ id: 'a', endMs: 5000, operation: 'cut', version: 5 }])
  })
  it('makes again what was deleted, and does not delete it twice', () => {
    expect(overTheirs(retag(chapter('a', 0, 5000), { operation: 'cut' }), { current: [], gone: ['a'] }).put[0]).toMatchObject({ id: 'a', version: null })
    expect(overTheirs(remove(chapter('a', 0, 5000)), { current: [], gone: ['a'] }).remove).toEqual([])
  })
})

describe('an answer that was lost on the way', () => {
  const edit = mark([chapter('a', 0, 5000)], 'clip', 2000, 4000, { stepId: 's', operation: 'cut', partIds: ['p', 'q'] }, newId)
  const standing = edit.put.map(put => chapter(put.id, put.startMs, put.endMs, { ...put, version: 2, partIds: [...put.partIds].reverse() }))
  it('is recognised when everything stands as wanted', () => {
    expect(alreadyDone(edit, { current: standing, gone: [] })).toBe(true)
  })
  it('is not when anything differs', () => {
    expect(alreadyDone(edit, { current: standing.map(one => ({ ...one, note: 'theirs' })), gone: [] })).toBe(false)
    expect(alreadyDone(edit, { current: standing.slice(1), gone: [] })).toBe(false)
    expect(alreadyDone(remove(chapter('a', 0, 5000)), { current: [chapter('a', 0, 5000, { version: 2 })], gone: [] })).toBe(false)
  })
})

describe('cutting back', () => {
  const edit = mark([], 'clip', 4000, 6000, { stepId: 's', operation: 'cut', partIds: [] }, newId)
  const spans = (other: ChapterView) => cuttingBack(edit, [other], newId).put.filter(put => put.id !== edit.put[0]!.id).map(put => [put.startMs, put.endMs])
  it('shortens from either side and parts what stands round it', () => {
    expect(spans(chapter('x', 1000, 5000))).toEqual([[1000, 4000]])
    expect(spans(chapter('x', 5000, 9000))).toEqual([[6000, 9000]])
    expect(spans(chapter('x', 1000, 9000))).toEqual([[1000, 4000], [6000, 9000]])
  })
  it('removes what would be too short to see', () => {
    expect(cuttingBack(edit, [chapter('x', 3900, 6100)], newId).remove.map(one => one.id)).toEqual(['x'])
  })
  it('leaves other clips alone', () => {
    expect(spans(chapter('x', 1000, 9000, { clipId: 'other' }))).toEqual([[1000, 9000]])
  })
})

describe('what others did, in words', () => {
  const steps = [{ id: 'step', number: 7 }, { id: 'two', number: 2 }] as StepView[]
  const words = (before: ChapterView[], after: ChapterView[], ids: string[]) => changeWords(before, after, new Set(ids), steps)
  it('says who marked what', () => {
    expect(words([], [chapter('a', 0, 1000, { updatedBy: 'Ivo' })], ['a'])).toBe('Ivo marked step 7, glue')
  })
  it.each([
    [{ operation: 'cut' as const }, 'Ivo retagged as step 7, cut'],
    [{ endMs: 900 }, 'Ivo moved an edge of step 7, glue'],
    [{ note: 'x' }, 'Ivo changed step 7, glue'],
  ])('tells changes apart: %j', (change, line) => {
    expect(words([chapter('a', 0, 1000)], [chapter('a', 0, 1000, { ...change, version: 2, updatedBy: 'Ivo' })], ['a'])).toBe(line)
  })
  it('tells of a deletion, and counts the rest of one action', () => {
    expect(words([chapter('a', 0, 1000)], [], ['a'])).toBe('Somebody deleted step 7, glue')
    expect(words([chapter('a', 0, 1000)], [chapter('a', 0, 500, { version: 2, updatedBy: 'Ivo' }), chapter('b', 500, 1000, { stepId: 'two', updatedBy: 'Ivo' })], ['a', 'b'])).toBe('Ivo marked step 2, glue, and 1 more change')
  })
  it('says nothing when nothing differs', () => {
    expect(words([chapter('a', 0, 1000)], [chapter('a', 0, 1000)], ['a', 'gone'])).toBeNull()
  })
})

describe('lengths', () => {
  it.each([[1200, '1.2 s'], [32_000, '32 s'], [59_900, '1 min 00 s'], [245_000, '4 min 05 s'], [3_720_000, '1 h 02 min']])('%i ms is %s', (ms, words) => {
    expect(lengthWords(ms)).toBe(words)
  })
})
