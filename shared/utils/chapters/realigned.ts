import type { StepView } from '#shared/types/plan'
import type { ChapterView } from '#shared/types/session'
import { OPERATION_WORDS } from '../operations'

/** Edges that move by less than this were only put to another word. */
const MOVED_MS = 1000

/**
 * What the program has come to propose otherwise, in one line: '3 pencilled chapters moved, 1 is now step 9'.
 * Null when nobody would see a difference. Counts proposals that are proposals before and after, new ones and those gone.
 */
export function realignedWords(before: readonly ChapterView[], after: readonly ChapterView[], steps: readonly Pick<StepView, 'id' | 'number'>[]): string | null {
  const old = new Map(before.filter(one => one.proposed).map(one => [one.id, one]))
  const now = after.filter(one => one.proposed)
  const known = new Set(before.map(one => one.id))
  const numberOf = (stepId: string | null) => steps.find(step => step.id === stepId)?.number
  const retold: string[] = []
  let moved = 0
  let added = 0
  for (const is of now) {
    const was = old.get(is.id)
    if (!was) added += Number(!known.has(is.id))
    else if (was.stepId !== is.stepId) retold.push(is.stepId === null ? 'of no step' : `step ${numberOf(is.stepId) ?? '–'}`)
    else if (was.operation !== is.operation) retold.push(OPERATION_WORDS[is.operation].label.toLowerCase())
    else if (Math.abs(was.startMs - is.startMs) >= MOVED_MS || Math.abs(was.endMs - is.endMs) >= MOVED_MS) moved++
  }
  const standing = new Set(after.map(one => one.id))
  const gone = [...old.keys()].filter(id => !standing.has(id)).length
  const parts = [
    moved && `${chapters(moved)} moved`,
    ...[...new Set(retold)].slice(0, 2).map((what) => {
      const count = retold.filter(one => one === what).length
      return `${count} ${count === 1 ? 'is' : 'are'} now ${what}`
    }),
    new Set(retold).size > 2 && `${retold.length - retold.filter(one => [...new Set(retold)].slice(0, 2).includes(one)).length} more are of other work`,
    added && `${added} ${added === 1 ? 'is' : 'are'} new`,
    gone && `${gone} ${gone === 1 ? 'is' : 'are'} gone`,
  ].filter((part): part is string => Boolean(part))
  if (!parts.length) return null
  // Said once what is counted: the first part names it.
  const [first, ...rest] = parts
  return [first!.includes('chapter') ? first : first!.replace(/^(\d+) /, (_, count: string) => `${chapters(Number(count))} `), ...rest].join(', ')
}

const chapters = (count: number) => `${count} pencilled ${count === 1 ? 'chapter' : 'chapters'}`
