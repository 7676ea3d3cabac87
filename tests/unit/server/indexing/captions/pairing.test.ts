import { expect, it } from 'vitest'
import { pairCaptions } from '#server/indexing/captions/pairing'

const clips = ['clip.mp4', 'clip.two.mp4', 'VID_1.MOV', 'both.mp4', 'both.mov', 'shop.en.mp4', 'Überlappung.mp4']

it.each<[string, string | null, string | null]>([
  ['clip.vtt', 'clip.mp4', null],
  ['clip.en.vtt', 'clip.mp4', 'en'],
  ['clip.en-GB.srt', 'clip.mp4', 'en-GB'],
  ['CLIP.EN_gb.SRT', 'clip.mp4', 'en-GB'],
  ['clip.zh-hant-TW.vtt', 'clip.mp4', 'zh-Hant-TW'],
  ['clip.es-419.vtt', 'clip.mp4', 'es-419'],
  ['clip.mp4.vtt', 'clip.mp4', null],
  ['clip.mp4.de.vtt', 'clip.mp4', 'de'],
  ['clip.en.sdh.srt', 'clip.mp4', 'en'],
  ['clip.two.vtt', 'clip.two.mp4', null],
  ['clip.two.fr.vtt', 'clip.two.mp4', 'fr'],
  ['vid_1.vtt', 'VID_1.MOV', null],
  ['shop.en.vtt', 'shop.en.mp4', null],
  ['shop.en.de.vtt', 'shop.en.mp4', 'de'],
  ['U\u0308berlappung.vtt', 'Überlappung.mp4', null],
  ['both.vtt', null, null],
  ['both.mov.vtt', 'both.mov', null],
  ['clip2.vtt', null, null],
  ['clip.take3.vtt', null, null],
  ['clip.en.fr.vtt', null, 'fr'],
  ['.vtt', null, null],
  ['en.vtt', null, null],
])('%s belongs to %s in %s', (captionName, clipName, language) => {
  expect(pairCaptions(clips, [captionName])).toEqual([{ captionName, clipName, language }])
})

it('prefers the longest name, not a language', () => {
  expect(pairCaptions(['shop.mp4', 'shop.en.mp4'], ['shop.en.vtt', 'shop.de.vtt'])).toEqual([
    { captionName: 'shop.en.vtt', clipName: 'shop.en.mp4', language: null },
    { captionName: 'shop.de.vtt', clipName: 'shop.mp4', language: 'de' },
  ])
})

it('answers in the order asked, and once for a clip listed twice', () => {
  expect(pairCaptions(['a.mp4', 'a.mp4'], ['b.vtt', 'a.vtt']).map(pair => pair.clipName)).toEqual([null, 'a.mp4'])
})
