import { z } from 'zod'
import { FACT_UNITS, INKINGS, PICKUP_STATES } from '../types/trade'

const version = z.number().int().positive()
const stepId = z.uuid().nullable()

/** What a person changes of a fact, made from exactly that version. Whatever is changed is then no longer the program's own. */
export const factChangesSchema = z.object({
  version,
  inking: z.enum(INKINGS).optional(),
  value: z.number().finite('Write a number').min(-1_000_000, 'That is too little').max(1_000_000, 'That is too much').nullable().optional(),
  unit: z.enum(FACT_UNITS).nullable().optional(),
  stepId: stepId.optional(),
  dismissed: z.boolean().optional(),
  /** Only to take a change back: the program's own again. */
  proposed: z.boolean().optional(),
})
  .refine(({ version: _, ...changes }) => Object.values(changes).some(value => value !== undefined), { message: 'There is nothing to change' })
  .refine(changes => !changes.proposed || changes.inking !== 'inked', { path: ['proposed'], message: 'What is inked is no proposal' })

export const pickupChangesSchema = z.object({
  version,
  state: z.enum(PICKUP_STATES).optional(),
  stepId: stepId.optional(),
  proposed: z.boolean().optional(),
})
  .refine(({ version: _, ...changes }) => Object.values(changes).some(value => value !== undefined), { message: 'There is nothing to change' })

export type FactChanges = z.output<typeof factChangesSchema>
export type PickupChanges = z.output<typeof pickupChangesSchema>
