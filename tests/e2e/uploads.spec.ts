import { readFile, writeFile } from 'node:fs/promises'
import type { Page, Route, TestInfo } from '@playwright/test'
import { expect, expectAccessible, hydrated, test } from '../support/browser'
import { cuesOf, freshClip, newBuild, newPerson, newSession, type OwnBuild, type Person } from '../support/people'

/** Uploads through the page, with the line cut, the page closed and the person gone elsewhere in the middle. */
const MIB = 1024 * 1024
let builder: Person
let build: OwnBuild

test.beforeAll(async () => {
  builder = await newPerson('Nan Caulker')
  build = await newBuild(builder)
})
test.afterAll(() => builder.api.dispose())
test.beforeEach(({ context }) => context.addCookies(builder.cookies))

/** A clip of four parts of 8 MiB on disk. */
async function largeClip(info: TestInfo, name: string): Promise<string> {
  const path = info.outputPath(name)
  await writeFile(path, await freshClip('good', 25 * MIB))
  return path
}

async function openSession(page: Page, id: string): Promise<void> {
  await page.goto(`/builds/${build.id}/sessions/${id}`)
  await hydrated(page)
}

async function pick(page: Page, files: string | string[]): Promise<void> {
  const [chooser] = await Promise.all([page.waitForEvent('filechooser'), page.getByRole('button', { name: 'Pick files' }).click()])
  await chooser.setFiles(files)
}

/** Stands between page and storage: counts the parts that are sent and holds back those that may not pass yet. */
async function watchParts(page: Page, mayPass: (part: number) => boolean) {
  const arrived: number[] = []
  const held: Route[] = []
  let open = false
  const partOf = (url: string) => Number(new URL(url).searchParams.get('partNumber'))
  await page.route(url => url.searchParams.has('partNumber'), async (route) => {
    if (open || route.request().method() !== 'PUT' || mayPass(partOf(route.request().url()))) await route.continue()
    else held.push(route)
  })
  page.on('response', (response) => {
    if (response.request().method() === 'PUT' && response.ok() && new URL(response.url()).searchParams.has('partNumber')) arrived.push(partOf(response.url()))
  })
  return {
    /** Parts that the storage has taken, in order of their number. */
    arrived: () => [...arrived].sort((a, b) => a - b),
    held,
    open: () => open = true,
    /** Parts in flight when a line breaks are lost. */
    lose: () => Promise.all(held.splice(0).map(route => route.abort('internetdisconnected').catch(() => {}))),
  }
}

const tray = (page: Page) => page.getByRole('complementary', { name: 'Uploads' })
const rowOf = (page: Page, name: string) => tray(page).getByRole('listitem').filter({ hasText: name })
const clipRow = (page: Page, name: string) => page.locator('[data-clip-state]').filter({ hasText: name })

async function openTray(page: Page): Promise<void> {
  const head = tray(page).getByRole('button', { expanded: false })
  if (await head.count()) await head.click()
}

async function expectReady(page: Page, name: string): Promise<void> {
  await expect(clipRow(page, name)).toHaveAttribute('data-clip-state', 'ready', { timeout: 60_000 })
}

test('a lost connection: what arrived is kept, and the rest goes on by itself', async ({ page, context }, info) => {
  const file = await largeClip(info, 'VID_20261010_090000.mp4')
  await openSession(page, await newSession(build))
  const parts = await watchParts(page, part => part <= 2)
  await pick(page, file)
  await expect.poll(parts.arrived).toEqual([1, 2])
  await expect.poll(() => parts.held.length).toBe(2)
  await openTray(page)

  await context.setOffline(true)
  await parts.lose()
  await expect(rowOf(page, 'VID_20261010_090000')).toContainText('No connection. This goes on by itself when it is back.')
  parts.open()
  await context.setOffline(false)
  await expect(rowOf(page, 'VID_20261010_090000')).toHaveAttribute('data-state', 'done', { timeout: 30_000 })
  expect(parts.arrived()).toEqual([1, 2, 3, 4])
  await expectReady(page, 'VID_20261010_090000')
})

test('a reload of the page: picking the same file again sends only what is missing', async ({ page }, info) => {
  const file = await largeClip(info, 'VID_20261010_100000.mp4')
  await openSession(page, await newSession(build))
  const parts = await watchParts(page, part => part <= 2)
  await pick(page, file)
  await expect.poll(parts.arrived).toEqual([1, 2])

  // The browser asks before it throws an upload away.
  const asked: string[] = []
  page.on('dialog', (dialog) => {
    asked.push(dialog.type())
    void dialog.accept()
  })
  await page.reload()
  await hydrated(page)
  expect(asked).toEqual(['beforeunload'])
  await expect(clipRow(page, 'VID_20261010_100000')).toContainText('pick the same file again')
  await tray(page).getByRole('button', { name: '1 upload was interrupted' }).click()
  await expect(tray(page)).toContainText('VID_20261010_100000.mp4')
  await expectAccessible(page)

  parts.open()
  await pick(page, file)
  await expectReady(page, 'VID_20261010_100000')
  expect(parts.arrived()).toEqual([1, 2, 3, 4])
  await expect(tray(page).getByText('was interrupted')).toHaveCount(0)
})

test('pause and go on, and about the site meanwhile', async ({ page }, info) => {
  const file = await largeClip(info, 'VID_20261010_110000.mp4')
  const session = await newSession(build)
  await openSession(page, session)
  const parts = await watchParts(page, part => part <= 2)
  await pick(page, file)
  await expect.poll(parts.arrived).toEqual([1, 2])
  await openTray(page)
  await page.getByRole('button', { name: 'Pause VID_20261010_110000.mp4' }).click()
  await expect(rowOf(page, 'VID_20261010_110000')).toContainText('Paused. What was sent is kept.')
  await expect(rowOf(page, 'VID_20261010_110000')).toHaveAttribute('data-state', 'paused')
  expect(parts.arrived()).toEqual([1, 2])

  parts.held.length = 0
  await page.getByRole('button', { name: 'Go on with VID_20261010_110000.mp4' }).click()
  await expect.poll(() => parts.held.length).toBe(2)
  await page.getByRole('navigation', { name: 'Build' }).getByRole('link', { name: 'Plan' }).click()
  await expect(page).toHaveURL(/\/plan$/)
  await expect(rowOf(page, 'VID_20261010_110000')).toHaveAttribute('data-state', 'sending')
  await Promise.all(parts.held.map(route => route.continue()))
  await expect(rowOf(page, 'VID_20261010_110000')).toHaveAttribute('data-state', 'done')
  expect(parts.arrived()).toEqual([1, 2, 3, 4])

  await page.getByRole('navigation', { name: 'Build' }).getByRole('link', { name: 'Sessions' }).click()
  await page.locator(`a[href$="${session}"]`).first().click()
  await expectReady(page, 'VID_20261010_110000')
})

test('the same file again, under another name and in another session, leads to the clip that has it', async ({ page }, info) => {
  const [first, second] = [info.outputPath('VID_20261010_120000.mp4'), info.outputPath('copy of it.mp4')]
  await writeFile(first, await freshClip())
  await writeFile(second, await readFile(first))
  const session = await newSession(build)
  await openSession(page, session)
  await pick(page, first)
  await expectReady(page, 'VID_20261010_120000')

  await openSession(page, await newSession(build))
  const parts = await watchParts(page, () => true)
  await pick(page, second)
  await expect(rowOf(page, 'copy of it.mp4')).toHaveAttribute('data-state', 'double')
  await expect(rowOf(page, 'copy of it.mp4')).toContainText('VID_20261010_120000.mp4')
  expect(parts.arrived()).toEqual([])
  await expect(page.locator('[data-clip-state]')).toHaveCount(0)
  await rowOf(page, 'copy of it.mp4').getByRole('link', { name: 'Show it' }).click()
  await expect(page).toHaveURL(new RegExp(`/sessions/${session}\\?clip=`))
  await expect(clipRow(page, 'VID_20261010_120000')).toBeInViewport()
})

/** Lets go of files over the page, as a hand does. */
async function drop(page: Page, files: { name: string, type: string, bytes: Buffer }[]): Promise<void> {
  const transfer = await page.evaluateHandle((list) => {
    const data = new DataTransfer()
    for (const { name, type, base64 } of list) data.items.add(new File([Uint8Array.from(atob(base64), sign => sign.charCodeAt(0))], name, { type }))
    return data
  }, files.map(({ name, type, bytes }) => ({ name, type, base64: bytes.toString('base64') })))
  await page.getByRole('region', { name: 'Add clips and captions' }).dispatchEvent('drop', { dataTransfer: transfer })
}

test('captions: paired when dropped together, paired by hand, corrected in place, and out again', async ({ page }) => {
  const session = await newSession(build)
  await openSession(page, session)
  await drop(page, [
    { name: 'knee.mp4', type: 'video/mp4', bytes: await freshClip() },
    { name: 'knee.en.vtt', type: 'text/vtt', bytes: Buffer.from('WEBVTT\n\n00:00.500 --> 00:01.500\nfit the nee dry\n\n00:02.000 --> 00:03.000\nthen glue it\n') },
    { name: 'breasthook.mp4', type: 'video/mp4', bytes: await freshClip('silent') },
    { name: 'notes from the recorder.srt', type: '', bytes: Buffer.from('1\n00:00:00,250 --> 00:00:01,000\nscribe the breasthook\n') },
    { name: 'shopping.xlsx', type: '', bytes: Buffer.from('no') },
  ])
  await expect(page.getByText('Left out, because it is neither a clip nor captions: shopping.xlsx.')).toBeVisible()
  await expectReady(page, 'knee.mp4')
  await expectReady(page, 'breasthook.mp4')
  await expect(clipRow(page, 'knee.mp4').getByRole('list', { name: 'Captions' })).toContainText(/knee\.en\.vtt\s*2 captions, en/)

  const waiting = page.getByRole('region', { name: 'Captions without a clip' })
  await expect(waiting).toContainText('notes from the recorder.srt')
  await waiting.getByLabel('Clip for notes from the recorder.srt').selectOption({ label: 'breasthook.mp4' })
  await expect(waiting).toHaveCount(0)
  await expect(clipRow(page, 'breasthook.mp4').getByRole('list', { name: 'Captions' })).toContainText(/notes from the recorder\.srt\s*1 caption/)

  const words = page.locator('[data-transcript] [data-row]').filter({ hasText: 'fit the nee dry' })
  await words.hover()
  await words.getByRole('button', { name: /^Correct the caption/ }).click()
  await page.getByLabel('Words of the caption').fill('fit the knee dry')
  await expectAccessible(page)
  await page.keyboard.press('Enter')
  await expect(page.locator('[data-transcript]')).toContainText('fit the knee dry')
  expect((await cuesOf(builder, session)).find(cue => cue.text === 'fit the knee dry')).toMatchObject({ startMs: 500, endMs: 1500, edited: true })

  await clipRow(page, 'knee.mp4').getByRole('list', { name: 'Captions' }).getByRole('button', { name: 'More' }).click()
  const download = async (name: string | RegExp) => {
    const [file] = await Promise.all([page.waitForEvent('download'), clipRow(page, 'knee.mp4').getByRole('link', { name, exact: typeof name === 'string' }).click()])
    return { name: file.suggestedFilename(), text: await readFile(await file.path(), 'utf8') }
  }
  const vtt = await download('Download .vtt')
  expect(vtt.name).toMatch(/\.vtt$/)
  expect(vtt.text).toMatch(/^WEBVTT\r?\n[^]*00:00:00\.500 --> 00:00:01\.500\r?\nfit the knee dry/)
  const srt = await download('.srt')
  expect(srt.name).toMatch(/\.srt$/)
  expect(srt.text).toMatch(/^1\r?\n00:00:00,500 --> 00:00:01,500\r?\nfit the knee dry\r?\n\r?\n2\r?\n00:00:02,000 --> 00:00:03,000/)
  // The file as it came is kept.
  expect((await download('As uploaded')).text).toContain('fit the nee dry')
})
