import { describe, expect, it } from 'vitest'
import { evidenceOf, partBook, partsIn } from '#server/indexing/pencil/evidence'
import { listen } from '#server/indexing/pencil/speech'
import { clipOf, PARTS, STEPS, talk } from './support'

describe('the words that spoke for a chapter', () => {
  const speech = listen([clipOf(talk(1, 2))])
  it('are words of its step and operation, at most six, in order of time, from its own cues', () => {
    const evidence = evidenceOf(speech, 5, 10, STEPS[1]!, 'shape', PARTS)
    expect(evidence.length).toBeGreaterThan(2)
    expect(evidence.length).toBeLessThanOrEqual(6)
    expect(evidence.map(({ words }) => words)).toEqual(expect.arrayContaining(['transom', 'plane', 'bevel']))
    expect(evidence.map(({ atMs }) => atMs)).toEqual(evidence.map(({ atMs }) => atMs).sort((a, b) => a - b))
    for (const { atMs } of evidence) expect(atMs >= 20_000 && atMs < 40_000).toBe(true)
    expect(new Set(evidence.map(({ words }) => words)).size).toBe(evidence.length)
  })
  it('are words of the operation alone when there is no step, and none where nothing is said', () => {
    expect(evidenceOf(listen([clipOf(['sweep the floor'])]), 0, 1, null, 'clean-up', []).map(({ words }) => words)).toContain('sweep')
    expect(evidenceOf(listen([clipOf(['and there it was'])]), 0, 1, STEPS[0]!, 'glue', PARTS)).toEqual([])
    expect(evidenceOf(listen([]), 0, 0, null, 'glue', [])).toEqual([])
  })
})

describe('the parts of a chapter', () => {
  const book = partBook([...PARTS, { name: 'inner rail', aliases: ['rail'], material: '', thicknessMm: null }])
  const parts = (text: string, step: typeof STEPS[number] | null) => partsIn(listen([clipOf([text])]), 0, 1, step, book)
  it('are those named, by any name, the most named first', () => {
    expect(parts('the hog and the transom and the hog again', null)).toEqual(['keelson', 'transom'])
  })
  it('are the step’s own when none is named', () => {
    expect(parts('and on we go', STEPS[1]!)).toEqual(['transom'])
    expect(parts('and on we go', null)).toEqual([])
  })
  it('take a name that two parts share for the one of the step', () => {
    expect(parts('varnish the rail', STEPS[3]!)).toEqual(['outwale'])
    expect(parts('varnish the rail', null)).toEqual(['outwale', 'inner rail'])
  })
  it('leave out another step’s part that is only mentioned once', () => {
    expect(parts('the transom by the keelson, the transom', STEPS[1]!)).toEqual(['transom'])
    expect(parts('the transom, the keelson, the keelson', STEPS[1]!)).toEqual(['keelson', 'transom'])
  })
})
