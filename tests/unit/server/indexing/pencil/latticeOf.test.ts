import { describe, expect, it } from 'vitest'
import { KINDS, W } from '#server/indexing/pencil/lattice'
import { changeFeatures, CLEAN_UP, latticeOf, lengthFeatures, moveFeatures, PLAN_TALK } from '#server/indexing/pencil/latticeOf'
import { gather } from '#server/indexing/pencil/material'
import { listen } from '#server/indexing/pencil/speech'
import { indexSteps } from '#server/indexing/pencil/stepEvidence'
import { clipOf, PARTS, PLAIN, STEPS, talk } from './support'

const index = indexSteps([...STEPS, { ...STEPS[2]!, number: 5 }], PARTS)
const material = gather(listen([clipOf(talk(1, 2)), clipOf(talk(3))]), index, [], [{ from: 3, to: 5, step: 1, kind: 2 }, { from: 12, to: 14, step: null, kind: W }])
const { weights } = PLAIN.open

const named = (features: (each: (name: string, value: number) => void) => void) => {
  const found: Record<string, number> = {}
  features((name, value) => { found[name] = value })
  return found
}

describe('features by name', () => {
  it('say how far a move in the plan goes, and what the steps share', () => {
    const move = (from: number, to: number) => named(each => moveFeatures(material, from, to, each))
    expect(move(0, 3)).toEqual({ 'to.first': 1 })
    expect(move(2, 1)).toEqual({ 'to.resume': 1 })
    expect(move(1, 1)).toEqual({ 'to.plus1': 1, 'to.sameStage': 1 })
    expect(move(1, 2)).toEqual({ 'to.plus2': 1, 'to.sameStage': 1 })
    expect(move(1, 3)).toEqual({ 'to.plus3to5': 1 })
    expect(move(3, 1)).toEqual({ 'to.minus1': 1, 'to.sameStage': 1 })
    expect(move(3, 0)).toEqual({ 'to.back': 1, 'to.sameStage': 1 })
    expect(move(3, 4)).toEqual({ 'to.plus2': 1, 'to.sharedParts': 1, 'to.sameStage': 1 })
  })
  it('say how work on one step goes on', () => {
    const change = (from: number, to: number) => named(each => changeFeatures(from, to, each))
    expect([change(2, 6), change(6, 2), change(PLAN_TALK, 2), change(2, PLAN_TALK), change(2, CLEAN_UP)]).toEqual([{ 'then.forward': 1 }, { 'then.back': 1 }, { 'then.fromPlanTalk': 1 }, { 'then.toPlanTalk': 1 }, { 'then.toCleanUp': 1 }])
  })
  it('say how long a chapter is', () => {
    const length = (seconds: number) => named(each => lengthFeatures(seconds, 'length', each))
    expect(length(45)).toEqual({ 'length.log': 0, 'length.logSquared': 0 })
    expect(length(20)).toMatchObject({ 'length.under25': 1 })
    expect(length(20)).not.toHaveProperty('length.under12')
    expect(length(5)).toMatchObject({ 'length.under12': 1, 'length.under25': 1 })
    expect(length(0)['length.log']).toBe(length(2)['length.log'])
  })
})

describe('a session under given weights', () => {
  const lattice = latticeOf(material, weights)
  const at = (cue: number) => lattice.nodes.indexOf(cue)

  it('lets no chapter run over the edge of a clip, nor of what is fixed', () => {
    for (let j = 1; j < lattice.nodes.length; j++) {
      for (let i = lattice.earliest(j); i < j; i++) {
        for (const edge of [3, 5, 10, 12, 14]) expect(lattice.nodes[i]! < edge && lattice.nodes[j]! > edge).toBe(false)
      }
    }
  })
  it('has one state alone for what is fixed, from edge to edge', () => {
    expect(lattice.only(at(3), at(5))).toEqual({ step: 1, kind: 2 })
    expect(lattice.only(at(12), at(14))).toEqual({ step: null, kind: W })
    expect(lattice.only(at(0), at(3))).toBeNull()
    expect(lattice.allowed(at(3), at(5))).toBe(true)
  })
  it('knows where one clip goes over into the next', () => {
    expect([at(10), at(3)].map(node => lattice.seam(node))).toEqual([true, false])
    expect(lattice.turn(lattice.nodes.length - 1)).toBe(0)
  })
  it('scores a chapter as the sum of its cues, of the step that is spoken of best', () => {
    const out = new Float64Array(lattice.S)
    lattice.steps(at(5), at(10), Int32Array.of(0, 1, 2, 3, 4), 5, out)
    expect(out.indexOf(Math.max(...out))).toBe(1)
    const kinds = new Float64Array(KINDS)
    lattice.kinds(at(5), at(10), kinds)
    expect([...kinds].every(Number.isFinite)).toBe(true)
  })
  it('weighs all steps of a short plan, and of a long one those that are spoken of thereabouts', () => {
    for (let s = 0; s < lattice.S; s++) expect(lattice.alive(at(5), at(10), s)).toBe(true)
    const long = indexSteps([...STEPS, ...Array.from({ length: 30 }, (_, i) => ({ ...STEPS[0]!, number: 10 + i, title: `Other matter ${i}`, description: 'Nothing of it.', parts: [], materials: [] }))], PARTS)
    const wide = latticeOf(gather(listen([clipOf(talk(2))]), long), weights)
    const last = wide.nodes.length - 1
    const alive = Array.from({ length: wide.S }, (_, s) => wide.alive(0, last, s))
    expect(alive[1]).toBe(true)
    expect(alive.filter(Boolean).length).toBeLessThan(wide.S)
  })
})
