import { describe, expect, it } from 'vitest'
import { compareParts } from '#server/indexing/plan/compareParts'
import { comparePlan } from '#server/indexing/plan/comparePlan'
import { readParts } from '#server/indexing/plan/readParts'
import { aPart, aPlan, aStep, stepsOf } from './support'

const transom = aPart({ name: 'Transom', aliases: ['back end'] })
const skeg = aPart({ name: 'skeg', archived: true })

describe('a table of steps beside the plan', () => {
  const plan = aPlan([
    aStep({ number: 1, title: 'Cut', stage: 'Hull', partIds: [transom.id], plannedMinutes: 120, materials: ['ply'] }),
    aStep({ number: 2, title: 'Glue' }),
    aStep({ number: 3, title: 'Paint', archived: true }),
  ], [transom, skeg])

  it('says what is new, what changes and how, and what is the same', () => {
    const { placings, staying } = comparePlan(plan, stepsOf('number,stage,title,planned_hours\n1,Hull,Cut out,2.5\n4,Hull,Launch,\n'))
    expect(placings.map(placing => placing.preview)).toEqual([
      { row: 2, number: 1, title: 'Cut out', outcome: 'changed', restored: false, changes: [{ column: 'title', from: 'Cut', to: 'Cut out' }, { column: 'planned_hours', from: '2', to: '2.5' }] },
      { row: 3, number: 4, title: 'Launch', outcome: 'new', restored: false, changes: [] },
    ])
    expect(staying.map(step => step.number)).toEqual([2])
  })

  it('changes nothing for a column that is not in the table, and empties a cell that is', () => {
    const outcome = (text: string) => comparePlan(plan, stepsOf(text)).placings[0]!.preview
    expect(outcome('number,title\n1,Cut').outcome).toBe('same')
    expect(outcome('number,title,materials\n1,Cut,').changes).toEqual([{ column: 'materials', from: 'ply', to: '' }])
  })

  it('knows parts by any letter case and by their other names, adds unknown ones once, brings archived ones back', () => {
    const { placings, newParts, restoredParts } = comparePlan(plan, stepsOf('number,title,parts\n1,Cut,back end\n2,Glue,TRANSOM;fin;Skeg\n5,Fair,Fin;fin'))
    expect(placings.map(placing => placing.partNames)).toEqual([['Transom'], ['Transom', 'fin', 'skeg'], ['fin']])
    expect(placings[0]!.preview.outcome).toBe('same')
    expect(newParts).toEqual(['fin'])
    expect(restoredParts).toEqual(['skeg'])
  })

  it('does not guess between two parts that share another name', () => {
    const two = aPlan([], [transom, aPart({ name: 'bow board', aliases: ['back end'] })])
    expect(comparePlan(two, stepsOf('number,title,parts\n1,Cut,back end')).newParts).toEqual(['back end'])
  })

  it('brings an archived step back', () => {
    expect(comparePlan(plan, stepsOf('number,title\n3,Paint')).placings[0]!.preview).toMatchObject({ outcome: 'changed', restored: true, changes: [] })
  })
})

describe('a table of parts beside the list', () => {
  it('matches names in any letter case and says what changes', () => {
    const { placings, staying } = compareParts([transom, aPart({ name: 'fin', thicknessMm: 9 })], readParts('name,thickness_mm,quantity\nFIN,9.5,\nkeel,19,1').parts)
    expect(placings.map(placing => [placing.preview.outcome, placing.preview.changes])).toEqual([
      ['changed', [{ column: 'name', from: 'fin', to: 'FIN' }, { column: 'thickness_mm', from: '9', to: '9.5' }]],
      ['new', []],
    ])
    expect(staying.map(part => part.name)).toEqual(['Transom'])
  })
})
