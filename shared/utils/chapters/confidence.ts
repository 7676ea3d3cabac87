import type { ChapterView } from '#shared/types/session'

/** What may be inked in one go: of such chapters nine in ten are right, or more. */
export const NEARLY_CERTAIN = 0.9

/** How sure the program is, in words: a share of 0.8 means that about 80 of 100 such chapters are right. */
export function confidenceWords(confidence: number): string {
  if (confidence >= NEARLY_CERTAIN) return 'almost certain'
  if (confidence >= 0.7) return 'fairly sure'
  if (confidence >= 0.5) return 'more likely than not'
  if (confidence >= 0.3) return 'unsure'
  return 'a guess'
}

/** Never nought: what is offered may be right. */
export const percent = (share: number): string => share < 0.005 ? '< 1 %' : `${Math.round(share * 100)} %`

/** Proposals that are almost certain. */
export const nearlyCertain = (chapters: readonly ChapterView[]): ChapterView[] => chapters.filter(one => one.inking === 'pencilled' && (one.confidence ?? 0) >= NEARLY_CERTAIN)
