import { describe, expect, it } from 'vitest'
import { cutPassages, type PassageChapter } from '#server/indexing/search/cutPassages'

const cues = (count: number, every = 4000) => Array.from({ length: count }, (_, i) => ({ trackId: 't', startMs: i * every, endMs: i * every + 3900, text: `line ${i} of the transom` }))
const chapter = (id: string, startMs: number, endMs: number, over: Partial<PassageChapter> = {}): PassageChapter => ({ id, startMs, endMs, stepId: null, operation: 'glue', inking: 'inked', partIds: [], words: [], ...over })

describe('cutPassages', () => {
  it('cuts speech into pieces of half a minute at most, losing no line', () => {
    const passages = cutPassages('b', cues(60), [])
    expect(passages.flatMap(passage => passage.lines)).toEqual(cues(60).map(cue => cue.text))
    for (const passage of passages) expect(passage.endMs - passage.startMs).toBeLessThanOrEqual(30_000)
  })
  it('never crosses the edge of a chapter', () => {
    const passages = cutPassages('b', cues(12), [chapter('one', 8000, 20_000), chapter('two', 20_000, 28_000)])
    for (const passage of passages) {
      const within = passage.starts.map(start => start >= 8000 && start < 20_000 ? 'one' : start >= 20_000 && start < 28_000 ? 'two' : null)
      expect(new Set(within)).toEqual(new Set([passage.chapterId]))
    }
    expect(passages.map(passage => passage.chapterId)).toEqual([null, 'one', 'two', null])
  })
  it('parts at long pauses, and at full stops once it is long enough', () => {
    const paused = cutPassages('b', [{ trackId: 't', startMs: 0, endMs: 2000, text: 'one' }, { trackId: 't', startMs: 9000, endMs: 11_000, text: 'two' }], [])
    expect(paused.length).toBe(2)
    const stops = cutPassages('b', cues(7).map((cue, i) => ({ ...cue, text: i === 4 ? 'and that is that.' : cue.text })), [])
    expect(stops[0]!.lines.length).toBe(5)
  })
  it('keeps caption files apart', () => {
    const two = [...cues(2), ...cues(2).map(cue => ({ ...cue, trackId: 'u' }))]
    expect(cutPassages('b', two, []).map(passage => passage.trackId)).toEqual(['t', 'u'])
  })
  it('finds a silent chapter by its tags, and leaves out one of no work', () => {
    const [silent, ...more] = cutPassages('b', [], [chapter('x', 5000, 9000, { stepId: 's', partIds: ['p'], words: ['Glue the cheeks'] }), chapter('y', 9000, 12_000, { operation: 'none' })])
    expect(more).toEqual([])
    expect(silent).toMatchObject({ chapterId: 'x', startMs: 5000, endMs: 9000, lines: [], lexemes: ['b:b', 'i:1', 'o:glue', 'p:p', 's:s', 't:cheek', 't:glue'] })
  })
  it('tags pencilled chapters without the mark of ink', () => {
    expect(cutPassages('b', cues(1), [chapter('x', 0, 9000, { inking: 'pencilled' })])[0]!.lexemes).not.toContain('i:1')
  })
})
