import type { Inking, Operation } from '#shared/types/trade'
import { isStopWord, stemsOf, tokenise } from '../words/tokenise'

/** About what one answer takes to say, ms. */
const LONGEST_MS = 30_000
/** From here on a passage ends at the next pause or full stop. */
const LONG_ENOUGH_MS = 18_000
/** Silence between two cues that parts one thing from the next, ms. */
const PAUSE_MS = 1_200
/** Words kept in one passage; a cue of more is a pasted essay, not speech. */
const MOST_STEMS = 1_000

export interface PassageCue { trackId: string, startMs: number, endMs: number, text: string }

export interface PassageChapter {
  id: string
  startMs: number
  endMs: number
  stepId: string | null
  operation: Operation
  inking: Inking
  partIds: string[]
  /** Words of its tags: step title, part names and aliases, note. */
  words: string[]
}

export interface CutPassage {
  trackId: string | null
  chapterId: string | null
  startMs: number
  endMs: number
  starts: number[]
  lines: string[]
  /** Distinct, sorted. */
  lexemes: string[]
}

/**
 * Cuts a clip's cues into passages of at most half a minute or so, one caption track at a time, never across
 * the edge of a chapter. A cue belongs to the chapter in which it starts. A chapter in which nothing is said
 * becomes a passage of its own, found by its tags.
 *
 * @param cues by track, then by start
 * @param chapters by start, not overlapping
 */
export function cutPassages(buildId: string, cues: PassageCue[], chapters: PassageChapter[]): CutPassage[] {
  const passages: CutPassage[] = []
  const heard = new Set<string>()
  let open: PassageCue[] = []
  let chapter: PassageChapter | undefined
  const close = () => {
    if (!open.length) return
    if (chapter) heard.add(chapter.id)
    passages.push(passageOf(buildId, open, chapter))
    open = []
  }
  for (const cue of cues) {
    const here = chapterAt(chapters, cue.startMs)
    const first = open[0]
    const last = open.at(-1)
    if (!first || !last || here !== chapter || cue.trackId !== last.trackId || endsPassage(first, last, cue)) {
      close()
      chapter = here
    }
    open.push(cue)
  }
  close()
  for (const silent of chapters) {
    if (heard.has(silent.id) || (silent.operation === 'none' && !silent.stepId)) continue
    passages.push({ trackId: null, chapterId: silent.id, startMs: silent.startMs, endMs: silent.endMs, starts: [], lines: [], lexemes: sorted(tagLexemes(buildId, silent)) })
  }
  return passages
}

function endsPassage(first: PassageCue, last: PassageCue, next: PassageCue): boolean {
  if (next.endMs - first.startMs > LONGEST_MS) return true
  const pause = next.startMs - last.endMs
  if (pause >= PAUSE_MS * 3) return true
  return last.endMs - first.startMs >= LONG_ENOUGH_MS && (pause >= PAUSE_MS || /[.!?]["'”’]?\s*$/.test(last.text))
}

function chapterAt(chapters: PassageChapter[], ms: number): PassageChapter | undefined {
  let low = 0
  let high = chapters.length - 1
  while (low <= high) {
    const middle = (low + high) >> 1
    const chapter = chapters[middle]!
    if (ms < chapter.startMs) high = middle - 1
    else if (ms >= chapter.endMs) low = middle + 1
    else return chapter
  }
  return undefined
}

function passageOf(buildId: string, cues: PassageCue[], chapter: PassageChapter | undefined): CutPassage {
  const stems = new Set<string>()
  for (const cue of cues) {
    for (const token of tokenise(cue.text)) {
      if (stems.size < MOST_STEMS && !isStopWord(token.word)) stems.add(token.stem)
    }
  }
  const tags = chapter ? tagLexemes(buildId, chapter) : [`b:${buildId}`]
  return {
    trackId: cues[0]!.trackId,
    chapterId: chapter?.id ?? null,
    startMs: cues[0]!.startMs,
    endMs: Math.max(...cues.map(cue => cue.endMs)),
    starts: cues.map(cue => cue.startMs),
    lines: cues.map(cue => cue.text),
    lexemes: sorted([...stems, ...tags]),
  }
}

/** Tags as lexemes, so that one index answers for words, tags, build and inking together. */
function tagLexemes(buildId: string, chapter: PassageChapter): string[] {
  return [
    `b:${buildId}`, `o:${chapter.operation}`,
    ...chapter.inking === 'inked' ? ['i:1'] : [],
    ...chapter.stepId ? [`s:${chapter.stepId}`] : [],
    ...chapter.partIds.map(id => `p:${id}`),
    ...chapter.words.flatMap(text => stemsOf(text)).map(stem => `t:${stem}`),
  ]
}

const sorted = (lexemes: string[]) => [...new Set(lexemes)].sort()
