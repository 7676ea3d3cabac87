/**
 * How alike two stems are by their letters, 0 to 1: shared trigrams (Dice), for words that were formed or heard
 * otherwise ("symmetrical" and "symmetry", "chine" and "shine"). What is less than half alike is not alike.
 */
export function likeness(a: string, b: string): number {
  if (a === b) return 1
  const first = trigramsOf(a)
  const second = trigramsOf(b)
  let both = 0
  for (const trigram of first) if (second.has(trigram)) both++
  const share = 2 * both / (first.size + second.size)
  return share < 0.5 ? 0 : share
}

const known = new Map<string, Set<string>>()
const REMEMBERED = 20_000

function trigramsOf(word: string): Set<string> {
  const before = known.get(word)
  if (before) return before
  const padded = ` ${word} `
  const trigrams = new Set<string>()
  for (let i = 0; i + 3 <= padded.length; i++) trigrams.add(padded.slice(i, i + 3))
  if (known.size >= REMEMBERED) known.clear()
  known.set(word, trigrams)
  return trigrams
}
