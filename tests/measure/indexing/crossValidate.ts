import type { Curve } from '#server/indexing/pencil/calibration'
import type { Weights } from '#server/indexing/pencil/model'
import { type Fitted, pencilChapters } from '#server/indexing/pencil/pencil'
import { fit, lessonOf } from './fit'
import type { LabelledSession } from './load'

/** Enough for the likelihood to stop rising from where fitting starts. */
export const ROUNDS = 40
export const HOLD = 0.005
/** Where fitting starts: what anybody would expect, so that fewer rounds are needed. */
const START: Weights = {
  'to.plus1': -1, 'to.plus2': -2.5, 'to.plus3to5': -3, 'to.further': -4.5, 'to.minus1': -3, 'to.back': -4.5, 'to.resume': -0.5,
  'to.none': -1, 'to.steplessPlanTalk': -2, 'to.steplessCleanUp': -3,
  'turn.always': -1.5, 'turn.so': 1.2, 'turn.okay': 0.8, 'turn.midSentence': -2, 'turn.because': -1.5, 'turn.dangling': -1,
  'none.chat': 1, 'heard.work': 0.7, 'heard.planTalk': 0.7, 'heard.cleanUp': 0.7,
  'step.title': 0.4, 'step.description': 0.3, 'step.part': 0.3, 'step.topic': 0.2,
  'length.log': 0.5, 'length.logSquared': -0.8, 'length.under12': -1, 'kind.inTextRate': 0.5,
}
const STRAIGHT: Curve = [[0, 0], [1, 1]]

/** Fits both models on sessions; confidence as the model says it, until a curve is known. */
export function fitBoth(sessions: LabelledSession[], log?: (line: string) => void, rounds = ROUNDS): { open: Weights, ticked: Weights } {
  const one = (ticked: boolean) => fit(sessions.map(session => lessonOf(session, ticked)), START, { rounds, hold: HOLD, log })
  return { open: one(false), ticked: one(true) }
}

export const uncalibrated = (weights: { open: Weights, ticked: Weights }): Fitted => ({ open: { weights: weights.open, curve: STRAIGHT }, ticked: { weights: weights.ticked, curve: STRAIGHT } })

/** Builds shared out to folds; a build is never in the lessons of the fold it is tested in. */
export function foldsOf(sessions: LabelledSession[], most: number): string[][] {
  const folds: string[][] = []
  const builds = [...new Set(sessions.map(session => session.build))]
  builds.forEach((build, i) => { (folds[i % Math.min(most, builds.length)] ??= []).push(build) })
  return folds
}

export const tickedSteps = (session: LabelledSession) => [...new Set(session.truth.chapters.flatMap(chapter => chapter.step ?? []))]

/** A judged stretch: what the model said of it, how much of it was right, for how long (s). */
export interface Judged { likelihood: number, right: number, seconds: number }

export function judge(session: LabelledSession, fitted: Fitted, ticked: boolean): Judged[] {
  const chapters = pencilChapters({ steps: session.steps, parts: session.parts, clips: [{ cues: session.cues, durationMs: session.truth.durationMs }], ticked: ticked ? tickedSteps(session) : null }, fitted)
  return chapters.map((chapter) => {
    let right = 0
    let all = 0
    for (let ms = chapter.startMs; ms < chapter.endMs; ms += 500) {
      const truth = session.truth.chapters.find(other => ms >= other.startMs && ms < other.endMs)
      all++
      if ((truth?.step ?? null) === chapter.step) right++
    }
    return { likelihood: chapter.confidence, right: all ? right / all : 0, seconds: all / 2 }
  })
}

/** A rising curve through judged stretches: pooled adjacent violators over bins of equal time. */
export function curveThrough(judged: Judged[], bins = 12): Curve {
  const sorted = [...judged].sort((a, b) => a.likelihood - b.likelihood)
  const whole = sorted.reduce((sum, one) => sum + one.seconds, 0)
  const pools: { x: number, y: number, seconds: number }[] = []
  let pool = { x: 0, y: 0, seconds: 0 }
  for (const one of sorted) {
    pool.x += one.likelihood * one.seconds
    pool.y += one.right * one.seconds
    pool.seconds += one.seconds
    if (pool.seconds >= whole / bins) {
      pools.push(pool)
      pool = { x: 0, y: 0, seconds: 0 }
    }
  }
  if (pool.seconds) pools.push(pool)
  for (let i = 1; i < pools.length;) {
    const a = pools[i - 1]!
    const b = pools[i]!
    if (a.y / a.seconds <= b.y / b.seconds) i++
    else {
      pools.splice(i - 1, 2, { x: a.x + b.x, y: a.y + b.y, seconds: a.seconds + b.seconds })
      if (i > 1) i--
    }
  }
  const points = pools.map(({ x, y, seconds }) => [x / seconds, y / seconds] as const)
  const last = points.at(-1)?.[1] ?? 1
  return [[0, 0], ...points.filter(([x]) => x > 0.001 && x < 0.999), [1, Math.max(last, 0.97)]]
}
