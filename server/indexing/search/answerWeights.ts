import type { AnswerWeights } from './rank'

/** Written by `npm run fit:answers` (73 questions of 5 builds); not by hand. */
export const ANSWER_WEIGHTS: AnswerWeights = {
  said: 1.359,
  saidBeside: -0.021,
  cover: 0.817,
  meant: 2.228,
  meantBeside: -0.85,
  meantCover: 1.89,
  like: 0.267,
  topic: 0.845,
  tagged: 2.923,
  planned: 2.165,
  kind: 2.509,
  why: 0.109,
  method: 0.365,
  none: -0.796,
  elsewhen: -2.327,
}
