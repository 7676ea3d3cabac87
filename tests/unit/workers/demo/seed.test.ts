import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, it, vi } from 'vitest'
import { readEnvironment } from '#server/config/environment'
import { seedDemo } from '../../../../workers/demo/seed'

const folder = mkdtempSync(join(tmpdir(), 'ribband-seed-'))
beforeAll(() => {
  vi.stubEnv('RIBBAND_DATA', folder)
})
afterAll(() => {
  vi.unstubAllEnvs()
  rmSync(folder, { recursive: true, force: true })
})

/** Nothing listens on port 9, so whoever asks the database fails. */
const settings = (database: string) => readEnvironment({
  DATABASE_URL: `postgres://ribband@127.0.0.1:9/${database}`, S3_ENDPOINT: 'http://127.0.0.1:9', S3_BUCKET: 'ribband', S3_REGION: 'us-east-1', S3_ACCESS_KEY_ID: 'id', S3_SECRET_ACCESS_KEY: 'secret enough', PUBLIC_URL: 'http://127.0.0.1:3000',
}, { worker: true })

it('makes the demo once: a later start, also after one that was killed, touches nothing', async () => {
  writeFileSync(join(folder, 'demo.json'), JSON.stringify({ database: '127.0.0.1/ribband', madeAt: '2026-12-01T00:00:00.000Z' }))
  const said: string[] = []
  const { accounts } = await seedDemo(settings('ribband'), text => said.push(text))
  expect(accounts.map(account => account.role)).toEqual(['builder', 'helper', 'follower'])
  expect(said).toEqual([])
})

it('makes it again for another database', async () => {
  const said: string[] = []
  await expect(seedDemo(settings('another'), text => said.push(text))).rejects.toThrow()
  expect(said).toEqual(['making the demo build …'])
})
