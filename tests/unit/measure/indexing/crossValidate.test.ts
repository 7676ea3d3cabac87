import { join } from 'node:path'
import { describe, expect, it } from 'vitest'
import { correctionsNeeded } from '../../../measure/indexing/corrections'
import { curveThrough, foldsOf, tickedSteps } from '../../../measure/indexing/crossValidate'
import { fit, lessonOf } from '../../../measure/indexing/fit'
import { type LabelledSession, loadSessions } from '../../../measure/indexing/load'
import { longSession } from '../../../measure/indexing/longSession'
import { clipOf, PARTS, PLAIN, STEPS, talk } from '../../server/indexing/pencil/support'

const cues = clipOf(talk(1, 2, 3, 4)).cues
const session: LabelledSession = {
  build: 'x', name: 'session-1', folder: '', steps: STEPS, parts: PARTS, cues,
  truth: { durationMs: 80_000, offCamera: [], facts: [], questions: [], chapters: [1, 2, 3, 4].map((step, i) => ({ startMs: i * 20_000, endMs: (i + 1) * 20_000, step, operation: (['glue', 'shape', 'shape', 'paint'] as const)[i]!, parts: [] })) },
}
const of = (build: string): LabelledSession => ({ ...session, build })

describe('folds', () => {
  it('never part a build, and leave none out', () => {
    expect(foldsOf(['a', 'a', 'b', 'c', 'd', 'e'].map(of), 4)).toEqual([['a', 'e'], ['b'], ['c'], ['d']])
    expect(foldsOf([of('a')], 4)).toEqual([['a']])
  })
})

describe('a curve through judged stretches', () => {
  const judged = (likelihood: number, right: number, seconds = 10) => ({ likelihood, right, seconds })
  it('rises, from nothing to nearly sure, and goes through means by time', () => {
    const curve = curveThrough([judged(0.2, 0.1), judged(0.5, 0.4), judged(0.9, 0.8)], 3)
    expect(curve).toEqual([[0, 0], [0.2, 0.1], [0.5, 0.4], [0.9, 0.8], [1, 0.97]])
  })
  it('pools neighbours that fall', () => {
    const curve = curveThrough([judged(0.2, 0.6), judged(0.4, 0.2), judged(0.8, 0.9)], 3)
    expect(curve[1]![0]).toBeCloseTo(0.3, 9)
    expect(curve[1]![1]).toBeCloseTo(0.4, 9)
    curve.slice(1).forEach(([x, y], i) => {
      expect(x).toBeGreaterThan(curve[i]![0])
      expect(y).toBeGreaterThanOrEqual(curve[i]![1])
    })
  })
})

describe('lessons', () => {
  it('have the true chapters as nodes and states', () => {
    const { material, truth } = lessonOf(session)
    expect(truth.map(({ i, j, step, kind }) => [material.nodes[i], material.nodes[j], step, kind])).toEqual([[0, 5, 0, 6], [5, 10, 1, 2], [10, 15, 2, 2], [15, 20, 3, 11]])
  })
  it('make the truth likelier with every round', () => {
    const lines: string[] = []
    fit([lessonOf(session)], {}, { rounds: 6, hold: 0.005, log: line => lines.push(line) })
    const likelihoods = lines.map(line => Number(line.split(' ').at(-1)))
    expect(likelihoods.length).toBe(6)
    for (let i = 1; i < likelihoods.length; i++) expect(likelihoods[i]!).toBeGreaterThan(likelihoods[i - 1]!)
  }, 30_000)
})

it('counts the corrections that a session needs: none when it is right, one for each chapter that is not', () => {
  expect(tickedSteps(session)).toEqual([1, 2, 3, 4])
  expect(correctionsNeeded(session, PLAIN)).toBe(0)
  const swapped = { ...session, truth: { ...session.truth, chapters: session.truth.chapters.map((chapter, i) => ({ ...chapter, step: [2, 1, 3, 4][i]! })) } }
  expect(correctionsNeeded(swapped, PLAIN)).toBe(2)
}, 30_000)

describe('labelled sessions', () => {
  const sessions = loadSessions(join(import.meta.dirname, '../../../fixtures/sessions'))
  it('have chapters end to end, on steps and parts of their plan, and places within their length', () => {
    expect(sessions.length).toBeGreaterThan(0)
    for (const { build, name, truth, steps, cues } of sessions) {
      const what = `${build} ${name}`
      expect(truth.chapters[0]!.startMs, what).toBe(0)
      expect(truth.chapters.at(-1)!.endMs, what).toBe(truth.durationMs)
      truth.chapters.slice(1).forEach((chapter, i) => expect(chapter.startMs, what).toBe(truth.chapters[i]!.endMs))
      const numbers = new Set([null, ...steps.map(step => step.number)])
      for (const { step } of [...truth.chapters, ...truth.facts, ...truth.offCamera]) expect(numbers.has(step), `${what}, step ${step}`).toBe(true)
      for (const { atMs } of [...truth.facts, ...truth.offCamera]) expect(cues.some(cue => cue.startMs === atMs), `${what}, ${atMs}`).toBe(true)
    }
  })
  it('make one long session with a long plan', () => {
    const long = longSession(sessions, 6, 200)
    expect(long.clips.reduce((sum, clip) => sum + clip.durationMs!, 0)).toBeGreaterThanOrEqual(6 * 3_600_000)
    expect(long.steps.map(step => step.number)).toEqual(Array.from({ length: 200 }, (_, i) => i + 1))
    expect(new Set(long.parts.map(part => part.name.toLowerCase())).size).toBe(long.parts.length)
  })
})
