/**
 * How many slips lie between two words: letters left out, put in, changed, or two neighbours swapped
 * (optimal string alignment). Stops counting above `most` and returns `most + 1`.
 */
export function slips(a: string, b: string, most: number): number {
  if (Math.abs(a.length - b.length) > most) return most + 1
  let before: number[] = []
  let last = Array.from({ length: b.length + 1 }, (_, i) => i)
  for (let i = 1; i <= a.length; i++) {
    const row = [i]
    let least = i
    for (let j = 1; j <= b.length; j++) {
      const same = a[i - 1] === b[j - 1]
      let cost = Math.min(last[j]! + 1, row[j - 1]! + 1, last[j - 1]! + (same ? 0 : 1))
      if (i > 1 && j > 1 && a[i - 1] === b[j - 2] && a[i - 2] === b[j - 1]) cost = Math.min(cost, before[j - 2]! + 1)
      row.push(cost)
      least = Math.min(least, cost)
    }
    if (least > most) return most + 1
    before = last
    last = row
  }
  return Math.min(last[b.length]!, most + 1)
}

/** Slips forgiven in a word: short words are too near to other words. */
export function forgiven(word: string): number {
  return word.length <= 3 ? 0 : word.length <= 7 ? 1 : 2
}

/** Slips that leave a word still like another, for suggestions that a person chooses from: one in every three letters. */
export function alike(word: string): number {
  return Math.min(3, Math.floor(word.length / 3))
}

export interface SpelledWord { word: string, /** How often it is said. */ count: number }

/**
 * The words nearest to what was typed, likeliest first: fewest slips, then said most often. The first letter is
 * hardly ever mistyped, and words that differ in it ("reach", "each") are mostly both meant.
 */
export function nearest(typed: string, vocabulary: SpelledWord[], most = forgiven(typed)): SpelledWord[] {
  return vocabulary
    .filter(entry => entry.word[0] === typed[0])
    .map(entry => ({ entry, distance: slips(typed, entry.word, most) }))
    .filter(({ distance }) => distance > 0 && distance <= most)
    .sort((a, b) => a.distance - b.distance || b.entry.count - a.entry.count || (a.entry.word < b.entry.word ? -1 : 1))
    .map(({ entry }) => entry)
}
