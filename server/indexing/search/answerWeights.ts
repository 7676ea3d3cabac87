import type { AnswerWeights } from './rank'

/** Written by `npm run fit:answers` (73 questions of 5 builds); not by hand. */
export const ANSWER_WEIGHTS: AnswerWeights = {
  said: 1.352,
  saidBeside: -0.005,
  cover: 0.821,
  meant: 2.264,
  meantBeside: -0.884,
  meantCover: 1.878,
  like: 0.269,
  topic: 0.855,
  tagged: 2.872,
  planned: 2.145,
  kind: 2.024,
  why: -0.224,
  method: 0.35,
  none: -0.838,
  elsewhen: -0.492,
}
