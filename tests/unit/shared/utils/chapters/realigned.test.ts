import { describe, expect, it } from 'vitest'
import type { ChapterView } from '#shared/types/session'
import { confidenceWords, nearlyCertain } from '#shared/utils/chapters/confidence'
import { inverse, mark, moveEdge, remove, retag, split } from '#shared/utils/chapters/edits'
import { asChanges } from '#shared/utils/chapters/history'
import { realignedWords } from '#shared/utils/chapters/realigned'

const chapter = (id: string, startMs: number, endMs: number, more: Partial<ChapterView> = {}): ChapterView => ({
  id, clipId: 'clip', startMs, endMs, stepId: 'seven', operation: 'glue', partIds: [], inking: 'pencilled', confidence: 0.6, evidence: [], alternatives: { steps: [], operations: [] }, proposed: true, note: '', version: 1, inkedBy: null, updatedBy: null, ...more,
})
const steps = [{ id: 'seven', number: 7 }, { id: 'nine', number: 9 }]

describe('what has been aligned anew', () => {
  it('is told in one line', () => {
    const before = ['a', 'b', 'c', 'd', 'e'].map((id, n) => chapter(id, n * 10_000, n * 10_000 + 10_000))
    const after = [chapter('a', 0, 12_000), chapter('b', 12_000, 21_500), chapter('c', 21_500, 33_000), chapter('d', 33_000, 40_000, { stepId: 'nine' }), chapter('f', 40_000, 50_000)]
    expect(realignedWords(before, after, steps)).toBe('3 pencilled chapters moved, 1 is now step 9, 1 is new, 1 is gone')
  })

  it('names what it counts when nothing has moved', () => {
    expect(realignedWords([chapter('a', 0, 10_000)], [chapter('a', 0, 10_000, { operation: 'cut' })], steps)).toBe('1 pencilled chapter is now cut')
  })

  it('is nothing where nobody would see a difference, and what a person does is not of it', () => {
    expect(realignedWords([chapter('a', 0, 10_000)], [chapter('a', 0, 10_400, { confidence: 0.9 })], steps)).toBeNull()
    expect(realignedWords([chapter('a', 0, 10_000)], [chapter('a', 0, 5000, { inking: 'inked', proposed: false })], steps)).toBeNull()
  })
})

describe('the program\'s own in edits', () => {
  it('becomes a person\'s by retagging and by splitting, and stays the program\'s when it is only pushed or cut', () => {
    const [a, b] = [chapter('a', 0, 10_000), chapter('b', 10_000, 20_000)]
    expect(retag(a, { operation: 'cut' }).put[0]).toMatchObject({ proposed: false, overProposal: true, inking: 'inked' })
    expect(split(a, 5000, () => 'n')!.put.map(put => put.proposed)).toEqual([false, false])
    expect(moveEdge([a, b], a, 'end', 12_000, 20_000)!.put.map(put => put.proposed)).toEqual([false, true])
    expect(mark([a], 'clip', 2000, 4000, { stepId: null, operation: 'cut', partIds: [] }, () => 'n').put.map(put => put.proposed)).toEqual([true, true, false])
  })

  it('is left out of what is undone where the program has moved it since', () => {
    const [a, b] = [chapter('a', 0, 10_000), chapter('b', 10_000, 20_000)]
    const edit = moveEdge([a, b], a, 'end', 12_000, 20_000)!
    const after = new Map([['a', 2], ['b', 2]])
    const now = [chapter('a', 0, 12_000, { inking: 'inked', proposed: false, version: 2 }), chapter('b', 12_000, 17_000, { version: 3 })]
    expect(inverse(edit, [a, b], now, after)!.put.map(put => [put.id, put.endMs, put.proposed])).toEqual([['a', 10_000, true]])
    // Gone altogether, it stands in the way of nothing either.
    expect(inverse(edit, [a, b], now.slice(0, 1), after)!.put.map(put => put.id)).toEqual(['a'])
    // A person's hand on it since is another matter.
    expect(inverse(edit, [a, b], [now[0]!, chapter('b', 12_000, 17_000, { version: 3, proposed: false })], after)).toBeNull()
  })

  it('is dismissed by deleting it alone, and that is taken back and said again by undo and redo', () => {
    const a = chapter('a', 0, 10_000)
    const edit = remove(a)
    expect(asChanges(edit).remove).toEqual([{ id: 'a', version: 1, overProposal: true, dismiss: true }])
    const undo = inverse(edit, [a], [], new Map())!
    expect(undo).toMatchObject({ dismissal: 'takes-back', put: [{ id: 'a', proposed: true }] })
    expect(inverse(undo, [], [a], new Map([['a', 1]]))).toMatchObject({ dismissal: 'says', remove: [{ id: 'a' }] })
  })
})

describe('how sure the program is', () => {
  it('is said in words', () => {
    expect([0.95, 0.75, 0.5, 0.3, 0.1].map(confidenceWords)).toEqual(['almost certain', 'fairly sure', 'more likely than not', 'unsure', 'a guess'])
  })
  it('picks what may be inked in one go', () => {
    expect(nearlyCertain([chapter('a', 0, 1, { confidence: 0.9 }), chapter('b', 1, 2, { confidence: 0.89 }), chapter('c', 2, 3, { confidence: null, inking: 'inked' })]).map(one => one.id)).toEqual(['a'])
  })
})
