import { listen } from './speech'
import { hearSteps, STEP_FEATURES, type StepIndex } from './stepEvidence'

const K = STEP_FEATURES.length
/** What a word of a step's title, description, part, material, topic and operation is worth in a sentence on its own. */
const WORTH = [1.2, 1, 1.2, 0.3, 0.6, 0.5]

/** How much a sentence speaks of each step of a plan, above the mean of all; in the plan's order, all 0 when it says nothing. */
export function stepsSpokenOf(words: string, index: StepIndex): Float64Array {
  const S = index.steps.length
  const scores = new Float64Array(S)
  const speech = listen([{ cues: [{ startMs: 0, endMs: 1, text: words }] }])
  const heard = hearSteps(speech, index)
  // A long sentence is heard in several pieces.
  for (let cue = 0; cue < speech.cues.length; cue++) {
    for (let s = 0; s < S; s++) WORTH.forEach((worth, k) => { scores[s]! += worth * heard[(cue * S + s) * K + k]! })
  }
  return scores
}
