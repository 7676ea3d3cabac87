import fc from 'fast-check'
import { describe, expect, it, vi } from 'vitest'
import { indexSteps } from '#server/indexing/pencil/stepEvidence'
import { likeliestStep, type PencilInput, pencil as pencilWith, pencilChapters as chaptersWith } from '#server/indexing/pencil/pencil'
import type { FixedChapter, PencilledChapter } from '#server/indexing/pencil/types'
import { clipOf, PARTS, PLAIN, STEPS, TALK, talk } from './support'

// Each test weighs whole sessions, some more than once.
vi.setConfig({ testTimeout: 30_000 })

const input = (values: Partial<PencilInput> = {}): PencilInput => ({ steps: STEPS, parts: PARTS, clips: [clipOf(talk(1, 2, 3, 4))], ...values })
const pencil = (given: PencilInput) => pencilWith(given, PLAIN)
const pencilChapters = (given: PencilInput) => chaptersWith(given, PLAIN)
const stepAt = (chapters: PencilledChapter[], ms: number, clip = 0) => chapters.find(chapter => chapter.clip === clip && ms >= chapter.startMs && ms < chapter.endMs)?.step
const endOf = (clip: PencilInput['clips'][number]) => clip.durationMs ?? Math.max(0, ...clip.cues.map(cue => cue.endMs))

/** Chapters of a clip lie end to end from 0 to its end. */
function expectCovered(chapters: PencilledChapter[], clips: PencilInput['clips'], least = (clip: number) => endOf(clips[clip]!)): void {
  clips.forEach((_, at) => {
    const mine = chapters.filter(chapter => chapter.clip === at)
    if (least(at) > 0) {
      expect(mine[0]!.startMs).toBe(0)
      expect(mine.at(-1)!.endMs).toBeGreaterThanOrEqual(least(at))
    }
    mine.slice(1).forEach((chapter, i) => expect(chapter.startMs).toBe(mine[i]!.endMs))
    for (const chapter of mine) expect(chapter.endMs).toBeGreaterThan(chapter.startMs)
  })
  expect(chapters.map(chapter => chapter.clip)).toEqual(chapters.map(chapter => chapter.clip).sort((a, b) => a - b))
}

describe('a session', () => {
  it('is told from the first moment to the last, each stretch on the step that is spoken of', () => {
    const clips = [clipOf(talk(1, 2, 3, 4), { fromMs: 3000, durationMs: 90_000 })]
    const chapters = pencilChapters(input({ clips }))
    expectCovered(chapters, clips)
    expect(chapters.at(-1)!.endMs).toBe(90_000)
    expect([12_000, 33_000, 53_000, 73_000].map(ms => stepAt(chapters, ms))).toEqual([1, 2, 3, 4])
  })

  it('says of each chapter how sure it is, which words spoke for it, and what else it may be', () => {
    const chapters = pencilChapters(input())
    for (const chapter of chapters) {
      expect(chapter.confidence >= 0 && chapter.confidence <= 1).toBe(true)
      expect(chapter.fixed).toBe(false)
      expect(chapter.otherSteps.length).toBeLessThanOrEqual(3)
      expect(chapter.otherSteps.map(other => other.step)).not.toContain(chapter.step)
      expect(chapter.otherOperations.map(other => other.operation)).not.toContain(chapter.operation)
      for (const { atMs } of chapter.evidence) expect(atMs >= chapter.startMs - 1 && atMs < chapter.endMs).toBe(true)
    }
    expect(chapters.find(chapter => chapter.step === 2)!.evidence.map(({ words }) => words).join(' ')).toContain('transom')
    expect(chapters.find(chapter => chapter.step === 2)!.parts).toContain('transom')
  })

  it('is told the same way every time, and whatever was told between', () => {
    const first = pencil(input())
    pencil(input({ clips: [clipOf(talk(4, 1)), clipOf(['i went ahead and glued the keelson last night'])] }))
    expect(pencil(input())).toEqual(first)
  })

  it('goes over several clips, none of them left out', () => {
    const clips = [clipOf(talk(1), { durationMs: 21_000 }), { cues: [], durationMs: 9000 }, clipOf(talk(2, 3)), { cues: [] }]
    const chapters = pencilChapters(input({ clips }))
    expectCovered(chapters, clips)
    expect(chapters.filter(chapter => chapter.clip === 1)).toMatchObject([{ startMs: 0, endMs: 9000, step: null, operation: 'none', confidence: 0 }])
    expect(chapters.filter(chapter => chapter.clip === 3)).toEqual([])
    expect(stepAt(chapters, 10_000, 2)).toBe(2)
  })

  it('has nothing to tell without captions but that nothing was said', () => {
    for (const cues of [[], [{ startMs: 0, endMs: 3000, text: '' }], [{ startMs: 0, endMs: 3000, text: '[Music]' }]]) {
      expect(pencil(input({ clips: [{ cues, durationMs: 8000 }] }))).toEqual({ chapters: [expect.objectContaining({ startMs: 0, endMs: 8000, step: null, operation: 'none' })], facts: [], toldNotShown: [] })
    }
    expect(pencilChapters(input({ clips: [] }))).toEqual([])
  })

  it('reads captions of one word a cue, and without capitals or stops', () => {
    const words = talk(2, 3).flatMap(line => line.split(' '))
    const clips = [clipOf(words, { everyMs: 700 })]
    const chapters = pencilChapters(input({ clips }))
    expectCovered(chapters, clips)
    const third = words.length * 700 / 4
    expect([stepAt(chapters, third), stepAt(chapters, 3 * third)]).toEqual([2, 3])
  })

  it('reads captions of whole paragraphs', () => {
    const clips = [clipOf([TALK[2]!.join('. '), TALK[3]!.join('. ')], { everyMs: 20_000 })]
    const chapters = pencilChapters(input({ clips }))
    expectCovered(chapters, clips)
    expect([stepAt(chapters, 10_000), stepAt(chapters, 32_000)]).toEqual([2, 3])
  })

  it('is all without a step when the plan has none', () => {
    const { chapters } = pencil(input({ steps: [], parts: [] }))
    expectCovered(chapters, input().clips)
    for (const chapter of chapters) expect(chapter.step).toBeNull()
  })
})

describe('ticked steps', () => {
  it('are the only ones proposed', () => {
    for (const ticked of [[2], [2, 4], [3, 1]]) {
      for (const chapter of pencilChapters(input({ ticked }))) if (chapter.step !== null) expect(ticked).toContain(chapter.step)
    }
  })
  it('count for nothing when there are none, or none that the plan knows', () => {
    const open = pencilChapters(input())
    for (const ticked of [[], null, [77]]) expect(pencilChapters(input({ ticked }))).toEqual(open)
  })
  it('do not keep a fixed chapter on another step away', () => {
    const fixed: FixedChapter[] = [{ clip: 0, startMs: 20_000, endMs: 40_000, step: 2, operation: 'shape' }]
    expect(pencilChapters(input({ ticked: [1, 3], fixed })).find(chapter => chapter.fixed)).toMatchObject(fixed[0]!)
  })
})

describe('fixed chapters', () => {
  const kept = (fixed: FixedChapter[], values: Partial<PencilInput> = {}) => {
    const given = input({ fixed, ...values })
    const chapters = pencilChapters(given)
    expect(chapters.filter(chapter => chapter.fixed).map(({ clip, startMs, endMs, step, operation }) => ({ clip, startMs, endMs, step, operation }))).toEqual(fixed)
    expectCovered(chapters, given.clips)
    return chapters
  }

  it('are kept exactly, at edges that are not edges of cues', () => {
    const chapters = kept([{ clip: 0, startMs: 20_345, endMs: 41_707, step: 4, operation: 'paint' }])
    expect([stepAt(chapters, 10_000), stepAt(chapters, 30_000), stepAt(chapters, 50_000)]).toEqual([1, 4, 3])
  })
  it('are kept over silence, before the first word and behind the last', () => {
    const clips = [clipOf(talk(1, 2), { fromMs: 20_000, durationMs: 90_000 })]
    kept([{ clip: 0, startMs: 2000, endMs: 12_000, step: 3, operation: 'glue' }, { clip: 0, startMs: 70_000, endMs: 80_000, step: null, operation: 'none' }], { clips })
    kept([{ clip: 0, startMs: 70_000, endMs: 80_000, step: 3, operation: 'glue' }], { clips: [clipOf(talk(1, 2))] })
    kept([{ clip: 1, startMs: 1000, endMs: 4000, step: 3, operation: 'glue' }], { clips: [clipOf(talk(1)), { cues: [], durationMs: 9000 }] })
  })
  it('are kept when they cover everything, side by side, or are on a step that the plan has no more', () => {
    kept([{ clip: 0, startMs: 0, endMs: 80_000, step: 1, operation: 'glue' }])
    kept([{ clip: 0, startMs: 0, endMs: 20_000, step: 1, operation: 'glue' }, { clip: 0, startMs: 20_000, endMs: 40_000, step: 1, operation: 'shape' }, { clip: 0, startMs: 40_000, endMs: 41_000, step: null, operation: 'clean-up' }])
    kept([{ clip: 0, startMs: 8000, endMs: 16_000, step: 99, operation: 'glue' }])
  })
  it('leave no scrap of their own step beside them', () => {
    for (const [startMs, endMs] of [[20_900, 40_900], [19_100, 39_100]] as const) {
      const chapters = kept([{ clip: 0, startMs, endMs, step: 4, operation: 'paint' }])
      for (const chapter of chapters) if (!chapter.fixed) expect(chapter.endMs - chapter.startMs).toBeGreaterThanOrEqual(1500)
    }
  })
  it('pull what lies about them: silence about the transom is taken for the next step after it', () => {
    const vague = Array.from({ length: 6 }, () => 'and a bit more of that there')
    const chapters = kept([{ clip: 0, startMs: 0, endMs: 12_000, step: 4, operation: 'paint' }], { clips: [clipOf([...vague, ...vague])] })
    expect(chapters.filter(chapter => !chapter.fixed && chapter.step !== null && chapter.step !== 4)).toEqual([])
  })
})

describe('learned words', () => {
  const strange = ['now the whatsit', 'get the whatsit going', 'whatsit goes round the gizmo', 'that gizmo again', 'whatsit and gizmo both', 'one more whatsit']
  it('pull towards the step they were tied to', () => {
    const clips = [clipOf([...TALK[1]!, ...strange])]
    const learned = [{ step: 4, operation: 'paint' as const, text: strange.join('. ') }, { step: 2, operation: 'shape' as const, text: 'nothing of the sort' }]
    const share = (chapters: PencilledChapter[]) => chapters.filter(chapter => chapter.endMs > 24_000).reduce((most, chapter) => Math.max(most, chapter.step === 4 ? chapter.confidence : chapter.otherSteps.find(other => other.step === 4)?.confidence ?? 0), 0)
    expect(share(pencilChapters(input({ clips, learned })))).toBeGreaterThan(share(pencilChapters(input({ clips }))))
    expect(stepAt(pencilChapters(input({ clips, learned, ticked: [1, 4] })), 34_000)).toBe(4)
  })
  it('of a step that is gone count for nothing', () => {
    const clips = [clipOf(strange)]
    expect(pencilChapters(input({ clips, learned: [{ step: 99, operation: 'glue', text: strange.join(' ') }] }))).toEqual(pencilChapters(input({ clips })))
  })
})

describe('facts and told places', () => {
  it('go to the step of the chapter they are heard over', () => {
    const lines = talk(1, 2)
    lines[7] = 'plane the transom bevel to 14 degrees'
    const { facts } = pencil(input({ clips: [clipOf(lines)] }))
    expect(facts).toContainEqual({ clip: 0, atMs: 28_000, kind: 'angle', text: '14 degrees', value: 14, unit: 'deg', step: 2 })
  })
  it('are listed by time, also those of glue, with their clip', () => {
    const { facts } = pencil(input({ clips: [clipOf(talk(1)), clipOf([...TALK[1]!, 'so this is thickened epoxy with wood flour', 'mixed 2 to 1 for the scarf', 'spread it on the side panel'])] }))
    expect(facts.map(fact => [fact.clip, fact.atMs, fact.kind])).toEqual([[0, 8000, 'ratio'], [1, 8000, 'ratio'], [1, 20_000, 'adhesive'], [1, 24_000, 'ratio']])
  })
  it('have the step that the words speak of, else the one they are spoken over', () => {
    const { toldNotShown } = pencil(input({ clips: [clipOf([...TALK[1]!, 'i went ahead and varnished the outwales, three coats of varnish on the outwales', ...TALK[2]!])] }))
    expect(toldNotShown).toMatchObject([{ clip: 0, atMs: 20_000, step: 4 }])
  })
})

describe('likeliestStep', () => {
  it('names the step that a sentence is about, and by how much', () => {
    expect(likeliestStep('three coats of varnish on the outwale', indexSteps(STEPS, PARTS))).toMatchObject({ step: 4 })
    expect(likeliestStep('three coats of varnish on the outwale', indexSteps(STEPS, PARTS))!.lead).toBeGreaterThan(1)
  })
  it('names none for a sentence about nothing, none at all, or no plan', () => {
    for (const words of ['', 'and then there it was', '[Music]']) expect(likeliestStep(words, indexSteps(STEPS, PARTS))).toBeNull()
    expect(likeliestStep('varnish', indexSteps([], []))).toBeNull()
  })
})

describe('whatever is said, fixed and ticked', () => {
  const line = fc.constantFrom(...talk(1, 2, 3, 4), 'okay', '[Music]', '', 'hello and welcome back', 'sweep up and wipe the bench', '1½ inches')
  const clip = fc.record({ texts: fc.array(line, { maxLength: 12 }), fromMs: fc.integer({ min: 0, max: 30_000 }), everyMs: fc.integer({ min: 300, max: 9000 }), more: fc.option(fc.integer({ min: 0, max: 40_000 })) })
  const stretch = fc.record({ clip: fc.nat(2), from: fc.nat(60_000), length: fc.integer({ min: 1, max: 40_000 }), step: fc.constantFrom(null, 1, 2, 3, 4, 9), operation: fc.constantFrom('glue' as const, 'none' as const, 'plan-talk' as const, 'clean-up' as const, 'paint' as const) })

  it('covers every clip without gaps, keeps what is fixed exactly, and answers the same again', () => {
    fc.assert(fc.property(fc.array(clip, { maxLength: 3 }), fc.array(stretch, { maxLength: 4 }), fc.option(fc.subarray([1, 2, 3, 4])), (given, wanted, ticked) => {
      const clips = given.map(({ texts, fromMs, everyMs, more }) => clipOf(texts, { fromMs, everyMs, durationMs: more === null ? undefined : texts.length * everyMs + fromMs + more }))
      const fixed: FixedChapter[] = []
      for (const { clip, from, length, step, operation } of wanted) {
        const chapter = { clip, startMs: from, endMs: from + length, step, operation }
        if (clip < clips.length && !fixed.some(other => other.clip === clip && other.startMs < chapter.endMs && chapter.startMs < other.endMs)) fixed.push(chapter)
      }
      const one = input({ clips, fixed, ticked })
      const chapters = chaptersWith(one)
      expectCovered(chapters, clips, at => Math.max(endOf(clips[at]!), ...fixed.filter(chapter => chapter.clip === at).map(chapter => chapter.endMs)))
      const sorted = [...fixed].sort((a, b) => a.clip - b.clip || a.startMs - b.startMs)
      expect(chapters.filter(chapter => chapter.fixed).map(({ clip, startMs, endMs, step, operation }) => ({ clip, startMs, endMs, step, operation }))).toEqual(sorted)
      expect(chaptersWith(one)).toEqual(chapters)
    }), { numRuns: 40 })
  })
})
