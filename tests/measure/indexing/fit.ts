import { gather, type Material } from '#server/indexing/pencil/material'
import type { Weights } from '#server/indexing/pencil/model'
import { listen } from '#server/indexing/pencil/speech'
import { indexSteps } from '#server/indexing/pencil/stepEvidence'
import { WORK_KINDS } from '#server/indexing/pencil/types'
import { expectedCounts, trueCounts, type TrueChapter } from './counts'
import type { LabelledSession } from './load'

export interface Lesson { session: LabelledSession, material: Material, truth: TrueChapter[] }

/** A labelled session as a lesson: its true chapters as nodes and states. */
export function lessonOf(session: LabelledSession, ticked = false): Lesson {
  const steps = ticked ? session.steps.filter(step => session.truth.chapters.some(chapter => chapter.step === step.number)) : session.steps
  const speech = listen([{ cues: session.cues }])
  const starts = session.truth.chapters.map(chapter => speech.cues.findIndex(cue => cue.startMs >= chapter.startMs - 60))
  const material = gather(speech, indexSteps(steps, session.parts), [], [], { from: 0, whole: speech.cues.length, ordered: ticked })
  material.nodes = [...new Set([...material.nodes, ...starts.filter(cue => cue >= 0)])].sort((a, b) => a - b)
  const truth = session.truth.chapters.flatMap((chapter, at) => {
    const from = at ? starts[at]! : 0
    const to = starts.slice(at + 1).find(cue => cue >= 0) ?? speech.cues.length
    if (from < 0 || to <= from) return []
    const step = chapter.step === null ? null : steps.findIndex(step => step.number === chapter.step)
    const kind = step === null ? WORK_KINDS.length + Math.max(0, ['none', 'plan-talk', 'clean-up'].indexOf(chapter.operation)) : WORK_KINDS.indexOf(chapter.operation as typeof WORK_KINDS[number])
    return [{ i: material.nodes.indexOf(from), j: material.nodes.indexOf(to), step, kind }]
  })
  return { session, material, truth }
}

/**
 * Weights that make the true chapters of the lessons likely: gradient ascent (Adam) on the conditional log
 * likelihood, less a quadratic penalty on large weights.
 */
export function fit(lessons: Lesson[], start: Weights, options: { rounds: number, hold: number, rate?: number, log?: (line: string) => void }): Weights {
  const weights: Weights = { ...start }
  const gold = lessons.map(lesson => trueCounts(lesson.material, lesson.truth))
  const m: Weights = {}
  const v: Weights = {}
  for (let round = 1; round <= options.rounds; round++) {
    const gradient: Weights = {}
    let likelihood = 0
    lessons.forEach((lesson, at) => {
      const { logZ, counts } = expectedCounts(lesson.material, weights)
      let score = 0
      for (const [name, value] of Object.entries(gold[at]!)) score += (weights[name] ?? 0) * value
      likelihood += score - logZ
      for (const name of new Set([...Object.keys(counts), ...Object.keys(gold[at]!)])) gradient[name] = (gradient[name] ?? 0) + (gold[at]![name] ?? 0) - (counts[name] ?? 0)
    })
    const rate = (options.rate ?? 0.2) / (1 + round / 20)
    for (const name of Object.keys(gradient)) {
      const g = gradient[name]! / lessons.length - options.hold * (weights[name] ?? 0)
      m[name] = 0.8 * (m[name] ?? 0) + 0.2 * g
      v[name] = 0.95 * (v[name] ?? 0) + 0.05 * g * g
      weights[name] = (weights[name] ?? 0) + rate * (m[name]! / (1 - 0.8 ** round)) / (Math.sqrt(v[name]! / (1 - 0.95 ** round)) + 1e-6)
    }
    options.log?.(`round ${round}: mean log likelihood ${(likelihood / lessons.length).toFixed(2)}`)
  }
  return weights
}
