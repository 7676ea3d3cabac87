import { describe, expect, it } from 'vitest'
import { markWords } from '#server/indexing/search/mark'
import { type Candidate, rank } from '#server/indexing/search/rank'
import { weightOf } from '#server/indexing/search/rarity'
import type { SearchPlan } from '#server/indexing/search/types'
import { understand } from '#server/indexing/search/understand'

const plan: SearchPlan = { steps: [], parts: [{ id: 'bow', name: 'bow transom', aliases: [] }, { id: 'chine', name: 'chine log', aliases: [] }] }
const frequencies = { passages: 1000, of: new Map([['glue', 300], ['transom', 60], ['chine', 80], ['log', 90], ['epoxi', 200], ['sapel', 3], ['clamp', 150]]) }
const passage = (id: string, lines: string[], chapter: Partial<NonNullable<Candidate['chapter']>> | null = null, startMs = 60_000): Candidate => ({
  id, clipId: `clip-${id}`, startMs, endMs: startMs + lines.length * 4000, starts: lines.map((_, i) => startMs + i * 4000), lines, tagStems: new Set(),
  chapter: chapter && { id: `c-${id}`, startMs: 0, endMs: 600_000, stepId: null, operation: 'none', inking: 'inked', confidence: null, partIds: [], ...chapter },
})
const order = (question: string, candidates: Candidate[]) => rank(understand(question, plan), candidates, frequencies).map(moment => moment.candidate.id)

describe('rank', () => {
  it('puts words and tags together before either alone', () => {
    const both = passage('both', ['now glue the bow transom'], { operation: 'glue', partIds: ['bow'] })
    const tags = passage('tags', ['pass me that'], { operation: 'glue', partIds: ['bow'] })
    const words = passage('words', ['now glue the bow transom'])
    const half = passage('half', ['the glue is in the pot'])
    expect(order('how was the bow transom glued', [half, words, tags, both])).toEqual(['both', 'words', 'tags', 'half'])
  })
  it('trusts ink over pencil, and pencil by how sure it is', () => {
    const tagged = (id: string, inking: 'inked' | 'pencilled', confidence: number | null) => passage(id, ['pass me that'], { operation: 'glue', partIds: ['bow'], inking, confidence })
    expect(order('glue the bow transom', [tagged('unsure', 'pencilled', 0.1), tagged('sure', 'pencilled', 0.9), tagged('inked', 'inked', null)])).toEqual(['inked', 'sure', 'unsure'])
  })
  it('counts rarer words for more', () => {
    expect(weightOf('sapel', frequencies)).toBeGreaterThan(weightOf('glue', frequencies))
    expect(order('sapele glue', [passage('common', ['glue and more glue']), passage('rare', ['the sapele is dry'])])).toEqual(['rare', 'common'])
  })
  it('prefers words as asked to other words for it', () => {
    expect(order('glue', [passage('epoxy', ['the epoxy']), passage('glue', ['the glue'])])).toEqual(['glue', 'epoxy'])
  })
  it('prefers a passage that holds the kind of answer wanted', () => {
    expect(order('how long does the glue cure', [passage('talk', ['the glue has to cure well']), passage('hours', ['the glue cures in 12 hours'])])).toEqual(['hours', 'talk'])
  })
  it('puts talk of other times last', () => {
    expect(order('glue the chine log', [passage('later', ['later we will glue the chine log']), passage('now', ['so we now glue the chine log'])])).toEqual(['now', 'later'])
  })
  it('starts where the answer starts', () => {
    const [moment] = rank(understand('chine log glue', plan), [passage('p', ['morning all', 'the kettle is on', 'so the glue goes on the chine log', 'all along the edge', 'done'])], frequencies)
    expect(moment).toMatchObject({ atMs: 68_000, line: 2 })
  })
  it('starts at the passage when only tags answer', () => {
    const [moment] = rank(understand('glue', plan), [passage('p', ['pass me that'], { operation: 'glue' })], frequencies)
    expect(moment).toMatchObject({ atMs: 60_000, line: -1 })
  })
  it('keeps one order whatever order candidates come in', () => {
    const list = Array.from({ length: 9 }, (_, i) => passage(`p${i}`, ['the glue'], null, i * 1000))
    expect(order('glue', list)).toEqual(order('glue', [...list].reverse()))
  })
  it('reads a phrase over the end of a line', () => {
    const [moment] = rank(understand('bow transom', plan), [passage('p', ['here is the bow', 'transom again'])], frequencies)
    expect(moment!.line).toBe(0)
  })
})

describe('markWords', () => {
  const marked = (question: string, lines: string[], line = 0) => {
    const { text, marks } = markWords(lines, line, understand(question, plan).concepts)
    return marks.map(([from, to]) => text.slice(from, to))
  }
  it('marks words asked for and their kin, not the small words between', () => {
    expect(marked('how was the bow transom glued', ['and the epoxy goes on the bow', 'of the transom, and back'])).toEqual(['epoxy', 'bow', 'transom'])
    expect(marked('bow transom', ['the bow transom is up'])).toEqual(['bow transom'])
  })
  it('keeps offsets right after accents and signs', () => expect(marked('epoxy', ['café 🛶 — epoxy!'])).toEqual(['epoxy']))
})
