import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { compareParts } from '#server/indexing/plan/compareParts'
import { comparePlan } from '#server/indexing/plan/comparePlan'
import { readParts } from '#server/indexing/plan/readParts'
import { readPlan } from '#server/indexing/plan/readPlan'
import { writeParts, writePlan } from '#server/indexing/plan/writePlan'
import { cleanLine, cleanProse, distinct } from '#shared/schemas/text'
import { aPart, aPlan, aStep } from './support'

// Letters, and everything that means something to a table: separators, quotes, bars, escapes, formulas, line ends.
const awkward = fc.string({ unit: fc.oneof({ weight: 3, arbitrary: fc.constantFrom(...'abC 1½é,"\'\t\n|\\<>=+-@;`*_#') }, { weight: 1, arbitrary: fc.constantFrom('<br>', '\\|', '|---|', '\uFEFF', '🛶') }), maxLength: 14 })
const lineText = awkward.map(cleanLine)
const entry = lineText.map(text => cleanLine(text.replace(/;/g, ''))).filter(Boolean)
const list = fc.array(entry, { maxLength: 4 }).map(distinct)

const partList = fc.uniqueArray(fc.record({
  name: entry, aliases: list, material: lineText,
  thicknessMm: fc.option(fc.integer({ min: 1, max: 100_000_000 }).map(thousandths => thousandths / 1000)),
  quantity: fc.option(fc.integer({ min: 1, max: 100_000 })),
}), { selector: part => part.name.toLowerCase(), maxLength: 6 }).map(parts => parts.map(aPart))

const plan = partList.chain(parts => fc.uniqueArray(fc.record({
  number: fc.integer({ min: 1, max: 99_999 }), stage: lineText, title: lineText.filter(Boolean), description: awkward.map(cleanProse), materials: list,
  partIds: fc.subarray(parts.map(part => part.id)),
  plannedMinutes: fc.option(fc.integer({ min: 0, max: 600_000 })),
}), { selector: step => step.number, minLength: 1, maxLength: 6 }).map(steps => aPlan(steps.map(aStep), parts)))

const format = fc.constantFrom('csv' as const, 'md' as const)

describe('what is exported comes back the same', () => {
  it('steps, in both formats', () => {
    fc.assert(fc.property(plan, format, (before, as) => {
      const reading = readPlan(Buffer.from(writePlan(before, as)))
      expect(reading.problems).toEqual([])
      const { placings, newParts, staying } = comparePlan(before, reading.steps)
      expect(placings.map(placing => placing.preview.changes)).toEqual(before.steps.map(() => []))
      expect([newParts, staying]).toEqual([[], []])
    }), { numRuns: 150 })
  }, 60_000)

  it('parts, in both formats', () => {
    fc.assert(fc.property(partList.filter(parts => parts.length > 0), format, (before, as) => {
      const reading = readParts(Buffer.from(writeParts(before, as)))
      expect(reading.problems).toEqual([])
      expect(compareParts(before, reading.parts).placings.map(placing => placing.preview.outcome)).toEqual(before.map(() => 'same'))
    }), { numRuns: 150 })
  }, 60_000)
})

describe('the file itself', () => {
  const fin = aPart({ name: 'fin' })
  const before = aPlan([
    aStep({ number: 1, title: 'Say "when"', stage: '=SUM(A1)', description: 'One,\ntwo', partIds: [fin.id], materials: ['ply', 'tape'], plannedMinutes: 150 }),
    aStep({ number: 2, archived: true }),
  ], [fin])

  it('is RFC 4180 with a byte order mark, and a spreadsheet runs nothing in it', () => {
    expect(writePlan(before, 'csv')).toBe('\uFEFFnumber,stage,title,description,parts,materials,planned_hours\r\n1,\'=SUM(A1),"Say ""when""","One,\ntwo",fin,"ply;tape",2.5\r\n')
  })

  it('is a table in Markdown', () => {
    expect(writePlan(before, 'md')).toBe('| number | stage | title | description | parts | materials | planned_hours |\n| --- | --- | --- | --- | --- | --- | --- |\n| 1 | =SUM(A1) | Say "when" | One,<br>two | fin | ply;tape | 2.5 |\n')
  })
})
