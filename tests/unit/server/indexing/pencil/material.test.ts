import { describe, expect, it } from 'vitest'
import { gather } from '#server/indexing/pencil/material'
import { takePortion } from '#server/indexing/pencil/portions'
import { listen } from '#server/indexing/pencil/speech'
import { indexSteps } from '#server/indexing/pencil/stepEvidence'
import { clipOf, PARTS, STEPS, talk } from './support'

const index = indexSteps(STEPS, PARTS)
const W = 14

describe('what is gathered of a session', () => {
  it('may start a chapter at its first cue, its end, the start of every clip and the edges of what is fixed, never inside', () => {
    const speech = listen([clipOf(talk(1, 2)), clipOf(talk(3))])
    const { nodes } = gather(speech, index, [], [{ from: 3, to: 8, step: 0, kind: 6 }])
    expect(nodes[0]).toBe(0)
    expect(nodes.at(-1)).toBe(15)
    for (const edge of [3, 8, 10]) expect(nodes).toContain(edge)
    expect(nodes.filter(node => node > 3 && node < 8)).toEqual([])
    expect(nodes).toEqual([...new Set(nodes)].sort((a, b) => a - b))
  })

  it('may start one where a turn is heard, rather than in the middle of a sentence', () => {
    const lines = Array.from({ length: 40 }, (_, i) => i === 20 ? 'okay so next the varnish' : 'and more of the')
    const { nodes } = gather(listen([clipOf(lines)]), index)
    expect(nodes).toContain(20)
    expect(gather(listen([clipOf(talk(1, 2, 3, 4))]), index).nodes).toEqual(expect.arrayContaining([5, 10, 15]))
  })

  it('gives cues their time to the next one in the clip, and the silence before the first, at most 10 s', () => {
    const speech = listen([clipOf(['plane the edge fair', 'glue the edge down'], { fromMs: 3000 }), clipOf(['sand the edge fair'], { fromMs: 60_000 })])
    expect([...gather(speech, index).seconds]).toEqual([7, 3.8, 13.8])
  })

  it('gives the first cue of a portion no more than the silence before it, in the middle of a clip', () => {
    const speech = listen([clipOf(talk(1, 2))])
    expect(gather(takePortion(speech, { from: 5, to: 8 }), index).seconds[0]).toBeCloseTo(4.2, 9)
  })

  it('says how near the beginning and the end of the session each cue is', () => {
    const { start, end } = gather(listen([clipOf(talk(1, 2, 3))]), index)
    expect(start[0]).toBe(1)
    expect(end.at(-1)).toBe(1)
    for (let i = 1; i < start.length; i++) {
      expect(start[i]!).toBeLessThan(start[i - 1]!)
      expect(end[i]!).toBeGreaterThan(end[i - 1]!)
    }
  })

  it('hears shop talk and chat apart', () => {
    const { shop } = gather(listen([clipOf(['plane the bevel on the transom', 'so there we are then'])]), index)
    expect(shop[0]).toBeGreaterThan(shop[1]! + 0.3)
    for (const value of shop) expect(value >= 0 && value <= 2).toBe(true)
  })

  it('has tables of the right size, also without a plan and without speech', () => {
    for (const [speech, S] of [[listen([clipOf(talk(1))]), 4], [listen([]), 4], [listen([clipOf(talk(1))]), 0]] as const) {
      const material = gather(speech, S ? index : indexSteps([], []))
      const n = speech.cues.length
      expect([material.openWords.length, material.openTopic.length, material.kinds.length, material.seconds.length]).toEqual([n * S, n * S, n * (W + 1), n])
    }
  })
})
