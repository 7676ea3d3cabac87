/** The words of a caption, cut where something stands that is looked for, or that decided a chapter. */
export interface Piece { text: string, kind: 'plain' | 'found' | 'evidence' }

/**
 * @param looked what somebody looks for, as typed
 * @param evidence words as the program heard them: without case, marks or the spaces between
 */
export function piecesOf(text: string, looked: string, evidence: readonly string[]): Piece[] {
  const marks: { from: number, to: number, kind: 'found' | 'evidence' }[] = []
  const wanted = looked.trim().toLocaleLowerCase('en')
  const low = text.toLocaleLowerCase('en')
  // Letters that grow in lower case would shift every place after them.
  if (wanted && low.length === text.length) for (let at = low.indexOf(wanted); at >= 0; at = low.indexOf(wanted, at + wanted.length)) marks.push({ from: at, to: at + wanted.length, kind: 'found' })
  for (const words of evidence) {
    const parts = words.match(/[\p{L}\p{N}]+/gu)
    if (!parts) continue
    const found = new RegExp(`(?<![\\p{L}\\p{N}])${parts.join('[^\\p{L}\\p{N}]+')}(?![\\p{L}\\p{N}])`, 'iu').exec(text)
    if (found) marks.push({ from: found.index, to: found.index + found[0].length, kind: 'evidence' })
  }
  const pieces: Piece[] = []
  let at = 0
  // What somebody looks for is shown first where both stand.
  for (const mark of marks.sort((a, b) => a.from - b.from || Number(a.kind === 'evidence') - Number(b.kind === 'evidence'))) {
    if (mark.from < at) continue
    if (mark.from > at) pieces.push({ text: text.slice(at, mark.from), kind: 'plain' })
    pieces.push({ text: text.slice(mark.from, mark.to), kind: mark.kind })
    at = mark.to
  }
  if (at < text.length || !pieces.length) pieces.push({ text: text.slice(at), kind: 'plain' })
  return pieces
}
