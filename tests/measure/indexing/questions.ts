import { rank, type AnswerWeights, spread } from '#server/indexing/search/rank'
import { weightOf } from '#server/indexing/search/rarity'
import type { Frequencies } from '#server/indexing/search/types'
import { understand } from '#server/indexing/search/understand'
import { stemsOf } from '#server/indexing/words/tokenise'
import { EARLY_MS, fitAnswers, linesOf, searchable } from './answering'
import type { LabelledSession } from './load'

export interface AnswerTally { asked: number, first: number, firstThree: number, reciprocal: number }

const MOST = 10

/** Counts right answers: one that starts from 5 s before the true span to its end. Times in ms, best first. */
export function tallyAnswers(questions: { startMs: number, endMs: number }[], answers: number[][]): AnswerTally {
  const tally: AnswerTally = { asked: 0, first: 0, firstThree: 0, reciprocal: 0 }
  questions.forEach(({ startMs, endMs }, i) => {
    const place = answers[i]!.slice(0, MOST).findIndex(at => at >= startMs - EARLY_MS && at <= endMs)
    tally.asked++
    if (place === 0) tally.first++
    if (place >= 0 && place < 3) tally.firstThree++
    if (place >= 0) tally.reciprocal += 1 / (place + 1)
  })
  return tally
}

export function answerFigures(tallies: AnswerTally[]): { asked: number, first: number, firstThree: number, mrr: number } {
  const sum = (key: keyof AnswerTally) => tallies.reduce((total, tally) => total + tally[key], 0)
  const asked = sum('asked')
  return { asked, first: sum('first') / asked, firstThree: sum('firstThree') / asked, mrr: sum('reciprocal') / asked }
}

/** The program's answers to a session's questions, as starts. */
export function ribbandAnswers(session: LabelledSession, weights?: AnswerWeights): number[][] {
  const { plan, candidates, frequencies } = searchable(session)
  return session.truth.questions.map(({ q }) => spread(rank(understand(q, plan), candidates, frequencies, weights)).map(moment => moment.atMs))
}

/** What an hour's work gives: BM25 of every cue by itself (k1 1.2, b 0.75) over stems, without stop words. */
export function plainAnswers(session: LabelledSession): number[][] {
  const documents = session.cues.map(cue => stemsOf(cue.text))
  const mean = documents.reduce((sum, words) => sum + words.length, 0) / Math.max(1, documents.length)
  const of = new Map<string, number>()
  for (const words of documents) for (const word of new Set(words)) of.set(word, (of.get(word) ?? 0) + 1)
  const frequencies: Frequencies = { passages: documents.length, of }
  return session.truth.questions.map(({ q }) => {
    const asked = [...new Set(stemsOf(q))]
    return session.cues
      .map((cue, i) => ({ startMs: cue.startMs, score: bm25(asked, documents[i]!, mean, frequencies) }))
      .filter(({ score }) => score > 0)
      .sort((a, b) => b.score - a.score || a.startMs - b.startMs)
      .map(({ startMs }) => startMs)
  })
}

export function bm25(asked: string[], words: string[], mean: number, frequencies: Frequencies, k1 = 1.2, b = 0.75): number {
  return asked.reduce((score, word) => {
    const n = words.filter(other => other === word).length
    return score + (n ? weightOf(word, frequencies) * n * (k1 + 1) / (n + k1 * (1 - b + b * words.length / mean)) : 0)
  }, 0)
}

/** Every session's answers by weights that were fitted on the questions of other builds. */
export function crossValidatedAnswers(sessions: LabelledSession[]): { session: LabelledSession, tally: AnswerTally }[] {
  const asked = sessions.flatMap(linesOf)
  return [...new Set(sessions.map(session => session.build))].flatMap((build) => {
    const weights = fitAnswers(asked.filter(one => one.build !== build))
    return sessions.filter(session => session.build === build).map(session => ({ session, tally: tallyAnswers(session.truth.questions, ribbandAnswers(session, weights)) }))
  })
}
