import { describe, expect, it } from 'vitest'
import { OPERATION_LEXICON } from '#server/indexing/lexicon/operations'
import type { SearchPlan } from '#server/indexing/search/types'
import { understand, unknownWords } from '#server/indexing/search/understand'

const plan: SearchPlan = {
  steps: [
    { id: 's4', number: 4, title: 'Glue the cheeks to the bow transom' },
    { id: 's12', number: 12, title: 'Glue and screw the chine logs' },
    { id: 's26', number: 26, title: 'Laminate the gunwales' },
  ],
  parts: [
    { id: 'bow', name: 'bow transom', aliases: ['front transom'] },
    { id: 'stern', name: 'stern transom', aliases: ['back board'] },
    { id: 'cheek', name: 'transom cheek', aliases: ['cheeks'] },
    { id: 'chine', name: 'chine log', aliases: ['chine stringer'] },
    { id: 'gunwale', name: 'gunwale', aliases: ['rubbing rail'] },
  ],
}
const read = (question: string) => understand(question, plan)
const ids = (question: string) => read(question).parts.map(part => part.id).sort()

describe('parts', () => {
  it('are named by name, alias, plural and spelling', () => {
    expect(ids('the bow transom')).toEqual(['bow'])
    expect(ids('front transoms')).toEqual(['bow'])
    expect(ids('back board')).toEqual(['stern'])
    expect(ids('Gunnels')).toEqual(['gunwale'])
  })
  it('are named by the last word of their name, and no other', () => {
    expect(ids('how was the transom glued')).toEqual(['bow', 'stern'])
    expect(ids('transom cheek')).toEqual(['cheek'])
    expect(ids('log')).toEqual(['chine'])
    expect(ids('bow')).toEqual([])
  })
  it('may be several', () => expect(ids('gunwale against the chine log')).toEqual(['chine', 'gunwale']))
})

describe('operations', () => {
  it.each([
    ['how was it glued', 'glue'], ['epoxied on', 'glue'], ['what adhesive', 'glue'], ['bonded', 'glue'], ['glued up', 'glue'], ['stuck down', 'glue'],
    ['sawing', 'cut'], ['planed', 'shape'], ['dry fit', 'dry-fit'], ['pilot holes', 'drill'], ['countersunk or countersink', 'drill'], ['seal coat', 'seal-coat'],
    ['screws', 'fasten'], ['ring nailed', 'fasten'], ['filleted', 'fillet'], ['glassing', 'laminate'], ['wet out the cloth', 'laminate'], ['faired', 'sand-fair'], ['varnished', 'paint'],
    ['marking out', 'mark-out'], ['lofted', 'mark-out'], ['swept and tidied', 'clean-up'], ['deviation from the drawing', 'plan-talk'],
  ])('“%s” is %s', (question, operation) => expect(read(question).operations).toContain(operation))

  it('have every word of their lexicon read as one operation', () => {
    for (const words of Object.values(OPERATION_LEXICON)) {
      for (const phrase of words.plain.split(',')) expect(understand(phrase, { steps: [], parts: [] }).operations.length, phrase).toBeGreaterThan(0)
    }
  })
  it('are left to the part when they are part of its name', () => {
    expect(understand('glass tape', { steps: [], parts: [{ id: 't', name: 'glass tape', aliases: [] }] })).toMatchObject({ operations: [], parts: [{ id: 't' }] })
  })
})

describe('steps', () => {
  it('are named by number and by title', () => {
    expect(read('step 12').steps.map(step => step.id)).toEqual(['s12'])
    expect(read('step no. 4 clamps').steps.map(step => step.id)).toEqual(['s4'])
    expect(read('laminate the gunwales').steps.map(step => step.id)).toEqual(['s26'])
    expect(read('12 screws').steps).toEqual([])
  })
  it('are found by their tag when named by number, and the number is no word', () => {
    const { concepts, rest } = read('step 12')
    expect(concepts).toEqual([{ kind: 'step', label: 'step 12', ways: [], tags: [{ lexeme: 's:s12', weight: 1 }] }])
    expect(rest).toEqual([])
  })
})

describe('what is left', () => {
  it('keeps telling words, in the reader’s form', () => expect(read('why does he soak the peanut butter').rest).toEqual(['soak', 'peanut', 'butter']))
  it('reads tools as a hint of what they are for', () => {
    const { concepts } = read('jigsaw blade')
    expect(concepts[0]!.tags).toContainEqual({ lexeme: 'o:cut', weight: 0.2 })
  })
  it('is nothing for nothing', () => {
    for (const question of ['', '   ', '?!', 'how was it', '\u0000', '🛶']) expect(read(question).concepts).toEqual([])
  })
  it('bounds what a question may cost', () => {
    const { concepts } = read(Array.from({ length: 200 }, (_, i) => `word${String.fromCharCode(97 + i % 26)}x`).join(' '))
    expect(concepts.length).toBeLessThanOrEqual(8)
  })
})

describe('the kind of answer', () => {
  it.each([
    ['how long did the epoxy cure', 'time'], ['how long is the chine log', 'length'], ['what angle is the bevel', 'angle'], ['how many screws', 'count'], ['what ratio of epoxy', 'ratio'],
    ['why scarf it', 'reason'], ['what glue was it', 'product'], ['how was it done', 'manner'], ['how warm was the shop', 'temperature'], ['transom', null],
  ])('of “%s” is %s', (question, wanted) => expect(read(question).askedFor).toBe(wanted))
})

describe('slips of the pen', () => {
  it('are asked about only for words nobody knows', () => expect(unknownWords('glue the transon with plibber', plan).map(token => token.word)).toEqual(['transon', 'plibber']))
  it('are read as what was meant, and said', () => {
    const question = understand('transon glue', plan, new Map([['transon', 'transom']]))
    expect(question.corrections).toEqual([{ typed: 'transon', read: 'transom' }])
    expect(question.parts.map(part => part.id).sort()).toEqual(['bow', 'stern'])
  })
})

describe('the frame of a question', () => {
  it('says what is asked for and is not looked for itself', () => {
    const question = read('how long did the epoxy have')
    expect(question.rest).toEqual([])
    expect(question.operations).toEqual(['glue'])
    expect(question.askedFor).toBe('time')
    expect(read('how wide is the gunwale').rest).toEqual([])
    expect(read('the long plane').rest).toContain('long')
  })
})
