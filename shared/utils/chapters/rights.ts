import type { ChapterView } from '#shared/types/session'
import type { Role } from '#shared/types/trade'

/** Somebody who works on a build. */
export interface Hand { id: string | undefined, role: Role | null }

/**
 * Who may change, cut or delete a chapter: the builder any; crew those that are pencilled and those that they inked
 * themselves. What another person has inked stays as it is: it may be published already, and crew do not unpublish.
 */
export function mayChange(chapter: Pick<ChapterView, 'inking' | 'inkedBy'>, { id, role }: Hand): boolean {
  if (role === 'builder') return true
  return role === 'crew' && (chapter.inking === 'pencilled' || (chapter.inkedBy !== null && chapter.inkedBy.id === id))
}

/** The chapters, as the server has them, that an edit would change though it may not. */
export function forbiddenIn(edit: { put: readonly { id: string }[], remove: readonly { id: string }[] }, kept: readonly ChapterView[], hand: Hand): ChapterView[] {
  const named = new Set([...edit.put, ...edit.remove].map(one => one.id))
  return kept.filter(one => named.has(one.id) && !mayChange(one, hand))
}

/** Why such a chapter stays as it is, for people. */
export function forbiddenWords(chapter: Pick<ChapterView, 'inkedBy'>): string {
  return chapter.inkedBy
    ? `${chapter.inkedBy.name} has inked this chapter. Crew change what is pencilled and what they inked themselves.`
    : 'This chapter is inked: only the builder can change it.'
}
