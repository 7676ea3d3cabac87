import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import type { StepView } from '#shared/types/plan'
import type { ChapterView } from '#shared/types/session'
import { ellipsis, fitLabel, plankOf, plankSpan, planksInSight, plankWords, type Measure } from '#shared/utils/ribband/planks'

const chapter = (over: Partial<ChapterView> = {}): ChapterView => ({
  id: 'ch', clipId: 'c', startMs: 5000, endMs: 65_000, stepId: 's', operation: 'glue', partIds: [], inking: 'inked', confidence: null, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null, ...over,
})
const step: StepView = { id: 's', number: 7, position: 6, stage: 'Hull', title: 'Glue the transom', description: '', materials: [], partIds: [], status: 'to-do', plannedMinutes: null, spentMinutes: null, archived: false }
const place = { lane: 0, clipLineMs: 100_000 }
const measure: Measure = text => text.length * 7

describe('plankOf', () => {
  it('lays a chapter on the line with its step and operation', () => {
    expect(plankOf(chapter(), step, place)).toMatchObject({ startMs: 105_000, endMs: 165_000, kind: 'inked', thickness: 1, number: 7, word: 'Glue', title: 'Glue the transom' })
  })

  it('is bare floor only with neither step nor operation', () => {
    expect(plankOf(chapter({ stepId: null, operation: 'none' }), undefined, place).kind).toBe('bare')
    expect(plankOf(chapter({ stepId: null }), undefined, place).kind).toBe('inked')
  })

  it('is thinner the less sure, and never too thin for its balloon', () => {
    const thickness = (confidence: number | null) => plankOf(chapter({ inking: 'pencilled', confidence }), step, place).thickness
    expect(thickness(0.2)).toBeLessThan(thickness(0.6))
    expect(thickness(0.6)).toBeLessThan(thickness(0.95))
    expect(thickness(0) * 40).toBeGreaterThan(22)
    expect(thickness(1)).toBe(1)
    expect(thickness(null)).toBeLessThan(1)
  })
})

describe('planks in sight', () => {
  const planks = [0, 1, 2, 3].map(n => plankOf(chapter({ id: `${n}`, startMs: n * 10_000, endMs: n * 10_000 + 9000 }), step, { lane: 0, clipLineMs: 0 }))
  it('are those that reach into the view', () => {
    expect(planksInSight(planks, { startMs: 15_000, msPerPx: 10, widthPx: 600 }).map(plank => plank.chapter.id)).toEqual(['1', '2'])
  })

  it('are drawn no wider than needed and never vanish', () => {
    const view = { startMs: 0, msPerPx: 20_000, widthPx: 600 }
    expect(plankSpan(planks[1]!, view).right - plankSpan(planks[1]!, view).left).toBe(1)
    const close = { startMs: 12_000, msPerPx: 1, widthPx: 600 }
    expect(plankSpan(planks[1]!, close)).toEqual({ left: -20, right: 620 })
  })
})

describe('fitLabel', () => {
  const plank = plankOf(chapter(), step, place)
  it('takes the balloon first, then the operation, then as much of the title as fits', () => {
    expect(fitLabel(plank, 20, measure)).toEqual({ balloon: false, word: '', title: '' })
    expect(fitLabel(plank, 40, measure)).toEqual({ balloon: true, word: '', title: '' })
    expect(fitLabel(plank, 80, measure)).toEqual({ balloon: true, word: 'Glue', title: '' })
    expect(fitLabel(plank, 150, measure)).toEqual({ balloon: true, word: 'Glue', title: 'Glue the…' })
    expect(fitLabel(plank, 400, measure).title).toBe('Glue the transom')
  })

  it('writes nothing wider than its plank', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 500 }), (width) => {
      const label = fitLabel(plank, width, measure)
      const used = (label.balloon ? 28 : 0) + [label.word, label.title].filter(Boolean).reduce((sum, text) => sum + measure(text, 'word') + 6, -6)
      expect(used + 8).toBeLessThanOrEqual(Math.max(width, 8 + (label.balloon ? 22 : 0)))
    }))
  })

  it('gives bare floor its words and no balloon', () => {
    expect(fitLabel(plankOf(chapter({ stepId: null, operation: 'none' }), undefined, place), 300, measure)).toEqual({ balloon: false, word: 'No work shown', title: '' })
  })
})

it('ellipsis keeps what fits, or nothing when that is too little', () => {
  const width = (text: string) => text.length * 10
  expect(ellipsis('transom', 70, width)).toBe('transom')
  expect(ellipsis('transom', 69, width)).toBe('trans…')
  expect(ellipsis('the transom', 50, width)).toBe('the…')
  expect(ellipsis('transom', 30, width, 6)).toBe('')
})

it('plankWords says for the ear what the plank shows', () => {
  expect(plankWords(plankOf(chapter(), step, place), 245_000)).toBe('Step 7, Glue the transom: glue, inked, 4:05 to 5:05')
  expect(plankWords(plankOf(chapter({ inking: 'pencilled', confidence: 0.634 }), step, place), 0)).toBe('Step 7, Glue the transom: glue, pencilled, 63 % sure, 0:00 to 1:00')
  expect(plankWords(plankOf(chapter({ stepId: null, operation: 'none' }), undefined, place), 0)).toBe('No step: no work shown, inked, 0:00 to 1:00')
})
