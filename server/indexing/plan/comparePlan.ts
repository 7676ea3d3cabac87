import type { FieldChange, PreviewRow } from '#shared/types/planImport'
import type { PartView, PlanView, StepView } from '#shared/types/plan'
import { hoursText } from '#shared/utils/hours'
import type { StepRow } from './readPlan'

/** One row of a table beside the step it would make or change. `partNames` are as the parts list writes them. */
export interface StepPlacing {
  row: StepRow
  step: StepView | null
  /** Undefined when the table has no column of parts. */
  partNames: string[] | undefined
  preview: PreviewRow
}

export interface PlanComparison {
  placings: StepPlacing[]
  newParts: string[]
  restoredParts: string[]
  /** Steps in use that the table leaves out. */
  staying: StepView[]
}

/** Sets a table's steps beside the plan: which are new, which change and how, which are the same. Matched by number. */
export function comparePlan(plan: PlanView, rows: StepRow[]): PlanComparison {
  const byNumber = new Map(plan.steps.map(step => [step.number, step]))
  const findPart = partFinder(plan.parts)
  const nameOf = new Map(plan.parts.map(part => [part.id, part.name]))
  const newParts = new Map<string, string>()
  const restored = new Map<string, string>()

  const placings = rows.map((row): StepPlacing => {
    const step = byNumber.get(row.number) ?? null
    const partNames = row.parts && [...new Set(row.parts.map((name) => {
      const part = findPart(name)
      if (part?.archived) restored.set(part.id, part.name)
      if (part) return part.name
      if (!newParts.has(name.toLowerCase())) newParts.set(name.toLowerCase(), name)
      return newParts.get(name.toLowerCase())!
    }))]
    const changes = step ? stepChanges(row, step, partNames, step.partIds.map(id => nameOf.get(id) ?? '')) : []
    const outcome = !step ? 'new' : changes.length || step.archived ? 'changed' : 'same'
    return { row, step, partNames, preview: { row: row.row, number: row.number, title: row.title, outcome, restored: step?.archived ?? false, changes } }
  })
  const named = new Set(rows.map(row => row.number))
  return {
    placings,
    newParts: [...newParts.values()],
    restoredParts: [...restored.values()],
    staying: plan.steps.filter(step => !step.archived && !named.has(step.number)),
  }
}

/** Finds a part by its name or, when only one part goes by it, by another name it has. */
export function partFinder(parts: PartView[]): (name: string) => PartView | undefined {
  const byName = new Map(parts.map(part => [part.name.toLowerCase(), part]))
  const byAlias = new Map<string, PartView | null>()
  for (const part of parts.filter(part => !part.archived)) {
    for (const alias of part.aliases) byAlias.set(alias.toLowerCase(), byAlias.has(alias.toLowerCase()) ? null : part)
  }
  return name => byName.get(name.toLowerCase()) ?? byAlias.get(name.toLowerCase()) ?? undefined
}

function stepChanges(row: StepRow, step: StepView, partNames: string[] | undefined, standingParts: string[]): FieldChange[] {
  return [
    ...changed('title', step.title, row.title),
    ...changed('stage', step.stage, row.stage),
    ...changed('description', step.description, row.description),
    // The order of a step's parts says nothing; that of its materials is the builder's.
    ...(partNames && [...partNames].sort().join(';') !== [...standingParts].sort().join(';') ? changed('parts', standingParts.join('; '), partNames.join('; ')) : []),
    ...changed('materials', step.materials.join('; '), row.materials?.join('; ')),
    ...changed('planned_hours', hoursText(step.plannedMinutes), row.plannedMinutes === undefined ? undefined : hoursText(row.plannedMinutes)),
  ]
}

/** Undefined stands for a column that is not in the table: nothing changes. */
export function changed(column: string, from: string, to: string | undefined): FieldChange[] {
  return to === undefined || to === from ? [] : [{ column, from, to }]
}
