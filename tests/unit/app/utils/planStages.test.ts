import { describe, expect, it } from 'vitest'
import { stageAfterMove, stagesOf, startsStage } from '../../../../app/utils/planStages'

const steps = (text: string) => [...text].map(stage => ({ stage: stage.trim() }))

describe('a moved step', () => {
  it.each([
    ['keeps its stage beside one of its own', 'AAB', 1, undefined],
    ['keeps its stage at the edge of its own', 'AABA', 3, 'B'],
    ['keeps its stage between two stages when one is its own', 'ABB', 1, undefined],
    ['takes on the stage it stands in', 'AABAA', 2, 'A'],
    ['takes on the stage before it at an edge', 'AACBB', 2, 'A'],
    ['takes on the stage after it at the head', 'BAA', 0, 'A'],
    ['keeps its stage when it is alone', 'A', 0, undefined],
    ['may lose its stage among steps without one', ' A ', 1, ''],
  ])('%s', (_, text, index, stage) => {
    expect(stageAfterMove(steps(text), index)).toBe(stage)
  })
})

it('stages are named once, in order', () => {
  expect(stagesOf(steps('AAB CA'))).toEqual(['A', 'B', 'C'])
  expect([0, 1, 2].map(i => startsStage(steps('AAB'), i))).toEqual([true, false, true])
})
