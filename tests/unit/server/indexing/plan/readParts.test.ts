import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readParts } from '#server/indexing/plan/readParts'
import { refusal } from './support'

describe('a parts file', () => {
  it('is read whole', () => {
    const reading = readParts(readFileSync('tests/fixtures/plan/skiff-parts.csv'))
    expect(reading).toMatchObject({ problems: [], unknownColumns: [] })
    expect(reading.parts).toHaveLength(17)
    expect(reading.parts[7]).toEqual({ row: 9, name: 'inside seam tape', aliases: ['tape', 'glass tape'], material: 'woven glass tape 75 mm wide', thicknessMm: 0.3, quantity: 3 })
  })

  it('takes a heading with its unit in brackets, a decimal comma and a thickness in inches', () => {
    const reading = readParts('Name;Thickness (mm);Quantity\nfin;6,5;2\nskeg;1/4 in;\nkeel;19 mm;1')
    expect(reading.problems).toEqual([])
    expect(reading.parts.map(part => [part.name, part.thicknessMm, part.quantity])).toEqual([['fin', 6.5, 2], ['skeg', 6.35, null], ['keel', 19, 1]])
  })

  it('takes common headings for its own', () => {
    const reading = readParts('Part,Qty,Wood\nfin,2,ply')
    expect(reading).toMatchObject({ problems: [], unknownColumns: [], parts: [{ name: 'fin', quantity: 2, material: 'ply' }] })
  })

  it('drops empty aliases and ones that are there already', () => {
    expect(readParts('name,aliases\ntransom,"back end; ;Back  End;stern"').parts[0]!.aliases).toEqual(['back end', 'stern'])
  })
})

describe('what is wrong is said by row and column', () => {
  it.each([
    ['no name', ',,ply,9,1', 'Row 2, name: Give the part a name.'],
    ['a thickness in words', 'fin,,ply,thick,1', 'Row 2, thickness_mm: “thick” is not a thickness in millimetres. Write it as 9 or 6.5.'],
    ['no thickness at all', 'fin,,ply,0,1', 'Row 2, thickness_mm: Thickness must be more than nothing.'],
    ['half a part', 'fin,,ply,9,1.5', 'Row 2, quantity: “1.5” is not a whole number of pieces.'],
    ['none of a part', 'fin,,ply,9,0', 'Row 2, quantity: Quantity starts at 1.'],
    ['a semicolon in a name', 'fin;keel,,ply,9,1', 'Row 2, name: Leave the semicolon out of a part\'s name: lists of parts are separated by it.'],
  ])('%s', (_, row, message) => {
    expect(readParts(`name,aliases,material,thickness_mm,quantity\n${row}`).problems.map(problem => problem.message)).toEqual([message])
  })

  it('the same part twice, whatever its letter case', () => {
    expect(readParts('name\nFin\nfin').problems.map(problem => problem.message)).toEqual(['Row 3, name: “fin” is already in row 2. Each part is listed once.'])
  })

  it('no column of names', () => {
    expect(refusal(() => readParts('material,quantity\nply,1'))).toContain('The table has no column “name”.')
  })
})
