import { type Fitted, pencilChapters } from '#server/indexing/pencil/pencil'
import type { FixedChapter } from '#server/indexing/pencil/types'
import { tickedSteps } from './crossValidate'
import type { LabelledSession } from './load'
import { tallyChapters } from './score'

/** How many true chapters a builder sets by hand, the worst first, until 95 % of the working time has the right step, the steps of the day ticked. */
export function correctionsNeeded(session: LabelledSession, fitted: Fitted): number {
  const { truth } = session
  const inked: FixedChapter[] = []
  for (let n = 0; n <= truth.chapters.length; n++) {
    const got = pencilChapters({ steps: session.steps, parts: session.parts, clips: [{ cues: session.cues, durationMs: truth.durationMs }], ticked: tickedSteps(session), fixed: inked }, fitted)
    const tally = tallyChapters(truth, got)
    if (tally.onStepOk >= 0.95 * tally.onStep) return n
    const worst = truth.chapters.filter(chapter => !inked.some(other => other.startMs === chapter.startMs)).map((chapter) => {
      let wrong = 0
      for (let ms = chapter.startMs; ms < chapter.endMs; ms += 500) {
        const there = got.find(other => ms >= other.startMs && ms < other.endMs)
        if ((there?.step ?? null) !== chapter.step) wrong += 500
      }
      return { chapter, wrong }
    }).sort((a, b) => b.wrong - a.wrong)[0]
    if (!worst) return n
    const { startMs, endMs, step, operation } = worst.chapter
    inked.push({ clip: 0, startMs, endMs, step, operation })
  }
  return truth.chapters.length
}
