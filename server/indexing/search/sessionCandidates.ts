import type { Operation } from '#shared/types/trade'
import type { PencilledChapter, PlanPart, PlanStep, SpokenClip } from '../pencil/types'
import { isStopWord, stemsOf, tokenise } from '../words/tokenise'
import { cutPassages, type PassageChapter } from './cutPassages'
import { markWords } from './mark'
import { type Candidate, rank, spread } from './rank'
import type { Frequencies, SearchPlan } from './types'
import { understand } from './understand'

export interface SessionCandidate extends Candidate { clip: number, step: number | null }

/** Everything said in one session as candidates for ranking, as the site would keep it. Steps and parts are named by their number and name. */
export interface SearchableSession { plan: SearchPlan, candidates: SessionCandidate[], frequencies: Frequencies }

/** The same passages that the site keeps, without a database: a session that was just pencilled, ready to be asked. */
export function searchableSession(steps: PlanStep[], parts: PlanPart[], clips: readonly SpokenClip[], chapters: PencilledChapter[]): SearchableSession {
  const aliases = new Map(parts.map(part => [part.name, part.aliases]))
  const titles = new Map(steps.map(step => [step.number, step.title]))
  const plan: SearchPlan = {
    steps: steps.map(step => ({ id: String(step.number), number: step.number, title: step.title, stage: step.stage, description: step.description, parts: step.parts, materials: step.materials })),
    parts: parts.map(part => ({ id: part.name, name: part.name, aliases: part.aliases, material: part.material })),
  }
  const candidates = clips.flatMap((clip, clipAt) => {
    const own = new Map<string, { chapter: PencilledChapter, passage: PassageChapter }>()
    for (const chapter of chapters) {
      if (chapter.clip !== clipAt) continue
      const id = `${clipAt}-${own.size}`
      own.set(id, { chapter, passage: {
        id, startMs: chapter.startMs, endMs: chapter.endMs, stepId: chapter.step === null ? null : String(chapter.step), operation: chapter.operation,
        inking: chapter.fixed ? 'inked' : 'pencilled', partIds: chapter.parts,
        words: [titles.get(chapter.step ?? -1) ?? '', ...chapter.parts.map(name => [name, ...aliases.get(name) ?? []].join(' '))],
      } })
    }
    const cues = clip.cues.map(cue => ({ trackId: String(clipAt), ...cue }))
    return cutPassages('session', cues, [...own.values()].map(({ passage }) => passage)).map((passage, i): SessionCandidate => {
      const of = passage.chapterId ? own.get(passage.chapterId)! : null
      return {
        id: `${clipAt}-${i}`, clipId: String(clipAt), clip: clipAt, trackId: passage.trackId, startMs: passage.startMs, endMs: passage.endMs, starts: passage.starts, lines: passage.lines,
        chapter: of && { id: of.passage.id, startMs: of.passage.startMs, endMs: of.passage.endMs, stepId: of.passage.stepId, operation: of.passage.operation, inking: of.passage.inking, confidence: of.chapter.confidence, partIds: of.passage.partIds },
        tagStems: new Set(of?.passage.words.flatMap(text => stemsOf(text)) ?? []),
        step: of?.chapter.step ?? null,
      }
    })
  })
  return { plan, candidates, frequencies: countStems(candidates) }
}

/** In how many passages each stem is said, as the site counts. */
export function countStems(candidates: Candidate[]): Frequencies {
  const of = new Map<string, number>()
  const spoken = candidates.filter(candidate => candidate.lines.length)
  for (const candidate of spoken) {
    const stems = new Set(candidate.lines.flatMap(line => tokenise(line)).filter(token => !isStopWord(token.word)).map(token => token.stem))
    for (const stem of stems) of.set(stem, (of.get(stem) ?? 0) + 1)
  }
  return { passages: spoken.length, of }
}

/** A place in a session that answers a question. Times in ms of the clip, which is the index of its caption file. */
export interface AnsweringMoment { clip: number, startMs: number, endMs: number, step: number | null, operation: Operation, score: number, words: string }

/** The best answers to a question, best first, none next to another. */
export function answersIn({ plan, candidates, frequencies }: SearchableSession, q: string, most = 10): AnsweringMoment[] {
  const question = understand(q, plan)
  return spread(rank(question, candidates, frequencies)).slice(0, most).map(({ candidate, score, atMs, line }) => ({
    clip: candidate.clip,
    startMs: atMs,
    endMs: candidate.endMs,
    step: candidate.step,
    operation: candidate.chapter?.operation ?? 'none',
    score,
    words: markWords(candidate.lines, Math.max(0, line), question.concepts).text,
  }))
}
