import { z } from 'zod'
import { OPERATIONS } from '#shared/types/trade'

const blank = (value: unknown) => value === '' ? undefined : value
const id = (what: string) => z.preprocess(blank, z.uuid(`That ${what} is not one of this site’s.`).optional())
const day = z.preprocess(blank, z.iso.date('Write dates as year-month-day, such as 2026-09-05.').optional())

/** GET /api/search. Anything left out does not narrow the search. */
export const searchSchema = z.object({
  q: z.string().trim().max(300, 'That question is longer than 300 letters. Ask in fewer words.').default(''),
  build: id('build'),
  session: id('session'),
  step: id('step'),
  part: id('part'),
  operation: z.preprocess(blank, z.enum(OPERATIONS, 'That is not an operation that chapters are tagged with.').optional()),
  from: day,
  to: day,
  /** Where the page before ended. */
  after: z.preprocess(blank, z.string().max(200).optional()),
  limit: z.coerce.number().int().min(1).max(50).default(20),
}).refine(value => !value.from || !value.to || value.from <= value.to, { path: ['to'], message: 'The last day lies before the first.' })

export type SearchQuery = z.output<typeof searchSchema>
