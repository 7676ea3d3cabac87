import { z } from 'zod'
import { INKINGS, OPERATIONS } from '../types/trade'

const ms = z.number().int('Times are whole milliseconds').min(0, 'A chapter cannot begin before its clip')

const share = z.number().min(0).max(1)
const alternativesSchema = z.object({
  steps: z.array(z.object({ stepId: z.uuid().nullable(), confidence: share })).max(5),
  operations: z.array(z.object({ operation: z.enum(OPERATIONS), confidence: share })).max(5),
})

/** A chapter as it should be: new when `version` is null, else a change of exactly that version. */
export const chapterPutSchema = z.object({
  id: z.uuid(),
  clipId: z.uuid(),
  startMs: ms,
  endMs: ms,
  stepId: z.uuid().nullable(),
  operation: z.enum(OPERATIONS),
  partIds: z.array(z.uuid()).max(50),
  inking: z.enum(INKINGS),
  confidence: z.number().min(0).max(1).nullable().default(null),
  /** Still the program's own, which it may move and take away; never of an inked chapter. */
  proposed: z.boolean().default(false),
  /** Made from what was then the program's own: where that has moved meanwhile, this counts, since a person says so. */
  overProposal: z.boolean().default(false),
  alternatives: alternativesSchema.default({ steps: [], operations: [] }),
  evidence: z.array(z.object({ atMs: ms, words: z.string().max(200) })).max(40).default([]),
  note: z.string().max(2000, 'Keep the note under 2,000 characters').default(''),
  version: z.number().int().positive().nullable(),
})
  .refine(put => put.endMs > put.startMs, { path: ['endMs'], message: 'The out point must come after the in point' })
  .refine(put => !put.proposed || put.inking === 'pencilled', { path: ['proposed'], message: 'What is inked is no proposal' })
  .refine(put => put.operation !== 'none' || put.stepId === null, { path: ['stepId'], message: 'A stretch that shows no work cannot belong to a step' })

export const chapterRemoveSchema = z.object({
  id: z.uuid(),
  version: z.number().int().positive(),
  overProposal: z.boolean().default(false),
  /** Nothing is to be proposed there again. */
  dismiss: z.boolean().default(false),
})

/** Everything one action of a person changes, applied whole or not at all: a split is one put and one new chapter. */
export const chapterChangesSchema = z.object({
  put: z.array(chapterPutSchema).max(500).default([]),
  remove: z.array(chapterRemoveSchema).max(500).default([]),
})
  .refine(changes => changes.put.length + changes.remove.length > 0, { message: 'There is nothing to change' })
  .refine(changes => new Set([...changes.put, ...changes.remove].map(one => one.id)).size === changes.put.length + changes.remove.length, { message: 'A chapter is named twice' })

export type ChapterPut = z.output<typeof chapterPutSchema>
export type ChapterRemove = z.output<typeof chapterRemoveSchema>
export type ChapterChanges = z.output<typeof chapterChangesSchema>
