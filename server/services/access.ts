import { and, eq, or, type SQL, sql } from 'drizzle-orm'
import { notFound, DomainError } from '#shared/utils/errors'
import type { Role } from '#shared/types/trade'
import type { Executor } from '../database/client'
import { type Build, builds, captionTracks, chapters, clips, memberships, sessions, steps, parts, pickups, cues, facts } from '../database/schema'

/**
 * What somebody wants of a build.
 * - `watch`: the published face: steps, parts, inked chapters and the footage under them. Guests of a public
 *   or unlisted build, and every member.
 * - `work`: sessions, all clips, captions, pencilled work; upload, tag, record. Crew and builder.
 * - `run`: plan, publishing, deleting, settings. Builder only.
 */
export type Need = 'watch' | 'work' | 'run'

const ROLES_FOR: Record<Exclude<Need, 'watch'>, Role[]> = { work: ['builder', 'crew'], run: ['builder'] }

export interface BuildAccess { build: Build, role: Role | null }

/** The SQL condition under which `userId` (null for a guest) may see a build at all; join memberships on it first. */
export function maySeeBuild(userId: string | null): SQL {
  const open = sql`${builds.visibility} in ('public', 'unlisted')`
  return userId ? sql`(${open} or ${memberships.userId} = ${userId})` : open
}

const NAMES = { build: 'That build', session: 'That session', clip: 'That clip', chapter: 'That chapter', track: 'That caption file', step: 'That step', part: 'That part', cue: 'That caption', fact: 'That fact', pickup: 'That pick-up' } as const
export type Subject = keyof typeof NAMES

/**
 * Finds the build that a thing belongs to and what the asker may do there, in one query.
 * What may not be seen is not found; what may be seen but not changed is forbidden.
 *
 * @throws DomainError `not-found` | `signed-out` | `forbidden`
 */
export async function requireBuild(executor: Executor, userId: string | null, subject: Subject, id: string, need: Need): Promise<BuildAccess> {
  const [row] = await executor
    .select({ build: builds, role: memberships.role })
    .from(builds)
    .leftJoin(memberships, and(eq(memberships.buildId, builds.id), userId ? eq(memberships.userId, userId) : sql`false`))
    .where(and(belongs(subject, id), or(maySeeBuild(userId))))
  if (!row) throw notFound(NAMES[subject])
  if (need === 'watch') return row
  if (row.role && ROLES_FOR[need].includes(row.role)) return row
  // A guest or follower of a public build knows that the build exists, but its sessions and other inner
  // things are not for them: only the build itself, its steps and parts answer "forbidden".
  if (!['build', 'step', 'part'].includes(subject) && row.role !== 'crew') throw notFound(NAMES[subject])
  if (!userId) throw new DomainError('signed-out', 'Sign in to go on. What you typed is still on the page.')
  throw new DomainError('forbidden', need === 'run' ? 'Only the builder can do that. Nothing was changed.' : 'Only the builder and crew can do that. Nothing was changed.')
}

function belongs(subject: Subject, id: string): SQL {
  switch (subject) {
    case 'build': return eq(builds.id, id)
    case 'session': return sql`${builds.id} = (select ${sessions.buildId} from ${sessions} where ${sessions.id} = ${id})`
    case 'clip': return sql`${builds.id} = (select ${clips.buildId} from ${clips} where ${clips.id} = ${id})`
    case 'chapter': return sql`${builds.id} = (select ${chapters.buildId} from ${chapters} where ${chapters.id} = ${id})`
    case 'track': return sql`${builds.id} = (select ${captionTracks.buildId} from ${captionTracks} where ${captionTracks.id} = ${id})`
    case 'cue': return sql`${builds.id} = (select ${cues.buildId} from ${cues} where ${cues.id} = ${id})`
    case 'fact': return sql`${builds.id} = (select ${facts.buildId} from ${facts} where ${facts.id} = ${id})`
    case 'pickup': return sql`${builds.id} = (select ${pickups.buildId} from ${pickups} where ${pickups.id} = ${id})`
    case 'step': return sql`${builds.id} = (select ${steps.buildId} from ${steps} where ${steps.id} = ${id})`
    case 'part': return sql`${builds.id} = (select ${parts.buildId} from ${parts} where ${parts.id} = ${id})`
  }
}
