import { randomBytes, randomUUID } from 'node:crypto'
import type { Executor } from '#server/database/client'
import { type Build, builds, captionTracks, type Chapter, chapterParts, chapters, type Clip, clips, type CueRow, cues, type FactRow, facts, memberships, type Part, parts, type PickupRow, pickups, type Session, sessions, type Step, stepParts, steps, type User, users } from '#server/database/schema'
import type { Role } from '#shared/types/trade'

/**
 * Small row makers for server tests: real rows with sensible values, everything overridable.
 * They write rows only; what services do besides (jobs, search passages, events) is left to the test.
 */
type Values<Table extends { $inferInsert: object }> = Partial<Table['$inferInsert']>

let counter = 0
const nextNumber = () => ++counter
/** Number within one build, so that plans read 1, 2, 3 whatever ran before. */
const perBuild = new Map<string, number>()
const nextOf = (kind: string, buildId: string) => {
  const n = (perBuild.get(`${kind}:${buildId}`) ?? 0) + 1
  perBuild.set(`${kind}:${buildId}`, n)
  return n
}

export async function makeUser(executor: Executor, values: Values<typeof users> = {}): Promise<User> {
  const n = nextNumber()
  const [row] = await executor.insert(users).values({ email: `person${n}.${randomBytes(3).toString('hex')}@example.test`, name: `Person ${n}`, passwordHash: 'unusable', ...values }).returning()
  return row!
}

/** A build, with its members: `{ builder: user, crew: user, follower: user }`. */
export async function makeBuild(executor: Executor, values: Values<typeof builds> = {}, members: Partial<Record<Role, User>> = {}): Promise<Build> {
  const [row] = await executor.insert(builds).values({ address: `build-${randomBytes(6).toString('hex')}`, name: `Build ${nextNumber()}`, ...values }).returning()
  for (const [role, user] of Object.entries(members)) await makeMember(executor, row!, user, role as Role)
  return row!
}

export async function makeMember(executor: Executor, build: Pick<Build, 'id'>, user: Pick<User, 'id'>, role: Role): Promise<void> {
  await executor.insert(memberships).values({ buildId: build.id, userId: user.id, role })
}

export async function makeStep(executor: Executor, build: Pick<Build, 'id'>, values: Values<typeof steps> = {}, stepsParts: Pick<Part, 'id'>[] = []): Promise<Step> {
  const n = nextOf('step', build.id)
  const [row] = await executor.insert(steps).values({ buildId: build.id, number: n, position: n - 1, title: `Step ${n}`, stage: 'Hull', ...values }).returning()
  if (stepsParts.length) await executor.insert(stepParts).values(stepsParts.map(part => ({ stepId: row!.id, partId: part.id })))
  return row!
}

export async function makePart(executor: Executor, build: Pick<Build, 'id'>, values: Values<typeof parts> = {}): Promise<Part> {
  const n = nextOf('part', build.id)
  const [row] = await executor.insert(parts).values({ buildId: build.id, position: n - 1, name: `part ${n}`, ...values }).returning()
  return row!
}

export async function makeSession(executor: Executor, build: Pick<Build, 'id'>, values: Values<typeof sessions> = {}): Promise<Session> {
  const [row] = await executor.insert(sessions).values({ buildId: build.id, date: '2026-09-05', ...values }).returning()
  return row!
}

/** A ready clip of ten minutes without footage pictures; pass `probe` and `footage` where they matter. */
export async function makeClip(executor: Executor, session: Pick<Session, 'id' | 'buildId'>, values: Values<typeof clips> = {}): Promise<Clip> {
  const n = nextNumber()
  const clipId = randomUUID()
  const [row] = await executor.insert(clips).values({
    id: clipId, sessionId: session.id, buildId: session.buildId, name: `VID_20260905_${String(100000 + n)}.mp4`, objectKey: `clips/${clipId}/original`,
    sizeBytes: 1_000_000 + n, contentType: 'video/mp4', contentHash: randomBytes(32).toString('hex'), state: 'ready', durationMs: 600_000, ...values,
  }).returning()
  return row!
}

export type CueInput = string | { startMs: number, endMs: number, text: string }

/** A caption track that has been read, and its cues: plain strings follow one another every four seconds. */
export async function makeCues(executor: Executor, clip: Pick<Clip, 'id' | 'sessionId' | 'buildId'>, lines: CueInput[], track: Values<typeof captionTracks> = {}): Promise<CueRow[]> {
  const [made] = await executor.insert(captionTracks).values({
    sessionId: clip.sessionId, buildId: clip.buildId, clipId: clip.id, name: 'clip.en.vtt', language: 'en', objectKey: `captions/${randomUUID()}`, sizeBytes: 1000, read: true, ...track,
  }).returning()
  if (!lines.length) return []
  return executor.insert(cues).values(lines.map((line, index) => ({
    trackId: made!.id, clipId: clip.id, buildId: clip.buildId,
    ...(typeof line === 'string' ? { startMs: index * 4000, endMs: index * 4000 + 4000, text: line } : line),
  }))).returning()
}

/** An inked chapter of the clip's first minute with operation `glue`, unless told otherwise. */
export async function makeChapter(executor: Executor, clip: Pick<Clip, 'id' | 'sessionId' | 'buildId'>, values: Values<typeof chapters> = {}, shows: Pick<Part, 'id'>[] = []): Promise<Chapter> {
  const [row] = await executor.insert(chapters).values({
    clipId: clip.id, sessionId: clip.sessionId, buildId: clip.buildId, startMs: 0, endMs: 60_000, operation: 'glue', inking: 'inked', ...values,
  }).returning()
  if (shows.length) await executor.insert(chapterParts).values(shows.map(part => ({ chapterId: row!.id, partId: part.id })))
  return row!
}

/** A pencilled length of ⅜ in, said at ten seconds, the program's own. */
export async function makeFact(executor: Executor, clip: Pick<Clip, 'id' | 'sessionId' | 'buildId'>, values: Values<typeof facts> = {}): Promise<FactRow> {
  const [row] = await executor.insert(facts).values({ clipId: clip.id, sessionId: clip.sessionId, buildId: clip.buildId, atMs: 10_000, kind: 'length', said: '3/8 of an inch', value: 9.525, unit: 'mm', proposed: true, ...values }).returning()
  return row!
}

/** Something done off camera, told at twenty seconds, the program's own. */
export async function makePickup(executor: Executor, clip: Pick<Clip, 'id' | 'sessionId' | 'buildId'>, values: Values<typeof pickups> = {}): Promise<PickupRow> {
  const [row] = await executor.insert(pickups).values({ clipId: clip.id, sessionId: clip.sessionId, buildId: clip.buildId, atMs: 20_000, words: 'i did that one off camera', proposed: true, ...values }).returning()
  return row!
}
