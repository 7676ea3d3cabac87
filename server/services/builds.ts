import { randomBytes } from 'node:crypto'
import { and, desc, eq, sql } from 'drizzle-orm'
import type { ChangeBuild, NewBuild } from '#shared/schemas/builds'
import type { BuildSummary, BuildView } from '#shared/types/build'
import type { Role } from '#shared/types/trade'
import { DomainError, notFound } from '#shared/utils/errors'
import type { Storage } from '../adapters/storage'
import type { Database, Executor } from '../database/client'
import { type Build, builds, captionTracks, chapters, clips, memberships, uploads } from '../database/schema'
import { clipPrefix, trackPrefix } from './objectKeys'

/** 32 signs without the ones that are mistaken for each other (i, l, o, u), so that 5 bits make one. */
const SIGNS = '0123456789abcdefghjkmnpqrstvwxyz'

/** A public address: 60 random bits, so that an unlisted build is found only by its link. */
export function newAddress(): string {
  return [...randomBytes(12)].map(byte => SIGNS[byte & 31]).join('')
}

export function buildView(build: Build, role: Role | null): BuildView {
  const { id, address, name, boat, about, units, visibility } = build
  return { id, address, name, boat, about, units, visibility, role, createdAt: build.createdAt.toISOString() }
}

/** Makes a build and its maker the builder of it. */
export async function createBuild(database: Database, userId: string, input: NewBuild): Promise<BuildView> {
  return database.transaction(async (tx) => {
    const [build] = await tx.insert(builds).values({ ...input, address: newAddress() }).returning()
    await tx.insert(memberships).values({ buildId: build!.id, userId, role: 'builder' })
    return buildView(build!, 'builder')
  })
}

/** The builds that somebody is a member of, the last one worked on first. */
export async function listBuilds(executor: Executor, userId: string): Promise<BuildSummary[]> {
  const count = (table: 'steps' | 'sessions', also = '') => sql<number>`(select count(*)::int from ${sql.identifier(table)} t where t.build_id = ${builds.id}${sql.raw(also)})`
  const lastSession = sql<string | null>`(select max(s.date)::text from sessions s where s.build_id = ${builds.id})`
  const rows = await executor
    .select({
      build: builds,
      role: memberships.role,
      stepCount: count('steps', ' and t.archived_at is null'),
      doneCount: count('steps', ` and t.archived_at is null and t.status = 'done'`),
      sessionCount: count('sessions'),
      lastSession,
    })
    .from(memberships)
    .innerJoin(builds, eq(builds.id, memberships.buildId))
    .where(eq(memberships.userId, userId))
    .orderBy(sql`${lastSession} desc nulls last`, desc(builds.updatedAt), builds.id)
  return rows.map(({ build, role, ...counts }) => ({ ...buildView(build, role), role, ...counts }))
}

export async function changeBuild(executor: Executor, buildId: string, change: ChangeBuild): Promise<Build> {
  const [build] = Object.keys(change).length
    ? await executor.update(builds).set(change).where(eq(builds.id, buildId)).returning()
    : await executor.select().from(builds).where(eq(builds.id, buildId))
  if (!build) throw notFound('That build')
  return build
}

/**
 * Deletes a build with all that hangs on it, when its name was typed right. The rows go in one transaction;
 * the stored files after it, because what is in the storage is worth nothing without its row and not the
 * other way round. `storageCleared` is false when the storage was away: what is left there is found by its
 * prefix, which no row owns any more.
 */
export async function deleteBuild(database: Database, storage: Storage, buildId: string, typedName: string): Promise<{ storageCleared: boolean }> {
  const stored = await database.transaction(async (tx) => {
    const [build] = await tx.select().from(builds).where(eq(builds.id, buildId)).for('update')
    if (!build) throw notFound('That build')
    if (typedName.trim() !== build.name) {
      throw new DomainError('bad-input', `That is not the build's name, so nothing was deleted. Type “${build.name}” to delete it.`, { issues: [{ path: 'name', message: `Type “${build.name}”` }] })
    }
    const found = await storedThings(tx, buildId)
    // Chapters hold on to their steps, so they go first.
    await tx.delete(chapters).where(eq(chapters.buildId, buildId))
    await tx.delete(builds).where(eq(builds.id, buildId))
    return found
  })
  try {
    for (const { key, uploadId } of stored.unfinished) await storage.abortUpload(key, uploadId)
    for (const prefix of stored.prefixes) await removeUnder(storage, prefix)
    return { storageCleared: true }
  }
  catch {
    return { storageCleared: false }
  }
}

async function storedThings(executor: Executor, buildId: string) {
  const ofClips = await executor.select({ id: clips.id }).from(clips).where(eq(clips.buildId, buildId))
  const ofTracks = await executor.select({ id: captionTracks.id }).from(captionTracks).where(eq(captionTracks.buildId, buildId))
  const unfinished = await executor.select({ key: clips.objectKey, uploadId: uploads.uploadId }).from(uploads).innerJoin(clips, and(eq(clips.id, uploads.clipId), eq(clips.buildId, buildId)))
  return { prefixes: [...ofClips.map(clip => clipPrefix(clip.id)), ...ofTracks.map(track => trackPrefix(track.id))], unfinished }
}

async function removeUnder(storage: Storage, prefix: string): Promise<void> {
  const keys: string[] = []
  for await (const { key } of storage.list(prefix)) keys.push(key)
  if (keys.length) await storage.remove(keys)
}
