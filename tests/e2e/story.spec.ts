import { cpSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import type { Browser, Locator, Page } from '@playwright/test'
import { execa } from 'execa'
import { readCaptions } from '#server/indexing/captions/readCaptions'
import type { ChapterView, SessionDetail } from '#shared/types/session'
import { OPERATION_KEYS } from '#shared/utils/operationKeys'
import { demoBuild } from '../../workers/demo/index'
import { expect, expectAccessible, test } from '../support/browser'

/**
 * The whole story: a builder signs up, imports a plan, makes a session, drops four phone clips with their captions,
 * watches them being indexed and marks a chapter; then a stranger asks how the transom was glued and stands on the
 * second. Once by mouse and once by keyboard alone; the stranger on a desktop and on a phone of 390 px.
 */
const folder = mkdtempSync(join(tmpdir(), 'ribband-story-'))
test.afterAll(() => rmSync(folder, { recursive: true, force: true }))
test.setTimeout(300_000)

const gluing = demoBuild.sessions[0]!.clips.find(clip => clip.chapters.some(chapter => chapter.operation === 'glue'))!
const glued = gluing.chapters.find(chapter => chapter.operation === 'glue')!
const spoken = readCaptions(readFileSync(gluing.captions)).cues
const cues = spoken.filter(cue => cue.startMs >= glued.startMs - 500 && cue.endMs <= glued.endMs + 500)

/** The first words of a caption, as the transcript shows them. */
const openingOf = (cue: { text: string }) => cue.text.split('\n')[0]!.slice(0, 24)

/** A line of the transcript, which holds only the lines in sight: found by its words. */
async function lineOf(page: Page, cue: { text: string }): Promise<Locator> {
  const find = page.getByPlaceholder('Find words').filter({ visible: true })
  await find.fill(openingOf(cue))
  await find.press('Enter')
  return page.locator('[data-cue-text]').filter({ hasText: openingOf(cue) }).first()
}

/** Four clips of one Saturday, the gluing first: the demo's pictures and words, with bytes of their own. */
async function fourClips(name: string): Promise<string[]> {
  const into = mkdtempSync(join(folder, `${name}-`))
  const others = demoBuild.sessions.flatMap(session => session.clips).filter(clip => clip !== gluing && clip.durationMs < 120_000).slice(0, 3)
  return (await Promise.all([gluing, ...others].map(async (clip, n) => {
    const stem = join(into, `VID_20261003_10${n}000`)
    const captions = `${stem}${clip.captions.endsWith('.srt') ? '.en.srt' : '.en.vtt'}`
    await execa('ffmpeg', ['-nostdin', '-v', 'error', '-i', clip.file, '-c', 'copy', '-map_metadata', '-1', '-metadata', `comment=${name}`, '-metadata', `creation_time=2026-10-03T10:${n}0:00Z`, '-movflags', '+faststart', `${stem}.mp4`])
    cpSync(clip.captions, captions)
    return [`${stem}.mp4`, captions]
  }))).flat()
}

/** Clicks with the mouse, or goes there with Tab alone and presses Enter. */
type Hand = { press: (target: Locator) => Promise<void>, fill: (target: Locator, text: string) => Promise<void> }

const byMouse = (): Hand => ({ press: target => target.click(), fill: (target, text) => target.fill(text) })
const byKeyboard = (page: Page): Hand => ({
  press: async (target) => {
    await tabTo(page, target)
    await page.keyboard.press((await target.evaluate(element => element.matches('input[type=radio], input[type=checkbox]'))) ? 'Space' : 'Enter')
  },
  fill: async (target, text) => {
    await tabTo(page, target)
    await page.keyboard.press('Control+a')
    await page.keyboard.type(text)
  },
})

async function tabTo(page: Page, target: Locator): Promise<void> {
  await expect(target).toBeAttached()
  for (let n = 0; n < 150; n++) {
    if (await target.evaluate(element => element === document.activeElement)) return
    await page.keyboard.press('Tab')
  }
  throw new Error(`Tab does not reach ${target}`)
}

async function chooseFiles(page: Page, hand: Hand, button: Locator, files: string | string[]): Promise<void> {
  const [chooser] = await Promise.all([page.waitForEvent('filechooser'), hand.press(button)])
  await chooser.setFiles(files)
}

/** From nothing to a session with four indexed clips; answers where it is. */
async function buildUpTo(page: Page, hand: Hand, name: string): Promise<{ build: string, session: string }> {
  await page.goto('/sign-up')
  await hand.fill(page.getByLabel('Your name'), name)
  await hand.fill(page.getByLabel('E-mail address'), `${name.toLowerCase().replaceAll(/\W/g, '')}.${Date.now()}@example.test`)
  await hand.fill(page.getByLabel('Password'), 'a long enough phrase')
  await hand.press(page.getByRole('button', { name: 'Make the account' }))
  await expect(page).toHaveURL(/\/builds$/)
  await expectAccessible(page)

  await page.goto('/builds/new')
  await hand.fill(page.getByLabel('Name of the build'), `${name}'s pram`)
  await hand.press(page.getByRole('button', { name: 'Start the build' }))
  await expect(page).toHaveURL(/\/builds\/[0-9a-f-]{36}\/plan/)
  const build = /builds\/([0-9a-f-]{36})/.exec(page.url())![1]!
  for (const [file, what] of [[demoBuild.partsFile, 'parts'], [demoBuild.planFile, 'plan']] as const) {
    await page.goto(`/builds/${build}/plan/import`)
    const input = page.locator('input[type=file]')
    await (hand === mouse ? input.setInputFiles(file) : chooseFiles(page, { ...hand, press: async (target) => {
      await tabTo(page, target)
      await page.keyboard.press('Space')
    } }, input, file))
    await hand.press(page.getByRole('button', { name: /^Import \d+/ }))
    await expect(page).toHaveURL(new RegExp(`/${what}$`))
  }

  await page.goto(`/builds/${build}/sessions/new`)
  await hand.fill(page.getByLabel('Place'), 'The apple store')
  await hand.press(page.getByRole('button', { name: 'Save and add clips' }))
  await expect(page).toHaveURL(/\/sessions\/[0-9a-f-]{36}$/)
  const session = /sessions\/([0-9a-f-]{36})/.exec(page.url())![1]!
  await chooseFiles(page, hand, page.getByRole('button', { name: 'Pick files' }), await fourClips(name))
  await expect.poll(async () => {
    const { clips } = await (await page.request.get(`/api/sessions/${session}`)).json() as SessionDetail
    return clips.map(clip => clip.state)
  }, { timeout: 150_000 }).toEqual(['ready', 'ready', 'ready', 'ready'])
  await expect.poll(async () => ((await (await page.request.get(`/api/sessions/${session}`)).json()) as SessionDetail).tracks.every(track => track.read && track.clipId)).toBe(true)
  await expect(page.locator('[data-cue-text]').filter({ hasText: openingOf(spoken[0]!) }).first()).toBeVisible()
  return { build, session }
}

let mouse: Hand

async function chaptersOf(page: Page, session: string): Promise<ChapterView[]> {
  // What the program has pencilled meanwhile is not what these tests mark.
  return ((await (await page.request.get(`/api/sessions/${session}/chapters`)).json()) as { chapters: ChapterView[] }).chapters.filter(one => !one.proposed)
}

/** The step picker, open: the step by its words, the operation by its letter, the parts as they are ticked. */
async function pickGluing(page: Page): Promise<void> {
  await expect(page.getByRole('combobox', { name: 'Find a step' })).toBeFocused()
  await page.keyboard.type('cheeks bow')
  await page.keyboard.press('Enter')
  await expect(page.getByRole('group', { name: 'Operation' })).toBeVisible()
  await page.keyboard.press(OPERATION_KEYS.glue)
  await expect(page.getByRole('button', { name: 'Mark chapter' })).toBeFocused()
  await page.keyboard.press('Enter')
  await expect(page.getByRole('dialog')).toHaveCount(0)
}

async function expectGluing(page: Page, session: string): Promise<void> {
  await expect.poll(async () => (await chaptersOf(page, session)).length).toBe(1)
  const [chapter] = await chaptersOf(page, session)
  expect(chapter).toMatchObject({ operation: 'glue', inking: 'inked' })
  expect(chapter!.partIds.length).toBeGreaterThan(0)
  expect(Math.abs(chapter!.startMs - cues[0]!.startMs)).toBeLessThan(2500)
}

async function publish(page: Page, hand: Hand, build: string): Promise<string> {
  await page.goto(`/builds/${build}/settings`)
  const label = page.getByRole('radio', { name: /^Public/ })
  if (hand === mouse) {
    await label.check()
  }
  else {
    await tabTo(page, page.getByRole('radio', { name: /^Private/ }))
    for (let n = 0; n < 2; n++) await page.keyboard.press('ArrowDown')
    await expect(label).toBeChecked()
  }
  await hand.press(page.getByRole('button', { name: 'Save settings' }))
  await expect(page.getByText('The settings are saved.')).toBeVisible()
  return ((await (await page.request.get(`/api/builds/${build}`)).json()) as { address: string }).address
}

/** Somebody without an account asks, and stands on the second. */
async function strangerFindsIt(browser: Browser, site: string, address: string, width: number): Promise<void> {
  const context = await browser.newContext({ baseURL: site, viewport: { width, height: 844 }, hasTouch: width < 500 })
  const page = await context.newPage()
  await page.goto(`/watch/${address}`)
  await expectAccessible(page)
  await page.goto(`/watch/${address}/search?q=${encodeURIComponent('how was the transom glued')}`)
  const first = page.locator('[data-moment]').first()
  await expect(first).toBeVisible()
  await expectAccessible(page)
  const at = Number(await first.getAttribute('data-at'))
  expect(at).toBeGreaterThanOrEqual(cues[0]!.startMs - 5000)
  expect(at).toBeLessThanOrEqual(cues.at(-1)!.endMs)
  await first.click()
  const video = page.locator('video:visible').first()
  await expect.poll(() => video.evaluate((element: HTMLVideoElement) => element.readyState >= 2 ? element.currentTime * 1000 : -1)).toBeGreaterThan(at - 500)
  expect(await video.evaluate((element: HTMLVideoElement) => element.currentTime * 1000)).toBeLessThan(at + 8000)
  // Nothing is wider than the page.
  expect(await page.evaluate(() => document.documentElement.scrollWidth - innerWidth)).toBeLessThanOrEqual(0)
  await context.close()
}

test('by mouse, from four clips to the right second', async ({ page, browser, site }) => {
  mouse = byMouse()
  const { build, session } = await buildUpTo(page, mouse, 'Odo Mouse')
  await expectAccessible(page)
  await (await lineOf(page, cues[0]!)).click()
  await page.locator('[data-mark=in]').filter({ visible: true }).click()
  await (await lineOf(page, cues.at(-1)!)).click()
  await page.locator('[data-mark=out]').filter({ visible: true }).click()
  await page.locator('[data-tag]').filter({ visible: true }).click()
  await expectAccessible(page)
  await page.getByRole('combobox', { name: 'Find a step' }).fill('cheeks bow')
  await page.getByRole('option').first().click()
  await page.locator('[data-operation=glue]').click()
  await page.locator('[data-finish]').click()
  await expectGluing(page, session)

  // Taken back and done again, as a person does who has doubts.
  await page.locator('[data-undo]').click()
  await expect.poll(async () => (await chaptersOf(page, session)).length).toBe(0)
  await page.locator('[data-redo]').click()
  await expectGluing(page, session)

  const address = await publish(page, mouse, build)
  await strangerFindsIt(browser, site, address, 1440)
  await strangerFindsIt(browser, site, address, 390)
})

test('by keyboard alone, from four clips to the right second', async ({ page, browser, site }) => {
  const hand = byKeyboard(page)
  const { build, session } = await buildUpTo(page, hand, 'Ada Keys')
  await page.evaluate(() => (document.activeElement as HTMLElement | null)?.blur())
  const seconds = async (n: number) => {
    for (let i = 0; i < n; i++) await page.keyboard.press('ArrowRight')
  }
  await seconds(Math.round(cues[0]!.startMs / 1000))
  await page.keyboard.press('i')
  await seconds(Math.round((cues.at(-1)!.endMs - cues[0]!.startMs) / 1000) - 1)
  await page.keyboard.press('o')
  await page.keyboard.press('Enter')
  await pickGluing(page)
  await expectGluing(page, session)
  await page.keyboard.press('Control+z')
  await expect.poll(async () => (await chaptersOf(page, session)).length).toBe(0)
  await page.keyboard.press('Control+Shift+z')
  await expectGluing(page, session)
  await page.keyboard.press('?')
  await expect(page.getByRole('dialog')).toBeVisible()
  await page.keyboard.press('Escape')

  const address = await publish(page, hand, build)
  await page.goto(`/watch/${address}/search`)
  await hand.fill(page.getByRole('searchbox').first(), 'how was the transom glued')
  await page.keyboard.press('Enter')
  const first = page.locator('[data-moment]').first()
  await expect(first).toBeVisible()
  await tabTo(page, first)
  await page.keyboard.press('Enter')
  const at = Number(await first.getAttribute('data-at'))
  const video = page.locator('video:visible').first()
  await expect.poll(() => video.evaluate((element: HTMLVideoElement) => element.readyState >= 2 ? element.currentTime * 1000 : -1)).toBeGreaterThan(at - 500)
  await strangerFindsIt(browser, site, address, 390)
})
