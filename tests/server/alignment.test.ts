import { afterAll, beforeAll, expect, it } from 'vitest'
import { deleteClip, lockSession, updateClip } from '#server/services/clips'
import { settleClip } from '#server/services/clipTasks'
import { makeBuild, makeClip, makeSession, makeUser } from '../support/rows'
import { type TestDatabase, testDatabase } from '../support/database'

let handle: TestDatabase
beforeAll(async () => handle = await testDatabase())
afterAll(() => handle.drop())

it('lays clips out for many at once without two stopping each other', async () => {
  const { database } = handle
  const user = await makeUser(database)
  const session = await makeSession(database, await makeBuild(database, {}, { builder: user }))
  const made = await Promise.all(Array.from({ length: 6 }, () => makeClip(database, session)))
  // Each change moves other clips of the session; jobs settle clips at the same time.
  const work = Array.from({ length: 40 }, (_, n) => {
    const clip = made[n % made.length]!
    if (n % 4 === 3) {
      return database.transaction(async (tx) => {
        await lockSession(tx, session.id)
        await settleClip(tx, clip.id)
      })
    }
    return updateClip(database, clip.id, user.id, { recordedAt: new Date(Date.UTC(2026, 8, 5, 9, (n * 7) % 60)).toISOString() })
  })
  const outcomes = await Promise.allSettled([...work, deleteClip(database, made[5]!.id, user.id)])
  const faults = outcomes.flatMap(one => one.status === 'rejected' ? [String((one.reason as Error).cause ?? one.reason)] : [])
  // Changes of the clip that was deleted meanwhile find nothing; none may end in a deadlock.
  expect(faults.filter(fault => !/not found/.test(fault))).toEqual([])
})
