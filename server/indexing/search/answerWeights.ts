import type { AnswerWeights } from './rank'

/** Written by `npm run fit:answers` (154 questions of 10 builds); not by hand. */
export const ANSWER_WEIGHTS: AnswerWeights = {
  said: 1.504,
  saidBeside: 0.193,
  cover: 0.503,
  meant: 2.2,
  meantBeside: -1.228,
  meantCover: 1.75,
  like: 0.771,
  topic: 0.404,
  tagged: 1.393,
  planned: 2.528,
  kind: 2.177,
  why: 0.721,
  method: -0.078,
  none: -1.699,
  elsewhen: -0.4,
}
