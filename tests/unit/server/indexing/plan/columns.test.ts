import { describe, expect, it } from 'vitest'
import { columnsOf, kindOfTable, knownHeadings } from '#server/indexing/plan/columns'

describe('headings of people\'s own sheets', () => {
  it.each([
    ['parts', ['Part', 'Qty', 'Timber'], ['name', 'quantity', 'material']],
    ['parts', ['Item', 'How many?', 'Also called'], ['name', 'quantity', 'aliases']],
    ['steps', ['Step No.', 'Phase', 'Task', 'Details', 'Hours'], ['number', 'stage', 'title', 'description', 'planned_hours']],
    ['parts', ['colour', 'thickness'], ['colour', 'thickness']],
  ] as const)('of %s are known: %j', (kind, headings, columns) => expect(columnsOf([...headings], kind)).toEqual(columns))

  it('the column\'s own name goes before what stands for it, whichever is first', () => {
    expect(columnsOf(['qty', 'quantity', 'part', 'item'], 'parts')).toEqual(['qty', 'quantity', 'name', 'item'])
  })
})

describe('what a table holds', () => {
  it.each([
    ['parts', ['Part', 'Qty', 'Material']],
    ['parts', ['name', 'material', 'thickness (mm)']],
    ['steps', ['number', 'title', 'materials', 'parts']],
    ['steps', ['Step', 'Task', 'Hours', 'Material', 'Qty']],
    [undefined, ['colour', 'price']],
  ])('is %s for %j', (kind, headings) => expect(kindOfTable(headings)).toBe(kind))

  it('is told by the headings as written', () => {
    expect(knownHeadings(['Part', 'Price', 'Qty'], 'parts')).toEqual(['Part', 'Qty'])
  })
})
