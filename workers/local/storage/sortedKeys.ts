/** Order of S3 listings: by UTF-8 bytes, which JavaScript's own string order is not beyond U+FFFF. */
export function compareKeys(a: string, b: string): number {
  const length = Math.min(a.length, b.length)
  for (let i = 0; i < length; i++) {
    const [x, y] = [a.charCodeAt(i), b.charCodeAt(i)]
    if (x === y) continue
    const [xSurrogate, ySurrogate] = [x >= 0xD800 && x <= 0xDFFF, y >= 0xD800 && y <= 0xDFFF]
    return xSurrogate === ySurrogate ? x - y : xSurrogate ? 1 : -1
  }
  return a.length - b.length
}

/** Index of the first key that is not before `key`. */
export function lowerBound(sorted: readonly string[], key: string): number {
  let [low, high] = [0, sorted.length]
  while (low < high) {
    const middle = (low + high) >>> 1
    if (compareKeys(sorted[middle]!, key) < 0) low = middle + 1
    else high = middle
  }
  return low
}

export interface KeyPage { keys: string[], prefixes: string[], next: string | null }

/**
 * One page of a listing. `after` is the key or common prefix that the page before ended with.
 * Keys that share a prefix up to the delimiter are folded into one entry, which counts as one.
 */
export function pageOfKeys(sorted: readonly string[], options: { prefix: string, delimiter: string, after: string, max: number }): KeyPage {
  const { prefix, delimiter, after, max } = options
  const page: KeyPage = { keys: [], prefixes: [], next: null }
  let last = ''
  let at = lowerBound(sorted, compareKeys(after, prefix) > 0 ? after : prefix)
  while (at < sorted.length && sorted[at]!.startsWith(prefix)) {
    const key = sorted[at]!
    const cut = delimiter ? key.indexOf(delimiter, prefix.length) : -1
    const folded = cut < 0 ? null : key.slice(0, cut + delimiter.length)
    const seen = folded === null ? after !== '' && compareKeys(key, after) <= 0 : folded === after || (after.startsWith(folded) && compareKeys(key, after) <= 0)
    if (!seen) {
      if (page.keys.length + page.prefixes.length >= max) {
        page.next = last || null
        return page
      }
      if (folded === null) page.keys.push(key)
      else page.prefixes.push(folded)
      last = folded ?? key
    }
    // A folded prefix may stand for very many keys: step over them at once.
    if (folded !== null && !seen) while (at < sorted.length && sorted[at]!.startsWith(folded)) at++
    else at++
  }
  return page
}
