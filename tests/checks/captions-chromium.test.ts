import { chromium, type Browser, type Page } from '@playwright/test'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { oursInPlayerOrder } from './support/oursInPlayerOrder'
import { VTT_CORPUS } from './support/vttCorpus'

// Outside source: the WebVTT reader of Debian's Chromium, the very player that our viewers use:
// a text track's cues, and the text content of getCueAsHTML().

let browser: Browser
let page: Page

beforeAll(async () => {
  browser = await chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'] })
  page = await browser.newPage()
}, 60_000)

afterAll(() => browser?.close())

/** Where Chromium itself departs from the standard. */
const DEVIATIONS: Record<string, string> = {
  'bad times under an id': 'takes the line before the next times as an id; “collect a WebVTT block” has thrown it away with the bad cue',
  'style as id': 'sees STYLE before it sees the arrow on the second line; in “collect a WebVTT block” the arrow comes first',
}

it.each(Object.keys(VTT_CORPUS))('Chromium shows the same cues: %s', async (name) => {
  const shown = await page.evaluate(async (text) => {
    const video = document.createElement('video')
    const track = document.createElement('track')
    track.src = URL.createObjectURL(new Blob([text], { type: 'text/vtt' }))
    video.append(track)
    document.body.append(video)
    const settled = new Promise(resolve => ['load', 'error'].forEach(event => track.addEventListener(event, resolve, { once: true })))
    track.track.mode = 'hidden'
    await settled
    const cues = [...track.track.cues ?? []] as VTTCue[]
    const ms = (seconds: number) => Math.round(seconds * 1000)
    return cues.map(cue => ({ id: cue.id, startMs: ms(cue.startTime), endMs: ms(cue.endTime), text: cue.getCueAsHTML().textContent }))
  }, VTT_CORPUS[name]!)
  const ours = oursInPlayerOrder(VTT_CORPUS[name]!, 'corpus.vtt')
  if (name in DEVIATIONS) expect(shown, DEVIATIONS[name]).not.toEqual(ours)
  else expect(shown).toEqual(ours)
})
