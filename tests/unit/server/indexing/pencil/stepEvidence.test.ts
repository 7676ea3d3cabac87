import { describe, expect, it } from 'vitest'
import { listen } from '#server/indexing/pencil/speech'
import { hearSteps, indexSteps, STEP_FEATURES } from '#server/indexing/pencil/stepEvidence'
import type { Learned } from '#server/indexing/pencil/types'
import { clipOf, PARTS, STEPS } from './support'

const K = STEP_FEATURES.length
const S = STEPS.length
const index = indexSteps(STEPS, PARTS)
const hear = (texts: string[], learned: Learned[] = [], everyMs = 4000) => {
  const out = hearSteps(listen([clipOf(texts, { everyMs })]), index, learned)
  return (cue: number, step: number, feature: typeof STEP_FEATURES[number]) => out[(cue * S + step - 1) * K + STEP_FEATURES.indexOf(feature)]!
}
const best = (of: (step: number) => number) => [1, 2, 3, 4].reduce((a, b) => of(b) > of(a) ? b : a)

describe('what a cue says for a step', () => {
  it.each([
    ['title', 'time to varnish', 4], ['description', 'over the frames', 3], ['part', 'this stern board here', 2], ['part', 'the hog', 3], ['material', 'get the epoxy', 1], ['topic', 'the bevel on the transom', 2],
  ] as const)('by its %s: “%s”', (feature, text, step) => {
    const heard = hear([text])
    expect(best(one => heard(0, one, feature))).toBe(step)
  })

  it('sums to nought over the steps: what speaks for all speaks for none', () => {
    const heard = hear(['plane the transom and varnish the rail with epoxy', 'nothing of the sort'])
    for (const feature of STEP_FEATURES) {
      for (const cue of [0, 1]) expect([1, 2, 3, 4].reduce((sum, step) => sum + heard(cue, step, feature), 0)).toBeCloseTo(0, 4)
    }
  })

  it('counts a word said again soon less', () => {
    const heard = hear(['varnish it over there', 'varnish it over there'])
    expect(heard(1, 4, 'title')).toBeLessThan(0.7 * heard(0, 4, 'title'))
    const later = hear(['varnish it over there', 'varnish it over there'], [], 900_000)
    expect(later(1, 4, 'title')).toBeCloseTo(later(0, 4, 'title'), 4)
  })

  it('keeps what is said of other days apart', () => {
    expect(hear(['varnish yesterday'])(0, 4, 'elsewhen')).toBeGreaterThan(0)
    expect(hear(['varnish here now'])(0, 4, 'elsewhen')).toBeCloseTo(0, 6)
  })

  it('knows the builder’s own words for a step, and none of a step that is gone', () => {
    const learned: Learned[] = [{ step: 3, operation: 'shape', text: 'the whatsit' }, { step: 4, operation: 'paint', text: 'the gizmo' }, { step: 99, operation: 'glue', text: 'thingamajig' }]
    const heard = hear(['where is that whatsit', 'and this is the gizmo', 'that is the thingamajig'], learned)
    expect([0, 1].map(cue => best(step => heard(cue, step, 'learned')))).toEqual([3, 4])
    expect([1, 2, 3, 4].map(step => heard(2, step, 'learned'))).toEqual([0, 0, 0, 0])
  })

  it('expects a day to go down the plan when it is told where in the day it is', () => {
    const speech = listen([clipOf(['one and on we go', 'two and on we go', 'three and on we go', 'four and on we go'])])
    const out = hearSteps(speech, index, [], { at: Float64Array.of(0.1, 0.4, 0.6, 0.9), seconds: Float64Array.of(4, 4, 4, 4) })
    const place = (cue: number, step: number) => out[(cue * S + step - 1) * K + STEP_FEATURES.indexOf('place')]!
    expect([0, 1, 2, 3].map(cue => best(step => place(cue, step)))).toEqual([1, 2, 3, 4])
  })

  it('has nothing to say without a plan', () => {
    expect(hearSteps(listen([clipOf(['varnish'])]), indexSteps([], [])).length).toBe(0)
  })
})

describe('the plan’s own words', () => {
  it('say which operations a step is about, in its title and anywhere', () => {
    expect(index.operationsInTitle.length).toBe(S * 14)
    const paint = 11
    expect(index.operationsInTitle[3 * 14 + paint]).toBeGreaterThan(0)
    expect(index.operationsInTitle[0 * 14 + paint]).toBe(0)
    for (const value of index.operationsInText) expect(value >= 0 && value <= 1).toBe(true)
  })
  it('count a name that many steps use less than one of a single step', () => {
    const shared = indexSteps(STEPS.map(step => ({ ...step, parts: [...step.parts, 'clamp'] })), [...PARTS, { name: 'clamp', aliases: [], material: '', thicknessMm: null }])
    const weights = new Map<string, number>()
    for (const text of ['clamp', 'keelson']) shared.names.find(listen([clipOf([text])]).stems, ({ steps }) => weights.set(text, Math.max(...steps.map(step => step.weight))))
    expect(weights.get('clamp')).toBeLessThan(weights.get('keelson')!)
  })
})
