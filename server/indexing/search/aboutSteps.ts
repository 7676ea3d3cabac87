import { stepsSpokenOf } from '../pencil/aboutSteps'
import { indexSteps, type StepIndex } from '../pencil/stepEvidence'
import type { SearchPlan } from './types'

/** Evidence below which a question is about no step, and from which the likeliest counts in full. */
const LITTLE = 0.3
const ENOUGH = 2
const indexes = new WeakMap<SearchPlan, StepIndex>()

/** A plan is read once for all the questions put to it. */
function indexOf(plan: SearchPlan): StepIndex {
  const known = indexes.get(plan)
  if (known) return known
  const index = indexSteps(
    plan.steps.map(({ number, title, stage = '', description = '', parts = [], materials = [] }) => ({ number, title, stage, description, parts, materials })),
    plan.parts.map(({ name, aliases, material = '' }) => ({ name, aliases, material, thicknessMm: null })),
  )
  indexes.set(plan, index)
  return index
}

/**
 * How far a question is about each step of a plan (by id), by the plan's own words, parts and topics: 0 to 1; empty
 * when it is about none. The plan's words bridge those of the question and those of the builder.
 */
export function aboutSteps(question: string, plan: SearchPlan): Map<string, number> {
  if (!plan.steps.length) return new Map()
  const scores = stepsSpokenOf(question, indexOf(plan))
  const most = Math.max(...scores)
  if (most <= LITTLE) return new Map()
  return new Map(plan.steps.map((step, s) => [step.id, scores[s]! / Math.max(most, ENOUGH)]))
}
