import { describe, expect, it } from 'vitest'
import { EnvironmentError, readEnvironment } from '#server/config/environment'

const whole = {
  DATABASE_URL: 'postgres://a:b@127.0.0.1:5432/ribband', S3_ENDPOINT: 'http://127.0.0.1:9000', S3_ACCESS_KEY_ID: 'key', S3_SECRET_ACCESS_KEY: 'secret-secret',
  PUBLIC_URL: 'http://localhost:3000', NUXT_SESSION_PASSWORD: 'x'.repeat(32),
}

describe('readEnvironment', () => {
  it('fills in what has a default', () => {
    expect(readEnvironment(whole)).toMatchObject({ S3_BUCKET: 'ribband', S3_REGION: 'us-east-1', PORT: 3000, WORKER_CONCURRENCY: 2, S3_PUBLIC_ENDPOINT: whole.S3_ENDPOINT })
  })

  it.each([
    ['DATABASE_URL', 'mysql://x'], ['S3_ENDPOINT', 'nowhere'], ['S3_BUCKET', 'Not A Bucket'], ['PUBLIC_URL', 'ftp://x'], ['PORT', '99999'], ['PORT', 'abc'],
    ['WORKER_CONCURRENCY', '0'], ['SMTP_URL', 'http://mail'], ['NUXT_SESSION_PASSWORD', 'short'], ['TRUSTED_PROXIES', '-1'],
  ])('names %s when it is %s, in one line', (name, value) => {
    const fault = (() => {
      try {
        readEnvironment({ ...whole, [name]: value })
      }
      catch (error) {
        return error as Error
      }
    })()
    expect(fault).toBeInstanceOf(EnvironmentError)
    expect(fault!.message).toContain(name)
    expect(fault!.message).not.toContain('\n')
  })

  it('names what is missing, counting empty as missing', () => {
    expect(() => readEnvironment({ ...whole, DATABASE_URL: '' })).toThrow('DATABASE_URL is missing')
  })

  it('asks a worker for no session secret', () => {
    expect(readEnvironment({ ...whole, NUXT_SESSION_PASSWORD: undefined }, { worker: true }).DATABASE_URL).toBe(whole.DATABASE_URL)
  })
})
