import type { H3Event } from 'h3'
import { z } from 'zod'
import { DomainError, notFound } from '#shared/utils/errors'

/** Checks a value against a schema; what is wrong comes back as field issues that a form can show. */
export function validate<Schema extends z.ZodType>(schema: Schema, value: unknown): z.output<Schema> {
  const result = schema.safeParse(value)
  if (result.success) return result.data
  const issues = result.error.issues.map(issue => ({ path: issue.path.join('.'), message: issue.message }))
  throw new DomainError('bad-input', issues.length === 1 ? issues[0]!.message : `${issues.length} entries need mending: ${issues.map(i => i.message).join('; ')}`, { issues })
}

/** The largest thing a page sends as JSON is a plan; files go elsewhere. */
const MAX_JSON_BYTES = 4 * 1024 * 1024

/** A JSON body, bounded before it is held in memory, checked against a schema. */
export async function readBodyAs<Schema extends z.ZodType>(event: H3Event, schema: Schema): Promise<z.output<Schema>> {
  const bytes = await readBytes(event, MAX_JSON_BYTES, most => `That is more than ${most} MB, so nothing was changed.`)
  let body: unknown
  try {
    body = bytes.length ? JSON.parse(bytes.toString('utf8')) : {}
  }
  catch {
    throw new DomainError('bad-input', 'The request could not be read. Nothing was changed.')
  }
  return validate(schema, body ?? {})
}

export function readQueryAs<Schema extends z.ZodType>(event: H3Event, schema: Schema): z.output<Schema> {
  return validate(schema, getQuery(event))
}

/** An id in the address. One that is not an id cannot name anything: the same 404 as for a missing row. */
export function routeId(event: H3Event, name: string): string {
  const value = getRouterParam(event, name)
  if (!z.uuid().safeParse(value).success) throw notFound(`That ${name}`)
  return value!.toLowerCase()
}
