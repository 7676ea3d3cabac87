import { outside } from '#shared/utils/time/outside'

/**
 * How the program's newest proposals take the place of its earlier ones: which stand, which change, which are new and
 * which go. Pure. Rows keep their ids where they can, so that a chapter somebody is looking at stays the same chapter.
 */

/** A stretch of one clip, integer ms, half open. */
export interface Stretch { clipId: string, startMs: number, endMs: number }

export interface Matched<Old, New> { standing: { old: Old, fresh: New }[], added: New[], gone: Old[] }

/**
 * Gives each new stretch the earlier one that covers most of it, the same work before other work. Each earlier
 * stretch is used once.
 *
 * @param same whether both say the same of what they cover
 */
export function matchStretches<Old extends Stretch, New extends Stretch>(earlier: readonly Old[], fresh: readonly New[], same: (old: Old, fresh: New) => boolean): Matched<Old, New> {
  const pairs = fresh.flatMap(one => earlier.flatMap((old) => {
    const shared = old.clipId === one.clipId ? Math.min(old.endMs, one.endMs) - Math.max(old.startMs, one.startMs) : 0
    return shared > 0 ? [{ old, fresh: one, worth: shared * (same(old, one) ? 2 : 1) }] : []
  })).sort((a, b) => b.worth - a.worth)
  const byFresh = new Map<New, Old>()
  const used = new Set<Old>()
  for (const { old, fresh: one } of pairs) {
    if (used.has(old) || byFresh.has(one)) continue
    used.add(old)
    byFresh.set(one, old)
  }
  return {
    standing: [...byFresh].map(([one, old]) => ({ old, fresh: one })),
    added: fresh.filter(one => !byFresh.has(one)),
    gone: earlier.filter(old => !used.has(old)),
  }
}

/** What is left of proposals beside `walls`; pieces shorter than `shortestMs` are left out. */
export function besideWalls<Proposal extends Stretch>(proposals: readonly Proposal[], walls: readonly Stretch[], shortestMs: number): Proposal[] {
  return proposals.flatMap((proposal) => {
    const pieces = outside(proposal, walls.filter(wall => wall.clipId === proposal.clipId))
    return pieces.filter(piece => piece.endMs - piece.startMs >= shortestMs).map(piece => ({ ...proposal, ...piece }))
  })
}

/** Something that is said at one moment. */
export interface Said { clipId: string, atMs: number }

/** A correction of captions moves a moment by no more than this; further apart they are two moments. */
const SAME_MOMENT_MS = 1500

/**
 * The same for what is said at a moment. What a person has touched is never changed, and stands in the way of its own
 * like: nothing that was mended or put aside is proposed anew.
 */
export function matchMoments<Old extends Said & { proposed: boolean }, New extends Said>(earlier: readonly Old[], fresh: readonly New[], alike: (old: Old, fresh: New) => boolean): Matched<Old, New> {
  const near = (old: Said, one: Said) => old.clipId === one.clipId && Math.abs(old.atMs - one.atMs) <= SAME_MOMENT_MS
  const used = new Set<Old>()
  const standing: { old: Old, fresh: New }[] = []
  const added: New[] = []
  for (const one of fresh) {
    const touched = earlier.find(old => !old.proposed && !used.has(old) && near(old, one) && alike(old, one))
    const old = touched ?? earlier.find(other => other.proposed && !used.has(other) && near(other, one) && alike(other, one))
    if (!old) added.push(one)
    else {
      used.add(old)
      if (!touched) standing.push({ old, fresh: one })
    }
  }
  return { standing, added, gone: earlier.filter(old => old.proposed && !used.has(old)) }
}
