import { expect, it } from 'vitest'
import { writeSitemap } from '#shared/utils/sitemap'
import { isoDuration, videoData } from '#shared/utils/videoData'

it('writes addresses with their signs escaped', () => {
  const xml = writeSitemap('https://x.test', [{ path: '/watch/a?b=1&c=<2>' }, { path: '/watch', changed: new Date('2026-09-05T10:00:00Z') }])
  expect(xml).toContain('<loc>https://x.test/watch/a?b=1&amp;c=&lt;2&gt;</loc>')
  expect(xml).toContain('<url><loc>https://x.test/watch</loc><lastmod>2026-09-05T10:00:00.000Z</lastmod></url>')
})

it('stops at as many as a sitemap may hold', () => {
  expect(writeSitemap('', Array.from({ length: 50_010 }, () => ({ path: '/' }))).match(/<url>/g)?.length).toBe(50_000)
})

it.each([[0, 'PT0S'], [12_500, 'PT12.5S'], [90_000, 'PT1M30S'], [3_723_004, 'PT1H2M3.004S']])('writes %i ms as %s', (ms, text) => expect(isoDuration(ms)).toBe(text))

it('describes clips with chapters as parts', () => {
  const clip = { id: 'k', date: '2026-09-05', durationMs: 60_000, src: '/media/clips/k/video', width: 16, height: 9, frameRate: null, poster: '/media/clips/k/poster', tracks: [] }
  const chapter = { id: 'c', clipId: 'k', startMs: 1500, endMs: 9000, operation: 'glue' as const, step: null, parts: ['bow transom'], note: '', picture: null }
  const [video] = videoData({ site: 'https://x.test', address: 'pram', title: 'Pram', description: '', clips: [clip, { ...clip, id: 'n', poster: null }], chapters: [chapter] })
  expect(video).toMatchObject({
    '@type': 'VideoObject', 'thumbnailUrl': ['https://x.test/media/clips/k/poster'], 'duration': 'PT1M0S',
    'hasPart': [{ '@type': 'Clip', 'name': 'Glue: bow transom', 'startOffset': 1.5, 'endOffset': 9, 'url': 'https://x.test/watch/pram/moments/k?at=1.5' }],
  })
})
