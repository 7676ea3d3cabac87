import AxeBuilder from '@axe-core/playwright'
import { test as base, expect, type Page } from '@playwright/test'

/** Console lines that are not defects: what the browser says about failures that a test causes on purpose. */
const EXPECTED = [/Failed to load resource: .*(40\d|422|429|50\d|net::ERR)/]

interface Extras {
  /** The product's address. */
  site: string
}

/**
 * The test all browser tests use: it fails on hydration mismatches, Vue warnings, page errors, policy violations,
 * and on any request that leaves this machine.
 */
export const test = base.extend<Extras & { watch: void }>({
  // eslint-disable-next-line no-empty-pattern
  site: async ({}, use) => use(process.env.RIBBAND_TEST_URL!),
  baseURL: async ({ site }, use) => use(site),
  watch: [async ({ context }, use) => {
    const faults: string[] = []
    context.on('page', (page) => {
      page.on('pageerror', error => faults.push(`page error on ${page.url()}: ${error.message}`))
      page.on('console', (message) => {
        const text = message.text()
        if (!['error', 'warning'].includes(message.type()) || EXPECTED.some(pattern => pattern.test(text))) return
        faults.push(`console ${message.type()} on ${page.url()}: ${text}`)
      })
    })
    await context.route(url => !['localhost', '127.0.0.1'].includes(url.hostname), (route) => {
      faults.push(`a request left this machine: ${route.request().url()}`)
      return route.abort()
    })
    await use()
    expect(faults).toEqual([])
  }, { auto: true }],
})

export { expect }

/** No WCAG 2.2 A or AA rule that axe knows is broken. */
export async function expectAccessible(page: Page): Promise<void> {
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).analyze()
  expect(violations.map(({ id, nodes }) => `${id}: ${nodes.map(node => node.target.join(' ')).slice(0, 5).join(' | ')}`)).toEqual([])
}

/** Signs in through the API, as the page does, so that tests of other things start at once. */
export async function signIn(page: Page, email: string, password: string): Promise<void> {
  const response = await page.request.post('/api/auth/sign-in', { data: { email, password }, headers: { origin: new URL(process.env.RIBBAND_TEST_URL!).origin } })
  expect(response.ok()).toBe(true)
}
