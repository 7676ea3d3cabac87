import { expect, it } from 'vitest'
import { demoBuild } from '../../../../workers/demo/index'
import { demoScript } from '../../../../workers/demo/script'
import { layOut } from '../../../../workers/demo/timeline'

const spoken = demoScript.flatMap(session => session.clips).flatMap(clip => 'beats' in clip ? [clip] : [])

it('a chapter begins where its own picture does, so that a link to it never shows the scene before', () => {
  for (const clip of spoken) {
    const timeline = layOut(clip, clip.beats.flatMap(beat => beat.lines.map(() => 2000)))
    const cuts = timeline.shots.map(shot => shot.startMs)
    const opening = clip.beats.filter(beat => beat.chapter)
    timeline.chapters.forEach((chapter, i) => {
      if (opening[i]!.lines[0]!.shot) expect(cuts, clip.file).toContain(chapter.startMs)
      for (const line of timeline.lines) expect(line.startMs >= chapter.startMs || line.endMs <= chapter.startMs, 'no word is cut').toBe(true)
    })
  }
})

it('the committed chapters still meet one another', () => {
  for (const clip of demoBuild.sessions.flatMap(session => session.clips)) {
    clip.chapters.forEach((chapter, i) => expect(chapter.startMs).toBeGreaterThanOrEqual(clip.chapters[i - 1]?.endMs ?? 0))
    expect(clip.chapters.at(-1)!.endMs).toBeLessThanOrEqual(clip.durationMs)
  }
})
