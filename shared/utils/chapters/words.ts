import type { StepView } from '#shared/types/plan'
import type { ChapterView } from '#shared/types/session'
import { OPERATION_WORDS } from '../operations'

type Named = Pick<ChapterView, 'stepId' | 'operation'>

/** A chapter in a few words: 'step 7, glue'; 'no work shown'. */
export function chapterName(chapter: Named, steps: readonly StepView[]): string {
  const step = chapter.stepId === null ? undefined : steps.find(one => one.id === chapter.stepId)
  const operation = OPERATION_WORDS[chapter.operation].label.toLowerCase()
  return step ? `step ${step.number}, ${operation}` : operation
}

/** A length in plain words: '32 s', '4 min 05 s', '1 h 02 min'. */
export function lengthWords(ms: number): string {
  const seconds = Math.max(0, Math.round(ms / 1000))
  if (ms < 10_000) return `${(Math.max(0, ms) / 1000).toFixed(1)} s`
  if (seconds < 60) return `${seconds} s`
  const two = (n: number) => String(n).padStart(2, '0')
  if (seconds < 3600) return `${Math.floor(seconds / 60)} min ${two(seconds % 60)} s`
  return `${Math.floor(seconds / 3600)} h ${two(Math.floor(seconds / 60) % 60)} min`
}

/**
 * What somebody else did to the chapters `ids`, in one line: 'Ivo marked step 7, glue'.
 * Null when none of them differs.
 */
export function changeWords(before: readonly ChapterView[], after: readonly ChapterView[], ids: ReadonlySet<string>, steps: readonly StepView[]): string | null {
  const old = new Map(before.map(one => [one.id, one]))
  const now = new Map(after.map(one => [one.id, one]))
  const lines: string[] = []
  for (const id of ids) {
    const [was, is] = [old.get(id), now.get(id)]
    if (is && was?.version !== is.version) lines.push(`${is.updatedBy ?? 'Somebody'} ${was ? verb(was, is) : 'marked'} ${chapterName(is, steps)}`)
    else if (was && !is) lines.push(`Somebody deleted ${chapterName(was, steps)}`)
  }
  if (!lines.length) return null
  // One action may change several chapters: what was made says most.
  const first = lines.find(line => line.includes(' marked ')) ?? lines[0]!
  return lines.length === 1 ? first : `${first}, and ${lines.length - 1} more ${lines.length === 2 ? 'change' : 'changes'}`
}

function verb(was: ChapterView, is: ChapterView): string {
  if (was.stepId !== is.stepId || was.operation !== is.operation) return 'retagged as'
  if (was.startMs !== is.startMs || was.endMs !== is.endMs) return 'moved an edge of'
  if (was.inking !== is.inking) return 'inked'
  return 'changed'
}
