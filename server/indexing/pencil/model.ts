import { TURN_FEATURES } from './turns'
import { STEP_FEATURES } from './stepEvidence'
import { WORK_KINDS } from './types'

/**
 * The numbers of the sequence model, by name. A chapter's score is the sum of its features times these; a
 * session's, the sum over its chapters and over the turns between them (a semi-Markov conditional random field:
 * Sarawagi & Cohen 2004). Fitted by `npm run fit:indexing`.
 */
export const WEIGHT_NAMES = [
  ...STEP_FEATURES.map(name => `step.${name}`),
  // The first words of a chapter say what it is about.
  'opening.words', 'opening.topic', 'opening.heard',
  ...WORK_KINDS.map(kind => `rate.${kind}`),
  'heard.work', 'heard.planTalk', 'heard.cleanUp', 'heard.chatInWork',
  'none.rate', 'none.chat', 'none.shop', 'none.start', 'none.end',
  'stepless.rate', 'stepless.planTalk', 'stepless.start', 'stepless.shop', 'stepless.cleanUpRate', 'stepless.cleanUp',
  'kind.inTitle', 'kind.inText', 'kind.notInText', 'kind.inTitleRate', 'kind.inTextRate',
  'length.under12', 'length.under25', 'length.log', 'length.logSquared',
  'stepless.under12', 'stepless.under25', 'stepless.log', 'stepless.logSquared',
  ...TURN_FEATURES.map(name => `turn.${name}`),
  'to.resume', 'to.plus1', 'to.plus2', 'to.plus3to5', 'to.further', 'to.minus1', 'to.back', 'to.sharedParts', 'to.sameStage', 'to.first',
  'then.forward', 'then.back', 'then.fromPlanTalk', 'then.toPlanTalk', 'then.toCleanUp',
  ...WORK_KINDS.map(kind => `begins.${kind}`),
  'to.none', 'to.steplessPlanTalk', 'to.steplessCleanUp', 'stepless.again',
] as const
/**
 * What the labelled sessions cannot teach, because they are captions without footage and hardly come back to a
 * step: set by judgement. A change of picture speaks for a turn about as much as "okay" does; the builder's own
 * earlier words for a step count about as much as the plan's.
 */
export const BY_JUDGEMENT: Weights = { 'turn.scene': 0.8, 'step.learned': 0.25 }

export type WeightName = typeof WEIGHT_NAMES[number]
export type Weights = Record<string, number>
