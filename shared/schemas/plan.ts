import { z } from 'zod'
import { STEP_STATUSES } from '../types/trade'
import { filledLine, line, lineList, prose } from './text'

/** Most steps or parts that one build may have. The longest plan books have some hundreds. */
export const MOST_ROWS = 2000
const MOST_MINUTES = 600_000

const minutes = (what: string) => z.int(`${what} must be whole minutes`).min(0, `${what} cannot be less than nothing`).max(MOST_MINUTES, `${what} cannot be over 10,000 hours`).nullable()

/** Every field of a step, used by forms, handlers and import alike. */
export const stepFields = {
  number: z.int('The number must be a whole number').min(1, 'Step numbers start at 1').max(99_999, 'Step numbers go up to 99999'),
  stage: line('The stage', 80),
  title: filledLine('The title', 200, 'Give the step a title'),
  description: prose('The description', 8000),
  materials: lineList('Materials', 200, 60),
  partIds: z.array(z.uuid('That is not a part')).max(200, 'At most 200 parts to a step').transform(ids => [...new Set(ids.map(id => id.toLowerCase()))]),
  status: z.enum(STEP_STATUSES, 'Choose to do, under way or done'),
  plannedMinutes: minutes('Planned time'),
  spentMinutes: minutes('Spent time'),
}

export const newStepSchema = z.object({
  /** The next free number when not given. */
  number: stepFields.number.optional(),
  stage: stepFields.stage.default(''),
  title: stepFields.title,
  description: stepFields.description.default(''),
  materials: stepFields.materials.default([]),
  partIds: stepFields.partIds.default([]),
  status: stepFields.status.default('to-do'),
  plannedMinutes: stepFields.plannedMinutes.default(null),
  spentMinutes: stepFields.spentMinutes.default(null),
  /** Stands after this step; at the end when not given. */
  afterId: z.uuid('That is not a step').optional(),
})

export const changeStepSchema = z.object({ ...stepFields, archived: z.boolean() }).partial()

export const partFields = {
  name: filledLine('The name', 120, 'Give the part a name').pipe(z.string().regex(/^[^;]*$/, 'Leave the semicolon out of a part\'s name: lists of parts are separated by it')),
  aliases: lineList('Other names', 120, 40),
  material: line('The material', 200),
  /** Millimetres, kept to a thousandth: finer than 1/64 in. */
  thicknessMm: z.number('Thickness must be a number of millimetres').transform(mm => Math.round(mm * 1000) / 1000)
    .pipe(z.number().min(0.001, 'Thickness must be more than nothing').max(100_000, 'Thickness cannot be over 100 m')).nullable(),
  quantity: z.int('Quantity must be a whole number').min(1, 'Quantity starts at 1').max(100_000, 'Quantity goes up to 100,000').nullable(),
}

export const newPartSchema = z.object({
  name: partFields.name,
  aliases: partFields.aliases.default([]),
  material: partFields.material.default(''),
  thicknessMm: partFields.thicknessMm.default(null),
  quantity: partFields.quantity.default(null),
})

export const changePartSchema = z.object({ ...partFields, archived: z.boolean() }).partial()

/** Ids in the wanted order. */
export const orderSchema = z.object({ ids: z.array(z.uuid('That is not a row of this list')).max(MOST_ROWS * 2) })

export const planKindSchema = z.enum(['steps', 'parts'], 'Choose steps or parts')

/** Bytes of a table at most; base64 is a third longer. */
export const MOST_TABLE_BYTES = 2_000_000

/** What to read a table as, when its headings are not to decide; and which preview is meant. */
const reading = { as: planKindSchema.optional(), seen: z.string().max(64).optional() }

/** A table to import: as pasted, or a file's bytes in base64 so that its encoding can be found out. */
export const planSourceSchema = z.union([
  z.object({ text: z.string().max(MOST_TABLE_BYTES, 'The text is over 2 MB, too long for a plan'), ...reading }),
  z.object({ file: z.string().max(MOST_TABLE_BYTES * 1.4, 'The file is over 2 MB, too large for a plan').pipe(z.base64('The file was damaged on its way here. Choose it again')), ...reading }),
], 'Paste a table or choose a file')

export const planExportSchema = z.object({ what: planKindSchema.default('steps'), format: z.enum(['csv', 'md'], 'Choose csv or md').default('csv') })

export type NewStep = z.output<typeof newStepSchema>
export type ChangeStep = z.output<typeof changeStepSchema>
export type NewPart = z.output<typeof newPartSchema>
export type ChangePart = z.output<typeof changePartSchema>
export type PlanSource = z.output<typeof planSourceSchema>
export type PlanKind = z.output<typeof planKindSchema>
export type PlanFormat = z.output<typeof planExportSchema>['format']
