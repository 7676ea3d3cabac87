import { describe, expect, it } from 'vitest'
import type { ChapterView, ClipView, CueView } from '#shared/types/session'
import { layoutStrip, planksFoot, zoneAt } from '#shared/utils/ribband/layout'
import { fitLabels, labelX, thinMarks } from '#shared/utils/ribband/marks'
import { cueAt, layChapters, layFootage, plankAt } from '#shared/utils/ribband/strip'

const clip = (id: string, offsetMs: number, durationMs: number | null, camera = 'Phone'): ClipView => ({
  id, name: `${id}.mp4`, sizeBytes: 1, state: 'ready', failure: null, durationMs, offsetMs, offsetByHand: false, camera, recordedAt: null, recordedAtSource: null,
  video: null, hasSound: false, src: null, poster: null, sheets: null, peaks: null, sceneChangesMs: [500], silences: [], warnings: [], tasks: [],
})
const cue = (id: string, clipId: string, startMs: number, endMs: number): CueView => ({ id, trackId: 't', clipId, startMs, endMs, text: id, edited: false, original: null, version: 1 })
const chapter = (id: string, clipId: string, startMs: number, endMs: number): ChapterView => ({
  id, clipId, startMs, endMs, stepId: null, operation: 'cut', partIds: [], inking: 'inked', confidence: null, evidence: [], alternatives: { steps: [], operations: [] }, proposed: false, note: '', version: 1, inkedBy: null, updatedBy: null,
})

const footage = layFootage(
  [clip('a', 0, 10_000), clip('b', 60_000, 5000), clip('o', 4000, 3000, 'Overhead'), clip('unknown', 0, null)],
  [cue('late', 'a', 5000, 8000), cue('early', 'a', 1000, 3000), cue('b1', 'b', 0, 1000), cue('lost', 'gone', 0, 1)],
)

describe('layFootage', () => {
  it('lays clips end to end with their captions in order, and knows what it left out', () => {
    expect(footage.clips.map(one => [one.id, one.lane, one.lineMs, one.lineEndMs])).toEqual([['a', 0, 0, 10_000], ['o', 1, 4000, 7000], ['b', 0, 10_000, 15_000]])
    expect(footage.cues.map(one => one.cue.id)).toEqual(['early', 'late', 'b1'])
    expect(footage.folds).toEqual([{ lineMs: 10_000, missingMs: 50_000 }])
    expect(footage.scenes.map(times => [...times])).toEqual([[500, 10_500], [4500]])
  })

  it('finds the words at a time', () => {
    const a = footage.byId.get('a')!
    expect([cueAt(a, 999), cueAt(a, 1000), cueAt(a, 2999), cueAt(a, 3000), cueAt(a, 6000)].map(found => found?.id ?? null)).toEqual([null, 'early', 'early', null, 'late'])
  })

  it('finds words under a shorter caption that has ended', () => {
    const laid = layFootage([clip('a', 0, 60_000)], [cue('long', 'a', 0, 10_000), cue('short', 'a', 2000, 3000)])
    expect([2500, 5000].map(ms => cueAt(laid.byId.get('a')!, ms)?.id)).toEqual(['short', 'long'])
  })
})

describe('layChapters', () => {
  const laid = layChapters(footage, [chapter('two', 'a', 3000, 6000), chapter('one', 'a', 1000, 3000), chapter('three', 'b', 0, 5000), chapter('lost', 'gone', 0, 1)], [])
  it('stands one station where two chapters meet, on the session’s clock', () => {
    expect(laid.planks[0]!.map(plank => plank.chapter.id)).toEqual(['one', 'two', 'three'])
    expect(laid.stations.map(station => [station.lineMs, station.sessionMs])).toEqual([[1000, 1000], [3000, 3000], [6000, 6000], [10_000, 60_000], [15_000, 65_000]])
    expect([...laid.stationPlaces[0]!]).toEqual([1000, 3000, 6000, 10_000, 15_000])
  })

  it('finds the chapter at a place, half open', () => {
    expect([999, 1000, 2999, 3000, 6000, 10_000].map(at => plankAt(laid.planks[0]!, at)?.chapter.id ?? null)).toEqual([null, 'one', 'one', 'two', null, 'three'])
  })
})

describe('marks and labels', () => {
  it('thin out by the scale, the same ones wherever the view stands', () => {
    const times = Array.from({ length: 1000 }, (_, n) => n * 10)
    const here = thinMarks(times, { startMs: 0, msPerPx: 10, widthPx: 400 }, 10)
    const further = thinMarks(times, { startMs: 1234, msPerPx: 10, widthPx: 400 }, 10)
    expect(here).toHaveLength(41)
    const shared = here.filter(time => time >= 1300)
    expect(further.slice(further.indexOf(shared[0]!), further.indexOf(shared[0]!) + shared.length)).toEqual(shared)
  })

  it('keep labels apart and inside the strip', () => {
    const labels = [0, 30, 100].map(lineMs => ({ lineMs, text: '', widthPx: 40 }))
    expect(fitLabels(labels, 1, 10).map(label => label.lineMs)).toEqual([0, 100])
    expect(labelX({ startMs: 0, msPerPx: 1, widthPx: 500 }, labels[0]!)).toBe(22)
  })
})

describe('the layout', () => {
  it('depends on bands and narrowness alone, and has fingertip-high planks when narrow', () => {
    expect(layoutStrip(2, 0, 'wide')).toEqual({ ...layoutStrip(2, 1300, 'wide'), width: 0 })
    expect(layoutStrip(1, 390, 'narrow').lanes[0]!.planks.height).toBeGreaterThanOrEqual(44)
    expect(layoutStrip(1, 0, 'low').height).toBeLessThan(layoutStrip(1, 0, 'wide').height)
    expect(layoutStrip(0, 0, 'wide').height).toBe(layoutStrip(1, 0, 'wide').height)
  })

  it('leaves room on a low window for a picture over the planks', () => {
    // Heads of site, build and sheet, transport and buttons come to less than 280 px.
    expect(720 - 280 - planksFoot(1, 'low')).toBeGreaterThan(190)
    expect(900 - 280 - planksFoot(1, 'wide')).toBeGreaterThan(340)
    expect(planksFoot(5, 'wide')).toBeLessThanOrEqual(planksFoot(2, 'wide'))
    expect(planksFoot(0, 'low')).toBe(planksFoot(1, 'low'))
  })

  it('knows what lies where', () => {
    const layout = layoutStrip(2, 1000, 'wide')
    const second = layout.lanes[1]!
    expect(zoneAt(layout, 20)).toEqual({ zone: 'sheer', lane: 0 })
    expect(zoneAt(layout, layout.lanes[0]!.planks.top + 5)).toEqual({ zone: 'planks', lane: 0 })
    expect(zoneAt(layout, second.planks.top + 5)).toEqual({ zone: 'planks', lane: 1 })
    expect(zoneAt(layout, second.pictures.top + 5)).toEqual({ zone: 'pictures', lane: 1 })
    expect(zoneAt(layout, layout.base + 1)).toEqual({ zone: 'foot', lane: 0 })
  })
})
