import { defineConfig } from '@playwright/test'
import { CHROMIUM } from './tests/support/chromium'

/**
 * Debian's Chromium, never a downloaded one. The tests share one running product (tests/support/startProduct.ts starts
 * it before the first test).
 */
export default defineConfig({
  testDir: 'tests/e2e',
  testIgnore: /faults\//,
  outputDir: 'test-results',
  fullyParallel: false,
  workers: 1,
  timeout: 90_000,
  expect: { timeout: 15_000 },
  globalSetup: './tests/support/startProduct.ts',
  use: {
    viewport: { width: 1440, height: 900 },
    // Recording every test costs a tenth of the whole: what a failed test showed is in test-results without it.
    trace: process.env.RIBBAND_TRACE ? 'retain-on-failure' : 'off',
    screenshot: 'only-on-failure',
    launchOptions: CHROMIUM,
  },
})
