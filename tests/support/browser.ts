import AxeBuilder from '@axe-core/playwright'
import { type Browser, type BrowserContext, type BrowserContextOptions, expect, type Page, test as base } from '@playwright/test'

/** Console lines that are not defects: what the browser says about failures that a test causes on purpose. */
const EXPECTED = [/Failed to load resource: .*(40\d|422|429|50\d|net::ERR)/]

/** Whoever has signed in: `Person` of tests/support/people.ts. */
interface SignedIn { cookies: Parameters<BrowserContext['addCookies']>[0] }

interface Extras {
  /** The product's address. */
  site: string
  /** What went wrong in any page of the test; the test fails when there is something. */
  faults: string[]
  /** A page in a browser of its own, as a second person has. */
  visit: (as: SignedIn | null, options?: BrowserContextOptions) => Promise<Page>
}

async function watchContext(context: BrowserContext, faults: string[]): Promise<void> {
  context.on('page', (page) => {
    page.on('pageerror', error => faults.push(`page error on ${page.url()}: ${error.message}`))
    page.on('console', (message) => {
      const text = message.text()
      if (!['error', 'warning'].includes(message.type()) || EXPECTED.some(pattern => pattern.test(text))) return
      faults.push(`console ${message.type()} on ${page.url()}: ${text.slice(0, 300)}${text.length > 300 ? ` … ${text.slice(-120)}` : ''}`)
    })
  })
  await context.route(url => !['localhost', '127.0.0.1'].includes(url.hostname), (route) => {
    faults.push(`a request left this machine: ${route.request().url()}`)
    return route.abort()
  })
}

async function openContext(browser: Browser, as: SignedIn | null, options: BrowserContextOptions): Promise<BrowserContext> {
  const context = await browser.newContext(options)
  if (as) await context.addCookies(as.cookies)
  return context
}

/**
 * The test all browser tests use: it fails on hydration mismatches, Vue warnings, page errors, policy violations,
 * and on any request that leaves this machine.
 */
export const test = base.extend<Extras>({
  // eslint-disable-next-line no-empty-pattern
  site: async ({}, use) => use(process.env.RIBBAND_TEST_URL!),
  baseURL: async ({ site }, use) => use(site),
  // eslint-disable-next-line no-empty-pattern
  faults: [async ({}, use) => {
    const faults: string[] = []
    await use(faults)
    expect(faults).toEqual([])
  }, { auto: true }],
  context: async ({ context, faults }, use) => {
    await watchContext(context, faults)
    await use(context)
  },
  visit: async ({ browser, baseURL, viewport, faults }, use) => {
    const opened: BrowserContext[] = []
    await use(async (as, options = {}) => {
      const context = await openContext(browser, as, { baseURL, viewport, ...options })
      opened.push(context)
      await watchContext(context, faults)
      return context.newPage()
    })
    await Promise.all(opened.map(context => context.close()))
  },
})

export { expect }

/**
 * No WCAG 2.2 A or AA rule that axe knows is broken. "Legacy mode" runs the same rules in the page itself; without it
 * axe opens a second page to put the results of frames together, which takes four times as long, and we have no frames.
 */
export async function expectAccessible(page: Page): Promise<void> {
  expect(await page.locator('iframe, frame').count(), 'a page with frames must be checked without legacy mode').toBe(0)
  const { violations } = await new AxeBuilder({ page }).options({ resultTypes: ['violations'] }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).setLegacyMode().analyze()
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(node => node.target.join(' ')).slice(0, 5).join(' | ')}`)).toEqual([])
}

/** Until the page is drawn by the server and taken over by the browser. */
export async function hydrated(page: Page): Promise<void> {
  await page.waitForFunction(() => (window as unknown as { useNuxtApp?: () => { isHydrating: boolean } }).useNuxtApp?.().isHydrating === false)
}

/** Signs in through the API, as the page does, so that tests of other things start at once. */
export async function signIn(page: Page, email: string, password: string): Promise<void> {
  const response = await page.request.post('/api/auth/sign-in', { data: { email, password }, headers: { origin: new URL(process.env.RIBBAND_TEST_URL!).origin } })
  expect(response.ok()).toBe(true)
}
