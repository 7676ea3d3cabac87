import type { StepRow } from '#server/indexing/plan/readPlan'
import { readPlan } from '#server/indexing/plan/readPlan'
import type { PartView, PlanView, StepView } from '#shared/types/plan'
import { DomainError } from '#shared/utils/errors'

export function aPart(values: Partial<PartView> & { name: string }): PartView {
  return { id: `part:${values.name}`, position: 0, aliases: [], material: '', thicknessMm: null, quantity: null, archived: false, ...values }
}

export function aStep(values: Partial<StepView> & { number: number }): StepView {
  return { id: `step:${values.number}`, position: 0, stage: '', title: `Step ${values.number}`, description: '', materials: [], partIds: [], status: 'to-do', plannedMinutes: null, spentMinutes: null, archived: false, ...values }
}

export const aPlan = (steps: StepView[] = [], parts: PartView[] = []): PlanView => ({ steps, parts })

export const problemsOf = (text: string | Uint8Array): string[] => readPlan(text).problems.map(problem => problem.message)
export const stepsOf = (text: string | Uint8Array): StepRow[] => readPlan(text).steps

/** The message of the DomainError that `work` throws. */
export function refusal(work: () => unknown): string {
  try {
    work()
  }
  catch (error) {
    if (error instanceof DomainError && error.code === 'unreadable') return error.message
    throw error
  }
  throw new Error('Nothing was refused.')
}
