import type { AnswerWeights } from './rank'

/** Written by `npm run fit:answers` (73 questions of 5 builds); not by hand. */
export const ANSWER_WEIGHTS: AnswerWeights = {
  said: 1.348,
  saidBeside: -0.009,
  cover: 0.821,
  meant: 2.265,
  meantBeside: -0.833,
  meantCover: 1.873,
  like: 0.287,
  topic: 0.854,
  tagged: 2.854,
  planned: 2.161,
  kind: 1.805,
  why: -0.207,
  method: 0.352,
  none: -0.772,
  elsewhen: -0.481,
}
