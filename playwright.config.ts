import { defineConfig } from '@playwright/test'
import { CHROMIUM } from './tests/support/chromium'

/**
 * Debian's Chromium, never a downloaded one. One worker: the machine that CI has is small, and the tests share one
 * running product (tests/support/product.ts starts it before the first test).
 */
export default defineConfig({
  testDir: 'tests/e2e',
  outputDir: 'test-results',
  fullyParallel: false,
  workers: 1,
  timeout: 90_000,
  expect: { timeout: 15_000 },
  globalSetup: './tests/support/startProduct.ts',
  use: {
    viewport: { width: 1440, height: 900 },
    trace: 'retain-on-failure',
    launchOptions: CHROMIUM,
  },
  projects: [
    { name: 'browser', testIgnore: /faults\//, testMatch: /.*\.spec\.ts/ },
    { name: 'faults', testMatch: /faults\/.*\.spec\.ts/ },
  ],
})
