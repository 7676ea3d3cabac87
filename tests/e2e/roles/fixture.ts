import { Hash } from '@adonisjs/hash'
import { Scrypt } from '@adonisjs/hash/drivers/scrypt'
import { eq } from 'drizzle-orm'
import type { Database } from '#server/database/client'
import { cues, facts, parts, pickups, steps, uploads, type User } from '#server/database/schema'
import type { FootageIndex, ProbeResult } from '#shared/types/media'
import type { Visibility } from '#shared/types/trade'
import { productStorage } from '../../support/productDatabase'
import { makeBuild, makeChapter, makeClip, makeCues, makeFact, makePart, makePickup, makeSession, makeStep, makeUser } from '../../support/rows'

export const PASSWORD = 'chine log and sheer'
const ASKERS = ['builder', 'crew', 'follower', 'stranger', 'spare'] as const

/** One hash for all: scrypt is slow on purpose. */
export async function makePeople(database: Database): Promise<Record<typeof ASKERS[number], User>> {
  const passwordHash = await new Hash(new Scrypt({})).make(PASSWORD)
  const people = await Promise.all(ASKERS.map(async name => [name, await makeUser(database, { name, passwordHash })] as const))
  const made = Object.fromEntries(people) as Record<typeof ASKERS[number], User>
  // The stranger is somebody's builder, but not of the build that is asked about.
  await makeBuild(database, { name: 'The stranger\'s own' }, { builder: made.stranger })
  return made
}

const probe = { container: 'mov,mp4', durationMs: 600_000, sizeBytes: 1000, video: { codec: 'h264' }, audio: null, subtitles: [], proxyReasons: [], warnings: [] } as unknown as ProbeResult
const footage: FootageIndex = {
  poster: { key: 'poster', width: 16, height: 9 },
  sheets: { intervalMs: 5000, tileWidth: 160, tileHeight: 90, columns: 16, rows: 15, count: 1, timesMs: [0], images: ['sheet'] },
  peaks: { perSecond: 20, count: 1, key: 'peaks' },
  sceneChangesMs: [], silences: [], method: 'keyframes',
}

/** A build with one of everything, and ways to make more for requests that use something up. */
export async function makeFixture(database: Database, people: Awaited<ReturnType<typeof makePeople>>, visibility: Visibility) {
  const { builder, crew, follower } = people
  const build = await makeBuild(database, { visibility }, { builder, crew, follower })
  const part = await makePart(database, build)
  const step = await makeStep(database, build, {}, [part])
  const session = await makeSession(database, build)
  const clip = await makeClip(database, session, { probe, footage })
  await makeChapter(database, clip, { stepId: step.id })
  const [cue] = await makeCues(database, clip, ['this is the knee'])
  const track = cue!.trackId
  // Touched by a person: what is the program's own goes when it finds that nobody says it.
  const fact = await makeFact(database, clip, { proposed: false })
  const pickup = await makePickup(database, clip, { proposed: false })
  const storage = productStorage()
  let span = 1000
  let stepsMade = 0

  return {
    build, step, session, clip, track, spare: people.spare, password: PASSWORD,
    freeSpan: () => ({ startMs: 60_000 + (span += 1000), endMs: 60_000 + span + 900 }),
    anotherBuild: () => makeBuild(database, { visibility }, { builder, crew, follower }),
    // Numbers that the site's own new steps will not take.
    anotherStep: () => makeStep(database, build, { number: 1000 + ++stepsMade }),
    anotherPart: () => makePart(database, build),
    anotherSession: () => makeSession(database, build),
    anotherClip: () => makeClip(database, session),
    anotherTrack: async () => (await makeCues(database, clip, ['x'], { name: 'other.vtt' }))[0]!.trackId,
    freshCue: async () => (await database.select().from(cues).where(eq(cues.id, cue!.id)))[0]!,
    freshFact: async () => (await database.select().from(facts).where(eq(facts.id, fact.id)))[0]!,
    freshPickup: async () => (await database.select().from(pickups).where(eq(pickups.id, pickup.id)))[0]!,
    stepIds: async () => (await database.select({ id: steps.id }).from(steps).where(eq(steps.buildId, build.id)).orderBy(steps.position)).map(row => row.id),
    partIds: async () => (await database.select({ id: parts.id }).from(parts).where(eq(parts.buildId, build.id)).orderBy(parts.position)).map(row => row.id),
    uploadingClip: async () => {
      const uploading = await makeClip(database, session, { state: 'uploading', contentHash: null, sizeBytes: 1000 })
      await database.insert(uploads).values({ clipId: uploading.id, uploadId: await storage.beginUpload(uploading.objectKey, 'video/mp4'), partSizeBytes: 8 * 1024 * 1024 })
      return uploading
    },
  }
}
export type Fixture = Awaited<ReturnType<typeof makeFixture>>
