import { randomBytes } from 'node:crypto'
import { writeFile } from 'node:fs/promises'
import { createServer, type Server } from 'node:http'
import type { AddressInfo } from 'node:net'
import type { Page } from '@playwright/test'
import { expect, expectAccessible, hydrated, test } from '../support/browser'
import { type ClipKind, makeClip } from '../support/clips'
import { cuesOf, newBuild, newPerson, newSession, type OwnBuild, type Person, sessionDetail } from '../support/people'

/**
 * Every bad file through the real page, storage and worker, all dropped on one session: each says what happened and
 * what was kept, and the page goes on working. What a test asserts of a file is what the builder reads.
 */
test.describe.configure({ mode: 'serial' })
test.setTimeout(240_000)

let builder: Person
let build: OwnBuild
let session: string
/** Somebody else's server, that a bad file points at. It must never be asked. */
let elsewhere: Server
const askedElsewhere: string[] = []

const FAILING: Partial<Record<ClipKind, RegExp>> = {
  'cut-off': /The clip is cut short.*The file is kept as uploaded\..*Copy it from the camera or phone again/,
  'no-index': /The clip is cut short: its end is missing, and with it the index that cameras write last\./,
  'text': /This is not a video or sound file: it holds plain text\. The file is kept as uploaded\./,
  'playlist-file': /a clip: it only points at files elsewhere, and those are never opened\. The file is kept as uploaded\. Upload the clips themselves/,
  'concat-list': /it only points at files elsewhere, and those are never opened/,
  'concat-list-plain': /it only points at files elsewhere, and those are never opened/,
  'dash-manifest': /it only points at files elsewhere, and those are never opened/,
  'many-streams': /The file claims to hold .*which no camera writes, so it was not read\. The file is kept as uploaded/,
  'absurd-size': /The picture claims to be .*more than 40 million pixels a frame are not read\. The file is kept as uploaded/,
}

/** Unusual, not broken: these can be used, and say what is unusual. */
const USABLE: Partial<Record<ClipKind, RegExp>> = {
  'good': /0:04/,
  'audio-only': /sound only.*This clip has sound only\. It can be captioned and given chapters like any other\./,
  'rotated': /180 × 320/,
  'variable-rate': /Its pictures do not come at an even rate/,
  'edit-list': /Its container starts or cuts the recording at another time than zero\. Times in Ribband count from the first moment it shows\./,
  'late-start': /Its container starts or cuts the recording at another time than zero/,
  'hevc': /Browsers cannot show its picture \(hevc\), so a copy in H\.264 is made for watching\./,
}

const HOSTILE = '<script>window.ran = true</script><img src=x onerror="window.ran = true">plane the knee'
const srt = (...cues: [string, string, string][]) => cues.map(([from, to, text], n) => `${n + 1}\n${from} --> ${to}\n${text}\n`).join('\n')

/** Caption files by name, and what is said of each. */
const CAPTIONS: Record<string, { bytes: Buffer, says: RegExp[], failure?: boolean, doubt?: boolean }> = {
  'good.en.srt': {
    bytes: Buffer.from(srt(['00:00:02,000', '00:00:03,500', 'and this is the second'], ['00:00:00,500', '00:00:02,500', 'this is the first'])),
    says: [/The caption at 0:00\.5 comes after a later one in the file\. It was put in order by its time\./, /The caption at 0:02\.0 starts before the one at 0:00\.5 has ended\. Both were kept\./],
  },
  'rotated.en.vtt': {
    bytes: Buffer.from(`WEBVTT\n\n00:00.200 --> 00:01.000\n${HOSTILE}\n\n00:01.200 --> 00:02.000\n&lt;b&gt;in so many words&lt;/b&gt;\n`),
    says: [/is not caption markup and was removed; the words around it were kept/],
  },
  'variable-rate.en.srt': {
    bytes: Buffer.from(srt(['00:00:01,000', '00:00:02,000', '1½ inches at 20 °C – that’s dry']).replace('’', '\u0092').replace('–', '\u0096'), 'latin1'),
    says: [/The file is not UTF-8, so it was read as Windows-1252\. If letters look wrong, save it as UTF-8 and add it again\./],
  },
  'late-start.en.srt': {
    bytes: Buffer.from(srt(['00:00:01,000', '00:00:02,000', 'in time'], ['00:09:00,000', '00:09:59,000', 'long after the end'])),
    says: [/Do these captions belong to late-start\.mkv\? The captions run 9 min 56 s longer than the clip\. 1 caption starts after its end and will not be seen\./],
    doubt: true,
  },
  'audio-only.en.srt': { bytes: Buffer.from(`\uFEFF${srt(['00:00:00,500', '00:00:01,500', 'tapping the “chine” – Ωλ'])}`, 'utf16le'), says: [] },
  'hevc.en.vtt': { bytes: Buffer.concat([Buffer.from('\x89PNG\r\n\x1A\n', 'latin1'), randomBytes(3000)]), says: [/No captions could be read\..*The file is kept as uploaded\./], failure: true },
}

test.beforeAll(async () => {
  elsewhere = createServer((request, response) => {
    askedElsewhere.push(request.url ?? '')
    response.end()
  })
  await new Promise<void>(resolve => elsewhere.listen(0, '127.0.0.1', resolve))
  builder = await newPerson('Wat Botcher')
  build = await newBuild(builder)
  session = await newSession(build)
})
test.afterAll(async () => {
  await builder.api.dispose()
  elsewhere.close()
})
test.beforeEach(async ({ context, page }) => {
  await context.addCookies(builder.cookies)
  await page.goto(`/builds/${build.id}/sessions/${session}`)
  await hydrated(page)
})

const rowOf = (page: Page, name: string) => page.locator('[data-clip-state]').filter({ has: page.locator('p').getByText(name, { exact: true }) })
const trayRow = (page: Page, name: string) => page.getByRole('complementary', { name: 'Uploads' }).getByRole('listitem').filter({ hasText: name })
const fileOf = async (kind: ClipKind) => (await makeClip(kind)).split('/').at(-1)!

test('all of them dropped at once: each settles, with what happened and what was kept', async ({ page }, info) => {
  const playlist = info.outputPath('playlist-of-ours.mp4')
  await writeFile(playlist, `#EXTM3U\n#EXT-X-TARGETDURATION:5\n#EXTINF:5,\nhttp://127.0.0.1:${(elsewhere.address() as AddressInfo).port}/secret.ts\n#EXT-X-ENDLIST\n`)
  const huge = info.outputPath('good.srt')
  await writeFile(huge, Buffer.alloc(10 * 1024 * 1024, 'plane plane\n'))
  for (const [name, { bytes }] of Object.entries(CAPTIONS)) await writeFile(info.outputPath(name), bytes)
  const kinds = [...Object.keys(FAILING), ...Object.keys(USABLE)] as ClipKind[]
  const clips = await Promise.all([...kinds, 'empty' as const].map(makeClip))
  const [chooser] = await Promise.all([page.waitForEvent('filechooser'), page.getByRole('button', { name: 'Pick files' }).click()])
  await chooser.setFiles([...clips, playlist, huge, ...Object.keys(CAPTIONS).map(name => info.outputPath(name))])

  // What never leaves this machine says so at once.
  await expect(trayRow(page, 'empty.mp4')).toContainText('The file is empty: it holds no bytes at all, so nothing was uploaded. Copy it from the camera or phone again.')
  await expect(trayRow(page, 'good.srt')).toContainText('good.srt has more than 5 MB, which no clip’s captions need, so it was not sent. Check that it is a caption file.')

  await expect.poll(async () => {
    const { clips, tracks } = await sessionDetail(builder, session)
    return { settled: clips.filter(clip => ['ready', 'failed'].includes(clip.state)).length, read: tracks.filter(track => track.read || track.failure).length }
  }, { timeout: 200_000, intervals: [1000] }).toEqual({ settled: kinds.length + 1, read: Object.keys(CAPTIONS).length })

  for (const kind of Object.keys(FAILING) as ClipKind[]) {
    const row = rowOf(page, await fileOf(kind))
    await expect.soft(row, kind).toHaveAttribute('data-clip-state', 'failed')
    await expect.soft(row.getByRole('status'), kind).toContainText(FAILING[kind]!)
    // Nothing in the file changes by trying again.
    await expect.soft(row.getByRole('button', { name: 'Try again' }), kind).toHaveCount(0)
    await expect.soft(trayRow(page, await fileOf(kind)), kind).toContainText(FAILING[kind]!, { timeout: 40_000 })
  }
  await expect.soft(rowOf(page, 'playlist-of-ours.mp4').getByRole('status')).toContainText(FAILING['playlist-file']!)
  expect(askedElsewhere).toEqual([])
  for (const kind of Object.keys(USABLE) as ClipKind[]) {
    const row = rowOf(page, await fileOf(kind))
    await expect.soft(row, kind).toHaveAttribute('data-clip-state', 'ready')
    await expect.soft(row, kind).toContainText(USABLE[kind]!)
  }
})

test('captions that are odd say how', async ({ page }) => {
  for (const [name, { says, failure, doubt }] of Object.entries(CAPTIONS)) {
    const track = page.getByRole('list', { name: 'Captions' }).getByRole('listitem').filter({ hasText: name })
    if (says.length && !failure && !doubt) await track.getByRole('button', { name: /remark/ }).click()
    for (const words of says) await expect.soft(track, name).toContainText(words)
  }
  const texts = (await cuesOf(builder, session)).map(cue => cue.text)
  expect(texts).toContain('1½ inches at 20 °C – that’s dry')
  expect(texts).toContain('tapping the “chine” – Ωλ')
  expect(texts).toContain('long after the end')
  // In order of time, whatever the file's own.
  expect(texts.indexOf('this is the first')).toBeLessThan(texts.indexOf('and this is the second'))
  await expectAccessible(page)
  await page.getByRole('button', { name: 'They belong here' }).click()
  await expect(page.locator('[data-doubt]')).toHaveCount(0)
})

test('markup and script in captions are words, never run', async ({ page }) => {
  const rows = page.locator('[data-transcript] [data-cue-text]')
  await page.getByLabel('Find in the transcript').fill('in so many words')
  await expect(rows.filter({ hasText: 'in so many words' })).toHaveText('<b>in so many words</b>')
  await page.getByLabel('Find in the transcript').fill('plane the knee')
  await expect(rows.filter({ hasText: 'plane the knee' })).toBeVisible()
  expect(await page.evaluate(() => 'ran' in window)).toBe(false)
  await expect(page.locator('[data-transcript] script, [data-transcript] img')).toHaveCount(0)
})

test('odd clips play: upright when held upright, HEVC by its copy, from the first moment shown', async ({ page }) => {
  const { clips } = await sessionDetail(builder, session)
  const video = page.locator('video[data-shown=true]')
  const stand = () => video.evaluate((element: HTMLVideoElement) => ({ shown: element.readyState >= 2 && element.videoWidth > 0, upright: element.videoHeight > element.videoWidth, at: element.currentTime }))
  for (const kind of ['rotated', 'hevc', 'variable-rate', 'edit-list', 'late-start'] as const) {
    const clip = clips.find(one => one.name.startsWith(`${kind}.`))!
    await page.goto(`/builds/${build.id}/sessions/${session}?clip=${clip.id}&at=0`)
    await expect(video).toHaveAttribute('data-clip', clip.id)
    await expect.poll(stand, { message: kind }).toMatchObject({ shown: true, upright: kind === 'rotated' })
    expect((await stand()).at, kind).toBeLessThan(0.2)
    await page.getByRole('button', { name: 'Play', exact: true }).click()
    await expect.poll(async () => (await stand()).at, { message: kind }).toBeGreaterThan(0.3)
  }
})

test('a broken clip can be deleted, and the rest of the page works', async ({ page }) => {
  const row = rowOf(page, 'text.mp4')
  await expect(row.getByRole('status')).toContainText(FAILING.text!)
  await page.getByRole('button', { name: 'Delete text.mp4' }).click()
  await page.getByRole('button', { name: 'Delete clip' }).click()
  await expect(row).toHaveCount(0)
  await page.locator('[data-cue-time]').first().click()
  await page.locator('[data-mark=in]:visible').click()
  await expect(page.locator('[data-mark=in]:visible')).toContainText(/\d/)
  await expectAccessible(page)
})
