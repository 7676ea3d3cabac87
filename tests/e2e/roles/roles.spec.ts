import { randomUUID } from 'node:crypto'
import { request, type APIRequestContext } from '@playwright/test'
import type { DatabaseHandle } from '#server/database/client'
import { expect, test } from '../../support/browser'
import { productDatabase } from '../../support/productDatabase'
import { type Fixture, makeFixture, makePeople, PASSWORD } from './fixture'
import { everyRoute } from './routes'
import { type Answers, TABLE } from './table'

/** Every route, asked by every role, by a stranger from another build and by a guest, on a private and a public build. */
const ASKERS = ['guest', 'stranger', 'follower', 'crew', 'builder'] as const
let handle: DatabaseHandle
let askers: Record<typeof ASKERS[number], APIRequestContext>
let fixtures: Record<'private' | 'public', Fixture>

test.beforeAll(async () => {
  handle = productDatabase()
  const people = await makePeople(handle.database)
  fixtures = { private: await makeFixture(handle.database, people, 'private'), public: await makeFixture(handle.database, people, 'public') }
  askers = Object.fromEntries(await Promise.all(ASKERS.map(async asker => [asker, await signedIn(asker === 'guest' ? null : people[asker].email)]))) as typeof askers
})
test.afterAll(async () => {
  await Promise.all(Object.values(askers).map(asker => asker.dispose()))
  // Nothing of this is left for the other tests' public pages.
  await handle.pool.query(`delete from chapters where build_id in (select id from builds where address like 'build-%')`)
  await handle.pool.query(`delete from builds where address like 'build-%'`)
  await handle.close()
})

async function signedIn(email: string | null): Promise<APIRequestContext> {
  const baseURL = process.env.RIBBAND_TEST_URL!
  const context = await request.newContext({ baseURL, extraHTTPHeaders: { origin: new URL(baseURL).origin } })
  if (email) expect((await context.post('/api/auth/sign-in', { data: { email, password: PASSWORD } })).status()).toBe(200)
  return context
}

test('the table names every route and no other', () => {
  expect(Object.keys(TABLE).sort()).toEqual(everyRoute())
})

for (const [route, row] of Object.entries(TABLE)) {
  for (const visibility of ['private', 'public'] as const) {
    test(`${route} on a ${visibility} build`, async () => {
      const got: Partial<Answers> = {}
      for (const asker of ASKERS) got[asker] = await ask(askers[asker], route, await row.request(fixtures[visibility]))
      // A sign-in, sign-up or sign-out has changed who is asking.
      if (route.includes('/api/auth/')) await renewAskers()
      expect(got).toEqual(row[visibility])
    })
  }
}

async function renewAskers(): Promise<void> {
  const people = await makePeople(handle.database)
  fixtures = { private: await makeFixture(handle.database, people, 'private'), public: await makeFixture(handle.database, people, 'public') }
  for (const asker of ASKERS) {
    await askers[asker].dispose()
    askers[asker] = await signedIn(asker === 'guest' ? null : people[asker].email)
  }
}

async function ask(context: APIRequestContext, route: string, call: { path: string, body?: unknown, bytes?: Buffer }): Promise<number> {
  const method = route.split(' ')[0] === 'ANY' ? 'GET' : route.split(' ')[0]!
  if (call.path.endsWith('/events')) return statusOfStream(context, call.path)
  const response = await context.fetch(call.path, { method, maxRedirects: 0, ...(call.bytes ? { data: call.bytes, headers: { 'content-type': 'application/octet-stream' } } : call.body === undefined ? {} : { data: call.body }) })
  return response.status()
}

/** A stream of events never ends: only its first line is of interest. */
async function statusOfStream(context: APIRequestContext, path: string): Promise<number> {
  const { cookies } = await context.storageState()
  const stop = new AbortController()
  const response = await fetch(process.env.RIBBAND_TEST_URL + path, { headers: { cookie: cookies.map(one => `${one.name}=${one.value}`).join('; ') }, signal: stop.signal })
  stop.abort()
  return response.status
}

test('a write without our own Origin changes nothing', async () => {
  const path = `/api/builds/${fixtures.private.build.id}`
  for (const origin of ['https://elsewhere.example', 'null', '']) {
    expect((await askers.builder.fetch(path, { method: 'PATCH', data: { boat: 'Stolen' }, headers: { origin } })).status()).toBe(403)
  }
  expect((await (await askers.builder.get(path)).json()).boat).not.toBe('Stolen')
})

test('a cookie is worth nothing once the account\'s epoch has moved on', async () => {
  const people = await makePeople(handle.database)
  const context = await signedIn(people.crew.email)
  expect((await context.get('/api/builds')).status()).toBe(200)
  await handle.pool.query('update users set session_epoch = session_epoch + 1 where id = $1', [people.crew.id])
  expect((await context.get('/api/builds')).status()).toBe(401)
  await context.dispose()
})

test('crew delete their own ink and what is pencilled, and nobody else\'s ink', async () => {
  const f = fixtures.private
  const change = async (asker: 'builder' | 'crew', body: unknown) => (await askers[asker].post(`/api/sessions/${f.session.id}/chapters`, { data: body })).status()
  const put = (inking: string) => ({ id: randomUUID(), clipId: f.clip.id, ...f.freeSpan(), stepId: null, operation: 'cut', partIds: [], inking, version: null })
  for (const [by, inking, answer] of [['builder', 'inked', 403], ['builder', 'pencilled', 200], ['crew', 'inked', 200]] as const) {
    const made = put(inking)
    expect(await change(by, { put: [made] })).toBe(200)
    expect(await change('crew', { remove: [{ id: made.id, version: 1 }] })).toBe(answer)
    if (answer === 403) expect(await change('builder', { remove: [{ id: made.id, version: 1 }] })).toBe(200)
  }
})

test('an unknown address and a wrong password get the same answer', async () => {
  const people = await makePeople(handle.database)
  const answers = await Promise.all([
    askers.guest.post('/api/auth/sign-in', { data: { email: people.crew.email, password: 'not the password' } }),
    askers.guest.post('/api/auth/sign-in', { data: { email: 'nobody@example.test', password: 'not the password' } }),
  ])
  expect(answers.map(answer => answer.status())).toEqual([400, 400])
  const [a, b] = await Promise.all(answers.map(async answer => (await answer.json()).data))
  expect(a).toEqual(b)
})
