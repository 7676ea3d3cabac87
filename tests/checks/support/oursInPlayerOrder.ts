import { orderCues } from '#server/indexing/captions/order'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import type { Cue } from '#shared/types/captions'
import { DomainError } from '#shared/utils/errors'

/** Our cues in the order of a player; none for a file that is refused, as a player has none. */
export function oursInPlayerOrder(text: string, name: string): Cue[] {
  try {
    return orderCues(readCaptions(new TextEncoder().encode(text), { name }).cues)
  }
  catch (error) {
    if (error instanceof DomainError && error.code === 'unreadable') return []
    throw error
  }
}
