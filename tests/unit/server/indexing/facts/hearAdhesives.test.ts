import { describe, expect, it } from 'vitest'
import { hearAdhesives } from '#server/indexing/facts/hearAdhesives'
import { spoken } from './support'

const named = (...texts: string[]) => hearAdhesives(spoken(...texts)).map(fact => fact.text)

describe('glues, resins and sealants', () => {
  it.each([
    ['this is epoxy with wood flour', 'epoxy with wood flour'],
    ['it\'s just yellow carpenter\'s glue', 'yellow carpenter\'s glue'],
    ['I\'m using the slow epoxy', 'slow epoxy'],
    ['it gets unthickened epoxy', 'unthickened epoxy'],
    ['bedded in butyl mastic', 'butyl mastic'],
    ['stuck with hide glue', 'hide glue'],
    ['it gets a smear of polyurethane sealant', 'polyurethane sealant'],
    ['glued up with two-part epoxy thickened with silica and wood flour', 'two-part epoxy thickened with silica and wood flour'],
  ])('%s', (text, words) => expect(hearAdhesives(spoken(text))).toEqual([{ atMs: 0, kind: 'adhesive', text: words, value: null, unit: null }]))

  it.each(['it\'s not epoxy', 'don\'t use epoxy', 'the epoxy is cold', 'it\'s the glue day', 'it gets epoxy', 'give it a coat of straight epoxy', ''])('names none in “%s”', text => expect(named(text)).toEqual([]))

  it('has the time of the cue where its name starts', () => {
    expect(hearAdhesives(spoken('right then', 'this is', 'slow', 'epoxy'))).toMatchObject([{ atMs: 8000, text: 'slow epoxy' }])
  })

  it('names one once in ten minutes', () => {
    const clip = { cues: [0, 60_000, 599_000, 1_300_000].map(startMs => ({ startMs, endMs: startMs + 2000, text: 'this is slow epoxy' })) }
    expect(hearAdhesives(clip).map(fact => fact.atMs)).toEqual([0, 1_300_000])
  })
})
