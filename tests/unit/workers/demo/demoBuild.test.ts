import { readFileSync, statSync } from 'node:fs'
import { basename } from 'node:path'
import { describe, expect, it } from 'vitest'
import { pairCaptions } from '#server/indexing/captions/pairing'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import { readParts } from '#server/indexing/plan/readParts'
import { readPlan } from '#server/indexing/plan/readPlan'
import { recordedAtFromName } from '#shared/utils/clipNames'
import { demoBuild } from '../../../../workers/demo/index'
import { demoScript } from '../../../../workers/demo/script'

const plan = readPlan(readFileSync(demoBuild.planFile))
const parts = readParts(readFileSync(demoBuild.partsFile))
const clips = demoBuild.sessions.flatMap(session => session.clips)
const chapters = clips.flatMap(clip => clip.chapters)
const numbers = new Set(plan.steps.map(step => step.number))
const names = new Set(parts.parts.map(part => part.name))

describe('the demo build’s plan', () => {
  it('reads without a problem and is complete', () => {
    expect(plan.problems).toEqual([])
    expect(parts.problems).toEqual([])
    expect(plan.steps.length).toBeGreaterThanOrEqual(24)
    expect(plan.steps.map(step => step.number)).toEqual(plan.steps.map((_, i) => i + 1))
    for (const step of plan.steps) {
      expect(step.stage, step.title).toBeTruthy()
      expect(step.description, step.title).toBeTruthy()
      expect(step.parts!.filter(name => !names.has(name)), step.title).toEqual([])
    }
  })

  it('leaves steps without footage, so that there is something still to film', () => {
    const shown = new Set(chapters.map(chapter => chapter.step))
    expect(plan.steps.filter(step => !shown.has(step.number)).length).toBeGreaterThan(5)
  })
})

describe('the demo build’s sessions', () => {
  it('are three, with eight to ten clips of 40 to 110 seconds', () => {
    expect(demoBuild.sessions).toHaveLength(3)
    expect(clips.length).toBeGreaterThanOrEqual(8)
    expect(clips.length).toBeLessThanOrEqual(10)
    for (const clip of clips) {
      expect(clip.durationMs, clip.name).toBeGreaterThanOrEqual(40_000)
      expect(clip.durationMs, clip.name).toBeLessThanOrEqual(110_000)
    }
  })

  it('name only steps of the plan', () => {
    for (const session of demoBuild.sessions) expect(session.stepNumbers.filter(step => !numbers.has(step)), session.date).toEqual([])
  })

  it('record each clip on the day and at the time its name says', () => {
    for (const session of demoBuild.sessions) {
      for (const clip of session.clips) {
        expect(clip.recordedAt.slice(0, 10)).toBe(session.date)
        expect(recordedAtFromName(clip.name)).toBe(clip.recordedAt.slice(0, 19))
      }
    }
  })

  it('have one pair of cameras that ran at once', () => {
    const spans = clips.map(clip => ({ from: Date.parse(clip.recordedAt), to: Date.parse(clip.recordedAt) + clip.durationMs, camera: clip.camera }))
    const overlaps = spans.flatMap((a, i) => spans.slice(i + 1).filter(b => a.from < b.to && b.from < a.to).map(b => [a.camera, b.camera]))
    expect(overlaps).toEqual([['Bench phone', 'Ivo’s phone']])
  })

  it('start the second camera where it listens in', () => {
    for (const clip of demoScript.flatMap(session => session.clips)) {
      if (!('hears' in clip)) continue
      const heard = clips.find(other => other.name === clip.hears)!
      expect(Date.parse(clip.recordedAt) - Date.parse(heard.recordedAt)).toBe(clip.fromMs)
      expect(clip.fromMs + clip.lengthMs).toBeLessThanOrEqual(heard.durationMs)
    }
  })
})

describe('the demo build’s chapters', () => {
  it('lie in order within their clips and never overlap', () => {
    for (const clip of clips) {
      let before = 0
      for (const chapter of clip.chapters) {
        expect(chapter.startMs, clip.name).toBeGreaterThanOrEqual(before)
        expect(chapter.endMs, clip.name).toBeGreaterThan(chapter.startMs)
        before = chapter.endMs
      }
      expect(before, clip.name).toBeLessThanOrEqual(clip.durationMs)
    }
  })

  it('name steps and parts that exist, and leave a few to the program', () => {
    for (const chapter of chapters) {
      if (chapter.step !== null) expect(numbers).toContain(chapter.step)
      expect(chapter.parts.filter(name => !names.has(name))).toEqual([])
    }
    const pencilled = chapters.filter(chapter => chapter.state === 'pencilled').length
    expect(pencilled).toBeGreaterThanOrEqual(2)
    expect(pencilled).toBeLessThan(chapters.length / 4)
    expect(demoBuild.sessions.filter(session => session.toReview)).toHaveLength(1)
  })

  it('leave some minutes untold for the bench', () => {
    const told = chapters.reduce((sum, chapter) => sum + chapter.endMs - chapter.startMs, 0)
    const all = clips.reduce((sum, clip) => sum + clip.durationMs, 0)
    expect(all - told).toBeGreaterThan(30_000)
  })

  it('show the bow transom fitted dry, sealed and glued, with the glue spoken of', () => {
    const gluing = clips.find(clip => clip.chapters.some(chapter => chapter.step === 4 && chapter.operation === 'glue'))!
    expect(gluing.chapters.map(chapter => chapter.operation)).toEqual(['dry-fit', 'seal-coat', 'glue', 'clean-up'])
    const glue = gluing.chapters[2]!
    const said = readCaptions(readFileSync(gluing.captions)).cues.filter(cue => cue.startMs >= glue.startMs && cue.endMs <= glue.endMs).map(cue => cue.text).join(' ')
    expect(said).toMatch(/wood flour/)
    expect(said).toMatch(/clamps/)
  })
})

describe('the demo build’s files', () => {
  it('have captions that read without a warning, lie within the clip and pair with it by name', () => {
    for (const clip of clips) {
      const reading = readCaptions(readFileSync(clip.captions), { name: basename(clip.captions) })
      expect(reading.warnings, clip.name).toEqual([])
      expect(reading.cues.length, clip.name).toBeGreaterThan(4)
      expect(reading.cues.at(-1)!.endMs, clip.name).toBeLessThanOrEqual(clip.durationMs)
      expect(pairCaptions(clips.map(other => other.name), [basename(clip.captions)])[0]).toMatchObject({ clipName: clip.name, language: 'en' })
    }
    expect(clips.filter(clip => clip.captions.endsWith('.srt'))).toHaveLength(1)
  })

  it('stay under 11 MB in all', () => {
    const bytes = clips.map(clip => statSync(clip.file).size)
    expect(Math.min(...bytes)).toBeGreaterThan(100_000)
    expect(bytes.reduce((a, b) => a + b, 0)).toBeLessThan(11_000_000)
  })
})
