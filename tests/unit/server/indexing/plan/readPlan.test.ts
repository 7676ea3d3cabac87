import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { readPlan } from '#server/indexing/plan/readPlan'
import { problemsOf, refusal, stepsOf } from './support'

const HEAD = 'number,stage,title,description,parts,materials,planned_hours'

describe('a plan file', () => {
  it('is read whole', () => {
    const reading = readPlan(readFileSync('tests/fixtures/plan/skiff-plan.csv'))
    expect(reading).toMatchObject({ layout: 'csv', separator: ',', encoding: 'utf-8', unknownColumns: [], warnings: [], problems: [] })
    expect(reading.steps).toHaveLength(28)
    expect(reading.steps[0]).toEqual({
      row: 2, number: 1, stage: 'Panels', title: 'Scarf the sheets', plannedMinutes: 180,
      description: 'Plane matching 8 to 1 slopes on the meeting ends of the side and bottom sheets, stacked in steps on the bench.',
      parts: ['side panel', 'bottom panel'], materials: ['6 mm plywood', '9 mm plywood'],
    })
  })

  it('takes headings in any order and letter case, and reports the ones it does not know', () => {
    const reading = readPlan('Planned Hours, TITLE ,colour,Number,\n2.5,Fit,red,7,\n,Fair,,8,by eye\n')
    expect(reading.steps).toEqual([
      expect.objectContaining({ row: 2, number: 7, title: 'Fit', plannedMinutes: 150 }),
      expect.objectContaining({ row: 3, number: 8, title: 'Fair', plannedMinutes: null }),
    ])
    expect(reading.unknownColumns).toEqual(['colour', 'column 5, which has no heading'])
  })

  it('leaves fields alone whose column is not there', () => {
    expect(stepsOf('number,title\n1,Fit')[0]).toEqual({ row: 2, number: 1, title: 'Fit' })
  })

  it.each([
    ['semicolons', 'number;title;planned_hours;materials\n1;Fit, glue;2,5;"epoxy;tape"', ';'],
    ['tabs, as cells are pasted', 'number\ttitle\tplanned_hours\tmaterials\n1\tFit, glue\t2.5\tepoxy;tape', '\t'],
    ['bars without a line of dashes', 'number|title|planned_hours|materials\n1|Fit, glue|2.5|epoxy;tape', '|'],
  ])('is read with %s', (_, text, separator) => {
    const reading = readPlan(text)
    expect(reading).toMatchObject({ separator, problems: [], unknownColumns: [] })
    expect(reading.steps[0]).toMatchObject({ number: 1, title: 'Fit, glue', plannedMinutes: 150, materials: ['epoxy', 'tape'] })
  })

  it.each([
    ['UTF-8', 'utf-8', Buffer.from('number,title\n1,Fit the ½ in cap')],
    ['UTF-8 with a byte order mark', 'utf-8', Buffer.from('\uFEFFnumber,title\n1,Fit the ½ in cap')],
    ['UTF-16', 'utf-16le', Buffer.from('\uFEFFnumber\ttitle\n1\tFit the ½ in cap', 'utf16le')],
    ['Windows-1252', 'windows-1252', Buffer.from('number,title\r\n1,Fit the \xBD in cap', 'latin1')],
  ])('is read as %s', (_, encoding, bytes) => {
    const reading = readPlan(bytes)
    expect(reading.encoding).toBe(encoding)
    expect(reading.steps).toEqual([{ row: 2, number: 1, title: 'Fit the ½ in cap' }])
    expect(reading.warnings).toHaveLength(encoding === 'windows-1252' ? 1 : 0)
  })

  it('keeps quotation marks, line breaks and inch signs', () => {
    const [step, next] = stepsOf(`${HEAD}\r\n1,A,"Say ""when""","First.\r\nThen,\nlast.",,1/2" ply;,\r\n\r\n3,,B,,,,\r\n`)
    expect(step).toMatchObject({ title: 'Say "when"', description: 'First.\nThen,\nlast.', materials: ['1/2" ply'], parts: [] })
    expect(next).toMatchObject({ row: 4, number: 3 })
  })
})

describe('a Markdown table', () => {
  const TABLE = `# The plan\n\nSome words, title first.\n\n| Number | Title | Description | Parts |\n|:--|---|:-:|--:|\n| 1 | Fit \\| fair | One<br>two \\<br> | transom; skeg |\n| 2 | Glue | | |\n\nMore words | here.\n`

  it('is found in a text and read with its escapes', () => {
    const reading = readPlan(TABLE)
    expect(reading).toMatchObject({ layout: 'markdown', separator: '|', problems: [] })
    expect(reading.steps).toEqual([
      { row: 2, number: 1, title: 'Fit | fair', description: 'One\ntwo <br>', parts: ['transom', 'skeg'] },
      { row: 3, number: 2, title: 'Glue', description: '', parts: [] },
    ])
  })

  it('is read without outer bars', () => {
    expect(stepsOf('number | title\n--- | ---\n1 | Fit\n')).toEqual([{ row: 2, number: 1, title: 'Fit' }])
  })

  it('says that a second table was left out', () => {
    expect(readPlan(`${TABLE}\n${TABLE}`).warnings).toEqual(['Only the first table in the text was read.'])
  })

  it('inside a cell of a CSV file is text', () => {
    expect(stepsOf('number,title,description\n1,Fit,"| name |\n|---|\n| skeg |"')[0]).toMatchObject({ number: 1, description: '| name |\n|---|\n| skeg |' })
  })
})

describe('what is wrong is said by row and column', () => {
  it.each([
    ['words for hours', '4,,Fit,,,,two', 'Row 2, planned_hours: “two” is not a number of hours. Write it as 2 or 2.5.'],
    ['negative hours', '4,,Fit,,,,-2', 'Row 2, planned_hours: “-2” is not a number of hours. Write it as 2 or 2.5.'],
    ['absurd hours', '4,,Fit,,,,99999', 'Row 2, planned_hours: Planned time cannot be over 10,000 hours.'],
    ['no number', ',,Fit,,,,2', 'Row 2, number: There is none. Each step needs its number.'],
    ['a letter in the number', '4a,,Fit,,,,2', 'Row 2, number: “4a” is not a whole number.'],
    ['number nought', '0,,Fit,,,,2', 'Row 2, number: Step numbers start at 1.'],
    ['no title', '4,Hull,  ,,,,2', 'Row 2, title: Give the step a title.'],
    ['a title that goes on', `4,,${'x'.repeat(201)},,,,2`, 'Row 2, title: Keep the title to 200 characters.'],
    ['a part name that goes on', `4,,Fit,,${'x'.repeat(121)},,2`, `Row 2, parts: “${'x'.repeat(39)}…”: Keep the name to 120 characters.`],
    ['a comma without quotation marks', '4,,Fit,one, two,,,2,,', 'Row 2 has 8 cells under 7 headings. Put quotation marks round a text that holds the separator.'],
  ])('%s', (_, row, message) => {
    const reading = readPlan(`${HEAD}\n${row}`)
    expect(reading.problems.map(problem => problem.message)).toContain(message)
  })

  it('lists every wrong cell and still gives the rows that are right', () => {
    const reading = readPlan(`${HEAD}\n1,,Fit,,,,x\n2,,,,,,y\n3,,Fair,,,,1\n3,,Again,,,,1`)
    expect(reading.problems.map(({ row, column }) => [row, column])).toEqual([[2, 'planned_hours'], [3, 'title'], [3, 'planned_hours'], [5, 'number']])
    expect(reading.problems[3]!.message).toBe('Row 5, number: 3 is already the number of row 4. Each step needs its own.')
    expect(reading.steps.map(step => step.number)).toEqual([3])
  })

  it('counts a number as taken even when its row has other faults', () => {
    expect(problemsOf(`${HEAD}\n1,,,,,,\n1,,Fit,,,,`)).toEqual(['Row 2, title: Give the step a title.', 'Row 3, number: 1 is already the number of row 2. Each step needs its own.'])
  })
})

describe('what is no plan is refused with a reason', () => {
  it.each([
    ['nothing', '', 'There is nothing in it.'],
    ['white space', ' \n\t\n', 'There is nothing in it.'],
    ['no column of numbers', 'stage,title\nHull,Fit', 'The table has no column “number”.'],
    ['the same column twice', 'number,title,Title\n1,Fit,Fair', 'The column “title” is there twice.'],
    ['headings and no rows', `${HEAD}\n`, 'The table has a heading and no rows.'],
    ['a quotation mark that never closes', 'number,title\n1,"Fit\n2,Fair', 'A quotation mark that opens a cell near line'],
    ['too many rows', `number,title\n${'1,Fit\n'.repeat(2001)}`, 'The table has 2,001 rows; at most 2,000 can be imported.'],
  ])('%s', (_, text, message) => {
    expect(refusal(() => readPlan(text))).toContain(message)
  })

  it('a picture', () => {
    expect(refusal(() => readPlan(Uint8Array.from([0x89, 0x50, 0x4E, 0x47, 13, 10, 26, 10, 0, 0, 0, 13, 0x49, 0x48, 0x44, 0x52, 0, 0, 1, 0])))).toContain('This is not a text file.')
  })
})
