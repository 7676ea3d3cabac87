import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { gather } from '#server/indexing/pencil/material'
import { narrow, portionsOf, takePortion } from '#server/indexing/pencil/portions'
import { listen } from '#server/indexing/pencil/speech'
import { indexSteps, STEP_FEATURES } from '#server/indexing/pencil/stepEvidence'
import { clipOf, PARTS, STEPS, talk } from './support'

const lines = (count: number, word = 'line of the transom') => Array.from({ length: count }, (_, i) => `${word} number ${i}`)
const fixed = (from: number, to: number) => ({ from, to, step: 0, kind: 0 })

describe('portions of a long session', () => {
  it('leaves a short one whole', () => {
    expect(portionsOf(listen([clipOf(lines(20))]), [], 20)).toEqual([{ from: 0, to: 20 }])
    expect(portionsOf(listen([]), [])).toEqual([{ from: 0, to: 0 }])
  })

  it('cuts at the edge of a clip where one comes in the second half, the last of them', () => {
    expect(portionsOf(listen([clipOf(lines(12)), clipOf(lines(5)), clipOf(lines(20))]), [], 20)).toEqual([{ from: 0, to: 17 }, { from: 17, to: 37 }])
  })

  it('cuts at the longest silence where no clip ends', () => {
    const clip = clipOf(lines(30))
    for (const cue of clip.cues.slice(14)) {
      cue.startMs += 30_000
      cue.endMs += 30_000
    }
    for (const cue of clip.cues.slice(17)) {
      cue.startMs += 10_000
      cue.endMs += 10_000
    }
    expect(portionsOf(listen([clip]), [], 20)).toEqual([{ from: 0, to: 14 }, { from: 14, to: 30 }])
  })

  it('cuts before a fixed chapter that lies over every place, or behind it when it starts the portion', () => {
    expect(portionsOf(listen([clipOf(lines(40))]), [fixed(4, 35)], 20)).toEqual([{ from: 0, to: 4 }, { from: 4, to: 35 }, { from: 35, to: 40 }])
    expect(portionsOf(listen([clipOf(lines(40))]), [fixed(0, 40)], 20)).toEqual([{ from: 0, to: 40 }])
  })

  it('always covers all cues end to end, and never cuts inside what is fixed', () => {
    const stretch = fc.tuple(fc.integer({ min: 0, max: 90 }), fc.integer({ min: 1, max: 40 }))
    fc.assert(fc.property(fc.array(fc.integer({ min: 1, max: 40 }), { minLength: 1, maxLength: 4 }), fc.array(stretch, { maxLength: 4 }), fc.integer({ min: 4, max: 30 }), (clips, wanted, most) => {
      const speech = listen(clips.map(count => clipOf(lines(count))))
      const n = speech.cues.length
      const stretches: ReturnType<typeof fixed>[] = []
      for (const [from, length] of wanted) {
        const to = Math.min(n, from + length)
        if (from < to && !stretches.some(other => from < other.to && other.from < to)) stretches.push(fixed(from, to))
      }
      const portions = portionsOf(speech, stretches, most)
      expect(portions[0]!.from).toBe(0)
      expect(portions.at(-1)!.to).toBe(n)
      portions.slice(1).forEach((portion, i) => expect(portion.from).toBe(portions[i]!.to))
      for (const { from, to } of portions) {
        expect(to).toBeGreaterThan(from)
        for (const one of stretches) expect(to > one.from && to < one.to).toBe(false)
      }
    }))
  })

  it('takes a portion as speech of its own', () => {
    const speech = listen([clipOf(talk(1, 2)), clipOf(talk(3))])
    const part = takePortion(speech, { from: 7, to: 12 })
    expect(part.cues.map(cue => cue.text)).toEqual(speech.cues.slice(7, 12).map(cue => cue.text))
    expect(part.cues[0]).toMatchObject({ first: true, from: 0 })
    expect(part.cues[3]).toMatchObject({ first: true, clip: 1 })
    expect(part.words.length).toBe(part.stems.length)
    for (const [at, cue] of part.cues.entries()) {
      for (let i = cue.from; i < cue.to; i++) expect(part.words[i]).toMatchObject({ cue: at, stem: part.stems[i] })
    }
  })
})

describe('narrow', () => {
  const speech = listen([clipOf(talk(2, 4))])
  const index = indexSteps(STEPS, PARTS)
  const weights = Object.fromEntries(STEP_FEATURES.map(name => [`step.${name}`, 1]))

  it('leaves a plan that is short enough', () => {
    const material = gather(speech, index)
    expect(narrow(material, weights, 4)).toBe(material)
  })

  it('keeps the steps that are spoken of, with what was heard for them and their place in the plan', () => {
    const material = gather(speech, index)
    const narrowed = narrow(material, weights, 2)
    expect(narrowed.index.steps.map(step => step.number)).toEqual([2, 4])
    expect(narrowed.index.places).toEqual([1, 3])
    expect(narrowed.S).toBe(2)
    const K = STEP_FEATURES.length
    for (let cue = 0; cue < speech.cues.length; cue++) {
      expect(narrowed.steps.subarray(cue * 2 * K, (cue * 2 + 1) * K)).toEqual(material.steps.subarray((cue * 4 + 1) * K, (cue * 4 + 2) * K))
      expect(narrowed.openWords[cue * 2 + 1]).toBe(material.openWords[cue * 4 + 3])
    }
  })

  it('keeps what is fixed, whatever is said', () => {
    const material = gather(speech, index, [], [{ from: 0, to: 2, step: 2, kind: 6 }, { from: 4, to: 5, step: null, kind: 14 }])
    const narrowed = narrow(material, weights, 1)
    expect(narrowed.index.steps.map(step => step.number)).toContain(3)
    expect(narrowed.index.steps[narrowed.fixed[0]!.step!]!.number).toBe(3)
    expect(narrowed.fixed[1]!.step).toBeNull()
  })
})
