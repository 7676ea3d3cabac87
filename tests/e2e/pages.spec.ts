import type { Page } from '@playwright/test'
import type { SessionDetail } from '#shared/types/session'
import { demoBuild } from '../../workers/demo/index'
import { expect, expectAccessible, hydrated, test } from '../support/browser'
import { existingPerson, newBuild, newPerson, newSession, type Person } from '../support/people'

/** Every page of the site, on the demo build, as each kind of reader, wide and narrow, bright and dim. */
const QUESTION = 'how was the transom glued'
type Reader = 'guest' | 'follower' | 'crew' | 'builder'
let people: Record<Exclude<Reader, 'guest'>, Person>
/** Where the demo's things are. */
let at: { build: string, address: string, session: string, clip: string, shown: number, notShown: number, moment: string }

test.beforeAll(async () => {
  const [builder, crew, follower] = await Promise.all([demoBuild.builder, demoBuild.helper, demoBuild.follower].map(existingPerson))
  people = { builder: builder!, crew: crew!, follower: follower! }
  const read = async <T>(path: string) => await (await builder!.api.get(path)).json() as T
  const { builds } = await read<{ builds: { id: string, address: string, name: string }[] }>('/api/builds')
  const build = builds.find(one => one.name === demoBuild.name)!
  const { sessions } = await read<{ sessions: { id: string }[] }>(`/api/builds/${build.id}/sessions`)
  const detail = await read<SessionDetail>(`/api/sessions/${sessions.at(-1)!.id}`)
  const { stages } = await read<{ stages: { steps: { number: number, chapters: number }[] }[] }>(`/api/watch/${build.address}`)
  const steps = stages.flatMap(stage => stage.steps)
  const shown = steps.find(step => step.chapters > 0)!.number
  const { clips, chapters } = await read<{ clips: { id: string }[], chapters: { startMs: number }[] }>(`/api/watch/${build.address}/steps/${shown}`)
  at = { build: build.id, address: build.address, session: detail.id, clip: clips[0]!.id, shown, notShown: steps.find(step => step.chapters === 0)!.number, moment: `/watch/${build.address}/moments/${clips[0]!.id}?at=${chapters[0]!.startMs / 1000}` }
})
test.afterAll(() => Promise.all(Object.values(people).map(person => person.api.dispose())))

const q = encodeURIComponent(QUESTION)
type Visit = [name: string, path: () => string, more?: { lands?: RegExp, waitFor?: string, status?: number }]
const PUBLIC: Visit[] = [
  ['start', () => '/'],
  ['builds to watch', () => '/watch'],
  ['a public build', () => `/watch/${at.address}`],
  ['a step that is shown', () => `/watch/${at.address}/steps/${at.shown}`],
  ['a step that is not shown', () => `/watch/${at.address}/steps/${at.notShown}`],
  ['a moment', () => at.moment],
  ['asking a build', () => `/watch/${at.address}/search`],
  ['answers of a build', () => `/watch/${at.address}/search?q=${q}`, { waitFor: '[data-moment]' }],
  ['asking every build', () => '/search'],
  ['answers of every build', () => `/search?q=${q}`, { waitFor: '[data-moment]' }],
  ['no answer', () => '/search?q=zzyzzyva'],
]
const OWN: Visit[] = [
  ['own builds', () => '/builds'],
  ['bench', () => `/builds/${at.build}`],
  ['plan', () => `/builds/${at.build}/plan`],
  ['parts', () => `/builds/${at.build}/parts`],
  ['sessions', () => `/builds/${at.build}/sessions`],
  ['a new session', () => `/builds/${at.build}/sessions/new`],
  ['a session', () => `/builds/${at.build}/sessions/${at.session}`, { waitFor: '[data-row]' }],
  ['searching the build', () => `/builds/${at.build}/search?q=${q}`, { waitFor: '[data-moment]' }],
  ['settings', () => `/builds/${at.build}/settings`],
  ['plan import', () => `/builds/${at.build}/plan/import`],
]
const VISITS: Record<Reader, Visit[]> = {
  guest: [...PUBLIC, ['sign in', () => '/sign-in'], ['sign up', () => '/sign-up'], ['what needs an account', () => `/builds/${at.build}/sessions`, { lands: /\/sign-in\?to=/ }]],
  follower: [['own builds', () => '/builds'], ['plan', () => `/builds/${at.build}/plan`], ['bench', () => `/builds/${at.build}`], ['sessions', () => `/builds/${at.build}/sessions`, { status: 403 }], ['a public build', () => `/watch/${at.address}`], ['a moment', () => at.moment]],
  crew: OWN,
  builder: [...OWN, ['a new build', () => '/builds/new'], ['start', () => '/'], ['answers of every build', () => `/search?q=${q}`, { waitFor: '[data-moment]' }]],
}
const SIZES = [{ name: 'wide and bright', width: 1440, light: 'bright' }, { name: 'narrow and dim', width: 390, light: 'dim' }] as const

/** One heading, a title, nothing wider than the page, and nothing that axe finds. Each page is seen in both lights. */
async function expectSound(page: Page, light: 'bright' | 'dim'): Promise<void> {
  await expect(page.getByRole('heading', { level: 1 })).toHaveCount(1)
  expect(await page.title()).toMatch(/\S.*Ribband|Ribband.*\S/)
  expect(await page.evaluate(() => document.documentElement.dataset.light)).toBe(light)
  expect(await page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)).toBeLessThanOrEqual(0)
  await expectAccessible(page)
}

for (const size of SIZES) {
  for (const reader of Object.keys(VISITS) as Reader[]) {
    // What crew see is what the builder sees, less a few buttons: once is enough.
    if (reader === 'crew' && size.width > 1000) continue
    test.describe(`${reader}, ${size.name}`, () => {
      test.use({ viewport: { width: size.width, height: 900 } })
      for (const [name, path, more] of VISITS[reader]) {
        test(name, async ({ page, context, site }) => {
          if (reader !== 'guest') await context.addCookies(people[reader].cookies)
          await context.addCookies([{ name: 'light', value: size.light, url: site }])
          const response = await page.goto(path())
          expect(response!.status()).toBe(more?.status ?? 200)
          await hydrated(page)
          if (more?.lands) expect(page.url()).toMatch(more.lands)
          if (more?.waitFor) await expect(page.locator(more.waitFor).first()).toBeVisible()
          await expectSound(page, size.light)
        })
      }
    })
  }
}

test('a builder sees the picture and all the planks at once, on low windows too', async ({ page, context }) => {
  await context.addCookies(people.builder.cookies)
  for (const size of [{ width: 1440, height: 900 }, { width: 1280, height: 720 }]) {
    await page.setViewportSize(size)
    await page.goto(`/builds/${at.build}/sessions/${at.session}`)
    await hydrated(page)
    await expect(page.locator('video[data-shown=true]')).toBeInViewport({ ratio: 1 })
    await expect(page.locator('[role=option]').first()).toBeInViewport({ ratio: 0.99 })
    expect(await page.locator('video[data-shown=true]').evaluate(video => video.getBoundingClientRect().height)).toBeGreaterThan(150)
  }
})

test('what is not there says so, and so does what one may not see', async ({ page, visit }) => {
  const stranger = await newPerson('Una Passerby')
  const theirs = await visit(stranger)
  const own = await newBuild(people.crew)
  for (const [on, path] of [[page, '/nothing/here'], [page, '/watch/nosuchbuild'], [page, `/watch/${at.address}/steps/9999`], [page, `/watch/${at.address}/moments/00000000-0000-4000-8000-000000000000`], [theirs, `/watch/${own.address}`]] as const) {
    const response = await on.goto(path)
    expect(response!.status(), path).toBe(404)
    await expect(on.getByRole('heading', { level: 1 })).toHaveText('Not on this sheet')
    await hydrated(on)
    // Who has signed in already is not sent to do so.
    await expect(on.getByRole('main').getByRole('button', { name: 'Sign in' })).toHaveCount(on === theirs ? 0 : 1)
    await expect(on.getByRole('main').getByRole('button', { name: 'My builds' })).toHaveCount(on === theirs ? 1 : 0)
    await expectAccessible(on)
  }
  await page.getByRole('button', { name: 'To the start page' }).click()
  await expect(page.getByRole('heading', { level: 1 })).toContainText('Every hour in the shop')
  await stranger.api.dispose()
})

test('a build with nothing in it says what to do first', async ({ page, context }) => {
  const beginner = await newPerson('Bo Firstplank')
  await context.addCookies(beginner.cookies)
  await page.goto('/builds')
  await expect(page.getByText('Start with the boat')).toBeVisible()
  const build = await newBuild(beginner, { visibility: 'public' })
  const session = await newSession(build)
  for (const [path, words] of [
    [`/builds/${build.id}`, 'Write down the plan'], [`/builds/${build.id}/plan`, 'There is no plan yet'], [`/builds/${build.id}/parts`, 'There are no parts yet'],
    [`/builds/${build.id}/sessions/${session}`, 'Add the day’s footage'], [`/builds/${build.id}/search`, 'Ask as you would ask in the shop'],
    [`/builds/${build.id}/search?q=transom`, 'Nothing was found'], [`/watch/${build.address}`, 'The plan is not written yet'],
  ] as const) {
    await page.goto(path)
    await hydrated(page)
    await expect(page.getByText(words).first(), path).toBeVisible()
    await expectAccessible(page)
  }
  await beginner.api.delete(`/api/sessions/${session}`)
  await page.goto(`/builds/${build.id}/sessions`)
  await expect(page.getByText('No sessions yet')).toBeVisible()
  await beginner.api.dispose()
})

/** What Tab reaches, by role-like name, and whether each shows that it has the focus. The player's own controls are the browser's. */
async function tabThrough(page: Page, presses: number): Promise<{ name: string, shows: boolean }[]> {
  const reached: { name: string, shows: boolean }[] = []
  for (let n = 0; n < presses; n++) {
    await page.keyboard.press('Tab')
    reached.push(await page.evaluate(() => {
      const element = document.activeElement as HTMLElement
      const style = getComputedStyle(element)
      const { width, height } = element.getBoundingClientRect()
      const outlined = style.outlineStyle !== 'none' && Number.parseFloat(style.outlineWidth) > 0
      const name = element.getAttribute('aria-label') ?? (element as HTMLInputElement).labels?.[0]?.textContent ?? element.textContent ?? ''
      return { name: name.replace(/\s+/g, ' ').trim(), shows: element === document.body || element.tagName === 'VIDEO' || (width > 1 && height > 1 && (outlined || style.boxShadow !== 'none')) }
    }))
  }
  return reached
}

test('Tab reaches the main things of a page, and the focus can be seen', async ({ page, context }) => {
  await context.addCookies(people.builder.cookies)
  const want: [string, number, RegExp[]][] = [
    ['/', 12, [/^Skip to the sheet$/, /^Ribband$/, /^My builds$/, /^Search$/, /^Dim light$/, /^Go to my builds$/]],
    [`/watch/${at.address}`, 16, [/^Search$/]],
    [at.moment, 24, [/^Previous chapter$/, /^Speed/, /^Copy link to this moment$/]],
    [`/builds/${at.build}/sessions/${at.session}`, 60, [/^Sessions$/, /^Play$/, /^In /, /^Keys of this page$/, /^Find in the transcript$/, /^Go to /]],
    [`/builds/${at.build}/plan`, 16, [/^Bench$/, /^Settings$/]],
  ]
  for (const [path, presses, names] of want) {
    await page.goto(path)
    await hydrated(page)
    const reached = await tabThrough(page, presses)
    for (const name of names) expect(reached.map(one => one.name), path).toContainEqual(expect.stringMatching(name))
    expect(reached.filter(one => !one.shows).map(one => one.name), `focus that cannot be seen on ${path}`).toEqual([])
  }
})

interface VideoData { '@context': string, '@type': string, 'name': string, 'thumbnailUrl': string[], 'uploadDate': string, 'duration': string, 'contentUrl': string, 'hasPart': Record<string, unknown>[] }

/** https://developers.google.com/search/docs/appearance/structured-data/video lists what schema.org's VideoObject and Clip must have to be shown. */
test('structured data of public pages is whole, and its addresses lead somewhere', async ({ request, site }) => {
  for (const path of [`/watch/${at.address}/steps/${at.shown}`, at.moment]) {
    const html = await (await request.get(path)).text()
    const blocks = [...html.matchAll(/<script[^>]*type="application\/ld\+json"[^>]*>([^]*?)<\/script>/g)].map(match => JSON.parse(match[1]!) as VideoData[])
    expect(blocks, path).toHaveLength(1)
    const videos = blocks[0]!
    expect(videos.length).toBeGreaterThan(0)
    for (const video of videos) {
      expect(video).toMatchObject({ '@context': 'https://schema.org', '@type': 'VideoObject' })
      expect(video.name).toMatch(/\S/)
      expect(video.uploadDate).toMatch(/^\d{4}-\d\d-\d\dT[\d:.]+(Z|[+-]\d\d:\d\d)$/)
      expect(video.duration).toMatch(/^PT(?=\d)(\d+H)?(\d+M)?(\d+(\.\d+)?S)?$/)
      for (const address of [...video.thumbnailUrl, video.contentUrl]) {
        expect(address.startsWith(site)).toBe(true)
        const answer = await request.get(address, { headers: { range: 'bytes=0-99' } })
        expect([200, 206], address).toContain(answer.status())
      }
      expect(video.hasPart.length).toBeGreaterThan(0)
      for (const part of video.hasPart) {
        expect(part).toMatchObject({ '@type': 'Clip', 'name': expect.stringMatching(/\S/), 'startOffset': expect.any(Number), 'endOffset': expect.any(Number), 'url': expect.stringContaining(`${site}/watch/${at.address}/moments/`) })
        expect(part.endOffset as number).toBeGreaterThan(part.startOffset as number)
      }
    }
    const link = String(videos[0]!.hasPart[0]!.url)
    expect((await request.get(link)).status()).toBe(200)
    expect(html).toMatch(/<meta[^>]+property="og:image"[^>]+content="http/)
  }
})

test('the public pages can be read, asked and followed without script', async ({ visit }) => {
  const page = await visit(null, { javaScriptEnabled: false })
  await page.goto('/watch')
  await page.getByRole('link', { name: new RegExp(demoBuild.name) }).first().click()
  await expect(page.getByRole('heading', { level: 1 })).toHaveText(demoBuild.name)
  await page.locator(`a[href="/watch/${at.address}/steps/${at.shown}"]`).first().click()
  await expect(page.locator('video')).toHaveAttribute('src', /\/media\/clips\/.+\/video/)
  await expect(page.locator('video track').first()).toHaveAttribute('src', /\.vtt$/)
  await page.locator('main a[href*="/moments/"]').first().click()
  await expect(page).toHaveURL(/\/moments\/.+\?at=/)
  await expect(page.getByText('What is said')).toBeVisible()
  await expect(page.locator('video')).toHaveAttribute('src', /#t=|\/video$/)

  await page.goto(`/watch/${at.address}`)
  await page.getByRole('searchbox', { name: 'Search' }).fill(QUESTION)
  await page.keyboard.press('Enter')
  await expect(page).toHaveURL(/\/search\?q=/)
  await expect(page.locator('[data-moment]').first()).toBeVisible()
  await page.locator('[data-moment]').first().click()
  await expect(page).toHaveURL(/\/moments\//)
})
