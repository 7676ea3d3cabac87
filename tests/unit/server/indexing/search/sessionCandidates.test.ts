import { describe, expect, it } from 'vitest'
import type { PencilledChapter } from '#server/indexing/pencil/types'
import { smooth, spread } from '#server/indexing/search/rank'
import { answersIn, searchableSession } from '#server/indexing/search/sessionCandidates'
import { answerFigures, tallyAnswers } from '../../../../measure/indexing/questions'

const step = (number: number, title: string, description: string) => ({ number, stage: '', title, description, parts: [], materials: [] })
const STEPS = [step(1, 'Steam the ribs', 'Bend them hot over the former.'), step(2, 'Hang the rudder', 'Bolt the pintles to the blade.')]
const lines = (texts: string[], from: number) => texts.map((text, i) => ({ startMs: from + i * 2500, endMs: from + i * 2500 + 2400, text }))
const chapter = (startMs: number, endMs: number, number: number): PencilledChapter => ({ clip: 0, startMs, endMs, step: number, operation: 'shape', parts: [], confidence: 0.9, evidence: [], otherSteps: [], otherOperations: [], fixed: false })
const CLIPS = [{ cues: [
  ...lines(['now this comes out of the box', 'and it goes round in one go', 'you have ten seconds for it', 'and hold it there'], 0),
  ...lines(['next I put two through here', 'with a big washer on each', 'because it takes all the load', 'and that is on'], 60_000),
] }]
const session = searchableSession(STEPS, [], CLIPS, [chapter(0, 60_000, 1), chapter(60_000, 80_000, 2)])

describe('a session that is asked', () => {
  it('finds by the plan what nobody says by its name', () => {
    expect(answersIn(session, 'how are the ribs bent')[0]).toMatchObject({ clip: 0, step: 1 })
    expect(answersIn(session, 'how is the rudder attached')[0]).toMatchObject({ clip: 0, step: 2 })
  })
  it('begins an answer with the line that says it', () => expect(answersIn(session, 'how big is the washer')[0]).toMatchObject({ startMs: 62_500 }))
  it('counts passages as the site does', () => expect(session.frequencies).toMatchObject({ passages: 2 }))
})

it('answers that lie seconds apart are one', () => {
  const moment = (clipId: string, atMs: number) => ({ candidate: { clipId }, atMs }) as Parameters<typeof spread>[0][number]
  expect(spread([moment('a', 0), moment('a', 19_000), moment('b', 1_000), moment('a', 20_000)]).map(one => one.atMs)).toEqual([0, 1_000, 20_000])
})

it('lines speak for lines near them, and scores of any size stay numbers', () => {
  const [first, second, far] = smooth([0, 4_000, 90_000], Float64Array.of(1, 1, 1))
  expect(first).toBeCloseTo(1 + Math.log(1 + 1 - 4 / 18), 10)
  expect(second).toBeCloseTo(first!, 10)
  expect(far).toBe(1)
  expect([...smooth([0, 1_000], Float64Array.of(500, -500))].every(Number.isFinite)).toBe(true)
})

it('right answers are counted from 5 s before the true span to its end', () => {
  const tally = tallyAnswers([{ startMs: 10_000, endMs: 20_000 }, { startMs: 0, endMs: 1 }, { startMs: 50_000, endMs: 60_000 }], [[5_000], [30_000, 40_000, 1], [4_999]])
  expect(answerFigures([tally])).toEqual({ asked: 3, first: 1 / 3, firstThree: 2 / 3, mrr: (1 + 1 / 3) / 3 })
})
