import { z } from 'zod'

const address = (name: string, protocols: string[]) => z.string()
  .refine(value => URL.canParse(value) && protocols.includes(new URL(value).protocol), `${name} must be an address that begins with ${protocols.map(p => `${p}//`).join(' or ')}`)

const filled = (name: string, least = 1) => z.string({ error: `${name} is missing` }).min(least, least > 1 ? `${name} must have at least ${least} characters` : `${name} is empty`)

const wholeNumber = (name: string, from: number, to: number) => z.coerce.number({ error: `${name} must be a whole number` }).int(`${name} must be a whole number`).min(from, `${name} must be ${from} or more`).max(to, `${name} must be ${to} or less`)

const environmentSchema = z.object({
  DATABASE_URL: filled('DATABASE_URL').pipe(address('DATABASE_URL', ['postgres:', 'postgresql:'])),
  S3_ENDPOINT: filled('S3_ENDPOINT').pipe(address('S3_ENDPOINT', ['http:', 'https:'])),
  /** Where browsers reach the storage; the same as S3_ENDPOINT unless it is behind another name. */
  S3_PUBLIC_ENDPOINT: address('S3_PUBLIC_ENDPOINT', ['http:', 'https:']).optional(),
  S3_BUCKET: filled('S3_BUCKET').regex(/^[a-z0-9][a-z0-9.-]{1,61}[a-z0-9]$/, 'S3_BUCKET must be 3 to 63 small letters, digits, dots or hyphens').default('ribband'),
  S3_REGION: filled('S3_REGION').default('us-east-1'),
  S3_ACCESS_KEY_ID: filled('S3_ACCESS_KEY_ID'),
  S3_SECRET_ACCESS_KEY: filled('S3_SECRET_ACCESS_KEY', 8),
  SMTP_URL: address('SMTP_URL', ['smtp:', 'smtps:']).optional(),
  /** The address people type; mails, feeds and the Origin check use it. */
  PUBLIC_URL: filled('PUBLIC_URL').pipe(address('PUBLIC_URL', ['http:', 'https:'])),
  PORT: wholeNumber('PORT', 1, 65535).default(3000),
  /** How many reverse proxies of ours stand before the site; each adds one address to X-Forwarded-For. */
  TRUSTED_PROXIES: wholeNumber('TRUSTED_PROXIES', 0, 10).default(0),
  WORKER_CONCURRENCY: wholeNumber('WORKER_CONCURRENCY', 1, 64).default(2),
  NUXT_SESSION_PASSWORD: filled('NUXT_SESSION_PASSWORD', 32),
})

export type Environment = Omit<z.infer<typeof environmentSchema>, 'S3_PUBLIC_ENDPOINT'> & { S3_PUBLIC_ENDPOINT: string }

/** A setting that is missing or wrong; `message` is one line that names it. */
export class EnvironmentError extends Error {}

/**
 * Reads and checks the settings of a site or worker. Empty values count as not given.
 * @throws EnvironmentError with one line naming every wrong setting.
 */
export function readEnvironment(source: Record<string, string | undefined>, options: { worker?: boolean } = {}): Environment {
  const given = Object.fromEntries(Object.entries(source).filter(([, value]) => value !== undefined && value !== ''))
  // A worker signs nobody in, so it needs no session secret.
  const schema = options.worker ? environmentSchema.extend({ NUXT_SESSION_PASSWORD: z.string().default('') }) : environmentSchema
  const result = schema.safeParse(given)
  if (!result.success) {
    throw new EnvironmentError(`Ribband cannot start: ${result.error.issues.map(issue => issue.message).join('; ')}. See .env.example.`)
  }
  return { ...result.data, S3_PUBLIC_ENDPOINT: result.data.S3_PUBLIC_ENDPOINT ?? result.data.S3_ENDPOINT }
}
