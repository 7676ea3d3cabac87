import { existsSync, mkdirSync, openAsBlob, readFileSync, statSync, writeFileSync } from 'node:fs'
import { dirname, join } from 'node:path'
import { Hash } from '@adonisjs/hash'
import { Scrypt } from '@adonisjs/hash/drivers/scrypt'
import { and, eq, inArray, sql } from 'drizzle-orm'
import { openStorage } from '#server/adapters/openStorage'
import type { Storage } from '#server/adapters/storage'
import type { Environment } from '#server/config/environment'
import { type Database, openDatabase } from '#server/database/client'
import { builds, chapterParts, chapters, clips, memberships, users } from '#server/database/schema'
import { addCaptionFile } from '#server/services/captions'
import { createBuild, deleteBuild } from '#server/services/builds'
import { enqueueTask } from '#server/services/clipTasks'
import { hashFile } from '#server/services/contentHash'
import { originalKey } from '#server/services/objectKeys'
import { changeStep, readPlanView } from '#server/services/plan'
import { importTable } from '#server/services/planImport'
import { createSession } from '#server/services/sessions'
import { refreshPassages } from '#server/services/search/passages'
import type { PlanView } from '#shared/types/plan'
import { fingerprintOf } from '../../app/utils/upload/hashing'
import { sleep } from '../local/processes'
import { type DemoClip, demoBuild, type DemoPerson, type DemoSession } from './index'

export interface DemoAccounts { accounts: { role: string, email: string, password: string }[] }

const ACCOUNTS: DemoAccounts['accounts'] = [
  { role: 'builder', ...demoBuild.builder },
  { role: 'helper', ...demoBuild.helper },
  { role: 'follower', ...demoBuild.follower },
]
/** Longer than this and something is wrong with the worker; the demo is then there with what has been indexed. */
const PATIENCE_MS = 120_000

/**
 * Makes the demo build once: accounts, plan, three sessions with their clips and captions through the same services
 * and jobs as anybody's, and the chapters that go with them; those of the last
 * session are left to the program, for somebody to ink. A first start that was cut short begins it again.
 */
export async function seedDemo(settings: Environment, say: (text: string) => void): Promise<DemoAccounts> {
  const mark = join(process.env.RIBBAND_DATA ?? '.data', 'demo.json')
  if (existsSync(mark) && readFileSync(mark, 'utf8').includes(databaseName(settings))) return { accounts: ACCOUNTS }
  const handle = openDatabase(settings.DATABASE_URL)
  const storage = openStorage(settings)
  try {
    say('making the demo build …')
    await clearHalfMade(handle.database, storage)
    const people = await Promise.all([demoBuild.builder, demoBuild.helper, demoBuild.follower].map(person => addPerson(handle.database, person)))
    const buildId = await addBuild(handle.database, people as [string, string, string])
    const plan = await readPlanView(handle.database, buildId, { archived: false })
    for (const session of demoBuild.sessions) await addSession(handle.database, storage, { buildId, userId: people[0]!, plan }, session)
    await waitForClips(handle.database, buildId, say)
    await handle.database.update(builds).set({ visibility: 'public' }).where(eq(builds.id, buildId))
    mkdirSync(dirname(mark), { recursive: true })
    writeFileSync(mark, `${JSON.stringify({ database: databaseName(settings), madeAt: new Date().toISOString() })}\n`)
    return { accounts: ACCOUNTS }
  }
  finally {
    storage.close()
    await handle.close()
  }
}

/** The database without its password or port, which may change between starts. */
function databaseName(settings: Environment): string {
  const url = new URL(settings.DATABASE_URL)
  return `${url.hostname}${url.pathname}`
}

/** What an earlier start left when it was cut short: its build and accounts go, everybody else's stay. */
async function clearHalfMade(database: Database, storage: Storage): Promise<void> {
  const emails = ACCOUNTS.map(account => account.email)
  const rows = await database.select({ id: builds.id, name: builds.name }).from(builds)
    .innerJoin(memberships, and(eq(memberships.buildId, builds.id), eq(memberships.role, 'builder')))
    .innerJoin(users, eq(users.id, memberships.userId))
    .where(and(eq(users.email, demoBuild.builder.email), eq(builds.name, demoBuild.name)))
  for (const row of rows) await deleteBuild(database, storage, row.id, row.name)
  await database.delete(users).where(inArray(users.email, emails))
}

async function addPerson(database: Database, person: DemoPerson): Promise<string> {
  // The same scrypt that the site's sign-in checks (nuxt-auth-utils uses this package with its defaults).
  const passwordHash = await new Hash(new Scrypt({})).make(person.password)
  const [user] = await database.insert(users).values({ name: person.name, email: person.email, passwordHash }).returning({ id: users.id })
  return user!.id
}

async function addBuild(database: Database, [builder, helper, follower]: [string, string, string]): Promise<string> {
  const build = await createBuild(database, builder, { name: demoBuild.name, boat: demoBuild.boat, about: demoBuild.summary, units: demoBuild.units, visibility: 'private' })
  await database.insert(memberships).values([{ buildId: build.id, userId: helper, role: 'crew' }, { buildId: build.id, userId: follower, role: 'follower' }])
  for (const file of [demoBuild.partsFile, demoBuild.planFile]) await importTable(database, build.id, { file: readFileSync(file).toString('base64') })
  await setProgress(database, build.id)
  return build.id
}

/** Steps worked on are under way, those before the last session's are done. */
async function setProgress(database: Database, buildId: string): Promise<void> {
  const { steps } = await readPlanView(database, buildId, { archived: false })
  const last = new Set(demoBuild.sessions.at(-1)!.stepNumbers)
  const earlier = new Set(demoBuild.sessions.slice(0, -1).flatMap(session => session.stepNumbers))
  const firstOfLast = Math.min(...last)
  for (const step of steps) {
    const status = last.has(step.number) ? 'under-way' : earlier.has(step.number) || step.number < firstOfLast ? 'done' : 'to-do'
    if (status !== step.status) await changeStep(database, buildId, step.id, { status })
  }
}

interface Setting { buildId: string, userId: string, plan: PlanView }

async function addSession(database: Database, storage: Storage, setting: Setting, session: DemoSession): Promise<void> {
  const stepIds = setting.plan.steps.filter(step => session.stepNumbers.includes(step.number)).map(step => step.id)
  const { id: sessionId } = await createSession(database, setting.buildId, {
    date: session.date, title: '', place: session.place, temperatureC: session.temperatureC, humidityPercent: session.humidityPct, notes: session.notes, stepIds,
  })
  for (const clip of session.clips) {
    const clipId = await addClip(database, storage, setting, sessionId, clip)
    await addCaptionFile(database, storage, sessionId, setting.userId, { name: clip.captions.split('/').at(-1)!, bytes: readFileSync(clip.captions) })
    if (!session.toReview) await addChapters(database, setting, { sessionId, clipId }, clip)
  }
}

/** The file goes into the storage first and its row with the job after it, as an upload does. */
async function addClip(database: Database, storage: Storage, { buildId, userId }: Setting, sessionId: string, clip: DemoClip): Promise<string> {
  const id = crypto.randomUUID()
  const { size } = statSync(clip.file)
  const objectKey = originalKey(id)
  await storage.writeFile(objectKey, clip.file, 'application/octet-stream')
  const contentHash = await hashFile(clip.file, size)
  await database.transaction(async (tx) => {
    await tx.insert(clips).values({
      id, sessionId, buildId, name: clip.name, objectKey, sizeBytes: size, contentType: 'video/mp4', contentHash, fingerprint: await fingerprintOf(await openAsBlob(clip.file)),
      state: 'waiting', camera: clip.camera, durationMs: clip.durationMs, uploadedBy: userId,
    })
    await enqueueTask(tx, { id, sessionId }, 'probe-clip')
  })
  return id
}

async function addChapters(database: Database, { buildId, userId, plan }: Setting, place: { sessionId: string, clipId: string }, clip: DemoClip): Promise<void> {
  await database.transaction(async (tx) => {
    // What is pencilled is the program's to say, as with anybody's session.
    for (const chapter of clip.chapters.filter(one => one.state === 'inked')) {
      const stepId = chapter.step === null ? null : plan.steps.find(step => step.number === chapter.step)!.id
      const [row] = await tx.insert(chapters).values({
        ...place, buildId, stepId, startMs: chapter.startMs, endMs: chapter.endMs, operation: chapter.operation, inking: chapter.state,
        note: chapter.note ?? '', createdBy: userId, updatedBy: userId, inkedBy: userId,
      }).returning({ id: chapters.id })
      const partIds = chapter.parts.map(name => plan.parts.find(part => part.name.toLowerCase() === name.toLowerCase())!.id)
      if (partIds.length) await tx.insert(chapterParts).values(partIds.map(partId => ({ chapterId: row!.id, partId })))
    }
    await refreshPassages(tx, place.clipId)
  })
}

async function waitForClips(database: Database, buildId: string, say: (text: string) => void): Promise<void> {
  let told = -1
  for (let waited = 0; waited < PATIENCE_MS; waited += 250) {
    const { rows: [count] } = await database.execute<{ all: number, done: number, reading: number }>(sql`
      select count(*)::int "all", count(*) filter (where state in ('ready', 'failed'))::int done,
        (select count(*)::int from caption_tracks t where t.build_id = ${buildId} and not t.read and t.failure is null)
          + (select count(*)::int from pencillings p join sessions s on s.id = p.session_id where s.build_id = ${buildId} and p.state in ('waiting', 'working')) reading
      from clips where build_id = ${buildId}`)
    if (count!.done !== told) say(`  ${told = count!.done} of ${count!.all} demo clips indexed`)
    if (count!.done === count!.all && !count!.reading) return
    await sleep(250)
  }
}
