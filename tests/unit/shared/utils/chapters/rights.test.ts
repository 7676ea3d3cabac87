import { describe, expect, it } from 'vitest'
import { forbiddenIn, forbiddenWords, mayChange } from '#shared/utils/chapters/rights'
import type { ChapterView } from '#shared/types/session'

const chapter = (id: string, more: Partial<ChapterView> = {}): ChapterView => ({
  id, clipId: 'clip', startMs: 0, endMs: 1000, stepId: null, operation: 'glue', partIds: [], inking: 'inked', confidence: null, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null, ...more,
})
const own = chapter('own', { inkedBy: { id: 'me', name: 'Wren' } })
const theirs = chapter('theirs', { inkedBy: { id: 'other', name: 'Maud' } })
const nobodys = chapter('nobodys')
const pencilled = chapter('pencilled', { inking: 'pencilled' })

describe('who may change a chapter', () => {
  it.each([
    ['builder' as const, [own, theirs, nobodys, pencilled]], ['crew' as const, [own, pencilled]], ['follower' as const, []], [null, []],
  ])('%s', (role, allowed) => {
    expect([own, theirs, nobodys, pencilled].filter(one => mayChange(one, { id: 'me', role }))).toEqual(allowed)
  })
  it('an account that is not known owns nothing', () => {
    expect(mayChange(nobodys, { id: undefined, role: 'crew' })).toBe(false)
  })
})

it('finds what an edit would change against the rule, and says whose it is', () => {
  const edit = { put: [{ id: 'own' }, { id: 'new' }, { id: 'theirs' }], remove: [{ id: 'pencilled' }] }
  const found = forbiddenIn(edit, [own, theirs, pencilled, nobodys], { id: 'me', role: 'crew' })
  expect(found).toEqual([theirs])
  expect(forbiddenWords(theirs)).toContain('Maud has inked this chapter')
  expect(forbiddenWords(nobodys)).toContain('only the builder')
})
