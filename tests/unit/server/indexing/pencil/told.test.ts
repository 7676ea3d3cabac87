import { describe, expect, it } from 'vitest'
import { hearTold } from '#server/indexing/pencil/told'
import { clipOf } from './support'

const told = (...texts: string[]) => hearTold([clipOf(texts)])

describe('what was told but not shown', () => {
  it.each([
    'i did the other side off camera', 'i went ahead and glued the keelson', 'while the camera was charging i planed it', 'i cut these last night', 'the battery died', 'i forgot to press record',
    'we already glued it', 'that is from last week', 'I didn’t film the sanding', 'last weekend I made the frames', 'the phone fell over', 'there\'s no footage of it', 'we spent the whole evening on it',
  ])('%s', text => expect(told(text)).toHaveLength(1))

  it.each(['i\'m going to plane it now', 'today i glued the frames', 'you saw me cut these last week', 'this goes on tomorrow', 'plane it until it is flat', '', '[camera off]'])('is not in “%s”', text => expect(told(text)).toEqual([]))

  it('is found over the edges of cues, at the cue in which its words start', () => {
    expect(told('plane that flat and fair', 'so now at last i went ahead', 'and glued the', 'keelson along the middle')).toMatchObject([{ clip: 0, atMs: 4000 }])
  })

  it('is found in captions of one word a cue', () => {
    const places = hearTold([clipOf('so there we are and i went ahead and glued the keelson to it'.split(' '), { everyMs: 400 })])
    expect(places).toHaveLength(1)
    expect(places[0]!.words).toContain('went ahead and glued')
  })

  it('is one place while it is spoken of, and another after a while', () => {
    const lines = Array.from({ length: 12 }, () => 'plane that flat there')
    lines[0] = 'i did that off camera'
    lines[1] = 'all of it off camera'
    lines[2] = 'yes off camera'
    lines[9] = 'and this off camera'
    expect(told(...lines).map(place => place.atMs)).toEqual([0, 36_000])
  })

  it('does not run over a long pause, nor from one clip into the next', () => {
    const paused = clipOf(['so i went ahead', 'and glued the keelson'])
    paused.cues[1]!.startMs += 9000
    paused.cues[1]!.endMs += 9000
    expect(hearTold([paused])).toEqual([])
    expect(hearTold([clipOf(['so i went ahead']), clipOf(['and glued the keelson'])])).toEqual([])
    expect(hearTold([clipOf(['done off camera']), clipOf(['done off camera'])]).map(place => place.clip)).toEqual([0, 1])
  })
})
