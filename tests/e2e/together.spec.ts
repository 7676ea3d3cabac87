import type { Page } from '@playwright/test'
import type { ChapterView } from '#shared/types/session'
import { OPERATION_KEYS } from '#shared/utils/operationKeys'
import type { Operation } from '#shared/types/trade'
import { expect, expectAccessible, hydrated, test } from '../support/browser'
import { addMember, freshClip, newBuild, newPerson, newSession, newStep, type OwnBuild, type Person, uploadReadyClip } from '../support/people'

/** Two people at one session, both builders of the boat, each in a browser of their own. */
let nell: Person
let tam: Person
let build: OwnBuild
/** One clip of 24 s for all: its chapters are wiped off before each test, which spares four uploads and their indexing. */
let session: string

test.beforeAll(async () => {
  [nell, tam] = await Promise.all([newPerson('Nell Garboard'), newPerson('Tam Sheerline')])
  build = await newBuild(nell)
  await addMember(build, tam, 'builder')
  await newStep(build, 'Fit the bow transom')
  await newStep(build, 'Bend the sheer clamp')
  session = await newSession(build)
  await uploadReadyClip(nell, session, 'bench.mp4', await freshClip('numbered'))
})
test.beforeEach(wipeChapters)
test.afterAll(() => Promise.all([nell.api.dispose(), tam.api.dispose()]))

const chaptersOf = async () => ((await (await nell.api.get(`/api/sessions/${session}/chapters`)).json()) as { chapters: ChapterView[] }).chapters

async function wipeChapters(): Promise<void> {
  const remove = (await chaptersOf()).map(({ id, version }) => ({ id, version }))
  if (remove.length) expect((await nell.api.post(`/api/sessions/${session}/chapters`, { data: { remove } })).ok()).toBe(true)
}

/** The session, open in both browsers, both hearing what the other does. */
async function bothThere(visit: (as: Person) => Promise<Page>): Promise<{ hers: Page, his: Page }> {
  const [hers, his] = await Promise.all([nell, tam].map(async (person) => {
    const page = await visit(person)
    const listening = page.waitForResponse(response => response.url().endsWith('/events'))
    await page.goto(`/builds/${build.id}/sessions/${session}`)
    await Promise.all([listening, hydrated(page)])
    await expect(page.locator('video[data-shown=true]')).toHaveCount(1)
    return page
  }))
  return { hers: hers!, his: his! }
}

/** Marks from one second to another by keys. Leaves the last press, that sends it, to the caller. */
async function mark(page: Page, from: number, to: number, step: string, operation: Operation): Promise<void> {
  await page.locator('body').click({ position: { x: 5, y: 5 } })
  const now = async () => Number.parseFloat(await page.locator('[data-clock]').textContent().then(text => text!.split(':').at(-1)!))
  for (let tries = 0; tries < 60 && Math.round(await now()) !== from; tries++) await page.keyboard.press(await now() > from ? 'ArrowLeft' : 'ArrowRight')
  await page.keyboard.press('Alt+i')
  for (let second = from; second < to; second++) await page.keyboard.press('ArrowRight')
  await page.keyboard.press('Alt+o')
  await page.keyboard.press('Enter')
  await pick(page, step, operation)
}

async function pick(page: Page, step: string, operation: Operation): Promise<void> {
  await page.getByRole('combobox', { name: 'Find a step' }).fill(step)
  await page.keyboard.press('Enter')
  await expect(page.getByRole('group', { name: 'Operation' })).toBeVisible()
  await page.keyboard.press(OPERATION_KEYS[operation])
  await expect(page.getByRole('group', { name: 'Operation' })).toHaveCount(0)
}

/** Holds what a page sends about chapters until let go: so that two people are as quick as each other, every time. */
async function holdChanges(page: Page): Promise<{ sent: () => boolean, letGo: () => void }> {
  let sent = false
  let letGo = () => {}
  const released = new Promise<void>(resolve => letGo = resolve)
  await page.route(url => url.pathname.endsWith('/chapters'), async (route) => {
    if (route.request().method() === 'POST') {
      sent = true
      await released
    }
    await route.continue()
  })
  return { sent: () => sent, letGo }
}

const row = (page: Page, words: string) => page.locator('[data-chapter-list] [data-chapter]').filter({ hasText: words })
const news = (page: Page) => page.locator('[data-news]')

test('each sees what the other marks, and who it was', async ({ visit }) => {
  const { hers, his } = await bothThere(visit)
  await mark(hers, 2, 6, 'transom', 'glue')
  await expect(row(his, 'Fit the bow transom')).toHaveAttribute('data-inking', 'inked')
  await expect(news(his)).toHaveText('Nell Garboard marked step 1, glue')
  await mark(his, 10, 14, 'clamp', 'fasten')
  await expect(row(hers, 'Bend the sheer clamp')).toHaveCount(1)
  await expect(news(hers)).toHaveText('Tam Sheerline marked step 2, fasten')
  // Nobody's own doings are news to them.
  await expect(news(his)).toHaveText('Nell Garboard marked step 1, glue')

  await row(his, 'Fit the bow transom').getByRole('button').first().click()
  await his.getByLabel('Note', { exact: true }).fill('thickened to ketchup')
  await his.getByLabel('Note', { exact: true }).blur()
  // Her own chapter stands open there since she marked it.
  await expect(hers.getByLabel('Note', { exact: true })).toHaveValue('thickened to ketchup')
  await his.getByRole('button', { name: 'Delete', exact: true }).first().click()
  await expect(row(hers, 'Fit the bow transom')).toHaveCount(0)
  await expect(news(hers)).toContainText('deleted step 1, glue')
  expect(await chaptersOf()).toHaveLength(1)
  await his.getByRole('button', { name: 'Undo' }).last().click()
  await expect(row(hers, 'Fit the bow transom')).toHaveCount(1)
  expect((await chaptersOf()).map(chapter => chapter.note)).toContain('thickened to ketchup')
})

for (const choice of ['Keep theirs', 'Put mine over it'] as const) {
  test(`both change the same chapter: the second is shown both and chooses “${choice}”`, async ({ visit }) => {
    const { hers, his } = await bothThere(visit)
    await mark(hers, 2, 6, 'transom', 'glue')
    await expect(row(his, 'Fit the bow transom')).toHaveCount(1)

    const change = await holdChanges(his)
    await row(his, 'Fit the bow transom').getByRole('button').first().click()
    await his.getByLabel('Note', { exact: true }).fill('his: wipe the squeeze-out')
    await his.getByLabel('Note', { exact: true }).blur()
    await expect.poll(change.sent).toBe(true)
    await row(hers, 'Fit the bow transom').getByRole('button').first().click()
    await hers.getByLabel('Note', { exact: true }).fill('hers: 6 clamps')
    await hers.getByLabel('Note', { exact: true }).blur()
    await expect.poll(async () => (await chaptersOf())[0]!.note).toBe('hers: 6 clamps')
    change.letGo()

    const dialog = his.getByRole('dialog', { name: 'Changed by two people' })
    await expect(dialog).toContainText('Nell Garboard changed this chapter in the meantime')
    await expect(dialog).toContainText('hers: 6 clamps')
    await expect(dialog).toContainText('his: wipe the squeeze-out')
    expect((await chaptersOf())[0]!.note).toBe('hers: 6 clamps')
    await expectAccessible(his)
    await dialog.getByRole('button', { name: choice }).click()
    await expect(dialog).toHaveCount(0)

    const kept = choice === 'Keep theirs' ? 'hers: 6 clamps' : 'his: wipe the squeeze-out'
    await expect.poll(async () => (await chaptersOf())[0]!.note).toBe(kept)
    for (const page of [hers, his]) await expect(page.getByLabel('Note', { exact: true })).toHaveValue(kept)
  })
}

test('one deletes what the other changes: nothing is lost unasked', async ({ visit }) => {
  const { hers, his } = await bothThere(visit)
  await mark(hers, 2, 6, 'transom', 'glue')
  await expect(row(his, 'Fit the bow transom')).toHaveCount(1)
  const change = await holdChanges(his)
  await row(his, 'Fit the bow transom').getByRole('button').first().click()
  await his.getByLabel('Note', { exact: true }).fill('worth keeping')
  await his.getByLabel('Note', { exact: true }).blur()
  await expect.poll(change.sent).toBe(true)
  await row(hers, 'Fit the bow transom').getByRole('button').first().click()
  await hers.keyboard.press('Delete')
  await expect.poll(chaptersOf).toEqual([])
  change.letGo()
  const dialog = his.getByRole('dialog', { name: 'Changed by two people' })
  await expect(dialog).toContainText('Deleted')
  await expect(dialog).toContainText('worth keeping')
  await dialog.getByRole('button', { name: 'Put mine over it' }).click()
  await expect.poll(async () => (await chaptersOf()).map(chapter => chapter.note)).toEqual(['worth keeping'])
  await expect(row(hers, 'worth keeping')).toHaveCount(1)
})

test('both mark the same stretch: the second sees what is there and cuts back or leaves it', async ({ visit }) => {
  const { hers, his } = await bothThere(visit)
  const change = await holdChanges(his)
  await mark(his, 4, 10, 'clamp', 'fasten')
  await expect.poll(change.sent).toBe(true)
  await mark(hers, 2, 6, 'transom', 'glue')
  await expect.poll(async () => (await chaptersOf()).length).toBe(1)
  change.letGo()
  const dialog = his.getByRole('dialog', { name: 'Another chapter is there already' })
  await expect(dialog).toContainText('step 1, glue')
  await expect(dialog).toContainText('Nell Garboard')
  await expectAccessible(his)
  await dialog.getByRole('button', { name: 'Cut theirs back' }).click()
  await expect.poll(async () => (await chaptersOf()).map(({ startMs, endMs, operation }) => ({ startMs, endMs, operation })).sort((a, b) => a.startMs - b.startMs))
    .toEqual([{ startMs: 2000, endMs: 4000, operation: 'glue' }, { startMs: 4000, endMs: 10_000, operation: 'fasten' }])
  await expect(hers.locator('[data-chapter-list] [data-chapter]')).toHaveCount(2)

  // What somebody else has changed since cannot be taken back over their head.
  await row(his, 'Bend the sheer clamp').getByRole('button').first().click()
  await his.getByLabel('Note', { exact: true }).fill('four screws')
  await his.getByLabel('Note', { exact: true }).blur()
  await expect(row(hers, 'four screws')).toHaveCount(1)
  await row(hers, 'Bend the sheer clamp').getByRole('button').first().click()
  await hers.getByLabel('Note', { exact: true }).fill('five screws')
  await hers.getByLabel('Note', { exact: true }).blur()
  await expect(his.getByLabel('Note', { exact: true })).toHaveValue('five screws')
  await his.locator('[data-undo]').click()
  await expect(his.getByText('cannot be undone: somebody has changed the chapter since')).toBeVisible()
  expect((await chaptersOf()).map(chapter => chapter.note)).toContain('five screws')
})

test('what cannot be sent is kept, not left behind unasked, and sent by itself when the site is back', async ({ visit }) => {
  const { hers, his } = await bothThere(visit)
  await his.route('**/chapters', route => route.request().method() === 'POST' ? route.abort() : route.fallback())
  await mark(his, 2, 6, 'transom', 'glue')
  const kept = his.getByRole('alert').filter({ hasText: 'Not saved, because the site cannot be reached: Mark step 1, glue' })
  await expect(kept).toBeVisible()
  await expectAccessible(his)

  await his.getByRole('navigation', { name: 'Build' }).getByRole('link', { name: 'Plan' }).click()
  const dialog = his.getByRole('dialog', { name: 'Leave with work that is not saved?' })
  await expect(dialog).toContainText('Mark step 1, glue')
  await dialog.getByRole('button', { name: 'Stay here' }).click()
  await expect(dialog).toHaveCount(0)
  await expect(his).toHaveURL(new RegExp(`/sessions/${session}$`))
  await expect(kept).toBeVisible()

  await his.unroute('**/chapters')
  await his.evaluate(() => window.dispatchEvent(new Event('online')))
  await expect(kept).toHaveCount(0)
  await expect(row(hers, 'Fit the bow transom')).toHaveCount(1)
  expect((await chaptersOf()).map(({ startMs, endMs, operation }) => ({ startMs, endMs, operation }))).toEqual([{ startMs: 2000, endMs: 6000, operation: 'glue' }])
})
