import { describe, expect, it } from 'vitest'
import { f1, matchFacts, matchTold } from '../../../measure/indexing/matching'
import { figuresOf, tallyChapters } from '../../../measure/indexing/score'
import type { Truth } from '../../../measure/indexing/load'

const truth = (values: Partial<Truth>): Truth => ({ durationMs: 40_000, chapters: [], offCamera: [], facts: [], questions: [], ...values })
const chapter = (startMs: number, endMs: number, step: number | null, operation: Truth['chapters'][number]['operation']) => ({ startMs, endMs, step, operation, parts: [] })

describe('time with the right step and operation', () => {
  const session = truth({ chapters: [chapter(0, 10_000, null, 'none'), chapter(10_000, 30_000, 1, 'glue'), chapter(30_000, 40_000, null, 'plan-talk')] })

  it('is all of it when all is right', () => {
    expect(figuresOf([tallyChapters(session, session.chapters)])).toEqual({ stepTime: 1, operationTime: 1, noneF1: 1, windowDiff: 0 })
  })
  it('is the share of half seconds', () => {
    const tally = tallyChapters(session, [chapter(0, 15_000, null, 'none'), chapter(15_000, 40_000, 1, 'glue')])
    // Step 1 from 10 to 30 s: 40 half seconds, 30 of them right. Work and talk from 10 to 40 s: 60, of which 30.
    expect(tally).toMatchObject({ onStep: 40, onStepOk: 30, onOperation: 60, onOperationOk: 30, noneRight: 20, noneWrong: 10, noneMissed: 20 })
    expect(figuresOf([tally])).toMatchObject({ stepTime: 0.75, operationTime: 0.5, noneF1: 40 / 70 })
  })
  it('is nothing where nothing is proposed, and adds up over sessions', () => {
    const none = tallyChapters(session, [])
    expect(figuresOf([none])).toMatchObject({ stepTime: 0, operationTime: 0 })
    expect(figuresOf([none, tallyChapters(session, session.chapters)])).toMatchObject({ stepTime: 0.5, operationTime: 0.5 })
    expect(figuresOf([])).toEqual({ stepTime: 0, operationTime: 0, noneF1: 0, windowDiff: 0 })
  })
})

describe('facts and told places', () => {
  const fact = (atMs: number, value: number | null, unit: 'mm' | null = 'mm') => ({ atMs, value, unit, kind: unit ? 'length' as const : 'adhesive' as const, text: 'x', step: null, clip: 0 })
  const wanted = truth({ facts: [fact(10_000, 100), fact(12_000, 100), fact(30_000, null, null)] })

  it('are found near their place with unit and value right, each once', () => {
    expect(matchFacts(wanted, [fact(15_000, 100.9), fact(38_000, null, null)])).toEqual({ right: 2, wanted: 3, found: 2 })
    expect(matchFacts(wanted, [fact(20_001, 100), fact(10_000, 102), fact(10_000, null, null)])).toEqual({ right: 0, wanted: 3, found: 3 })
  })
  it('are told places within 15 s', () => {
    const session = truth({ offCamera: [{ atMs: 20_000, step: 1 }] })
    expect(matchTold(session, [{ clip: 0, atMs: 35_000, step: null, words: '' }, { clip: 0, atMs: 20_000, step: null, words: '' }])).toEqual({ right: 1, wanted: 1, found: 2 })
    expect(matchTold(session, [{ clip: 0, atMs: 35_001, step: null, words: '' }]).right).toBe(0)
  })
  it('come to twice the right ones over all wanted and found', () => {
    expect(f1([{ right: 1, wanted: 1, found: 2 }, { right: 1, wanted: 3, found: 2 }])).toBe(0.5)
    expect(f1([])).toBe(0)
  })
})
