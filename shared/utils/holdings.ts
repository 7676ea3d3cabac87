import type { Holdings } from '../types/holdings'
import { formatFootage } from './days'

const counted = (n: number, one: string, many = `${one}s`) => n ? [`${n.toLocaleString('en')} ${n === 1 ? one : many}`] : []

/** '2 clips (14 min), 9 chapters (5 of them inked) and 212 captions'; '' when there is nothing. */
export function holdingsWords(holdings: Holdings): string {
  const { sessions, clips, footageMs, chapters, inked, captions, corrected } = holdings
  const aside = (words: string[], note: string) => words.map(word => note ? `${word} (${note})` : word)
  const list = [
    ...counted(sessions, 'session'),
    ...aside(counted(clips, 'clip'), footageMs ? formatFootage(footageMs) : ''),
    ...aside(counted(chapters, 'chapter'), inked ? `${inked === chapters ? 'all' : `${inked.toLocaleString('en')} of them`} inked` : ''),
    ...aside(counted(captions, 'caption'), corrected ? `${corrected.toLocaleString('en')} corrected` : ''),
  ]
  return list.length > 1 ? `${list.slice(0, -1).join(', ')} and ${list.at(-1)}` : list[0] ?? ''
}
