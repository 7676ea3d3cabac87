import { defineConfig } from '@playwright/test'
import base from './playwright.config'

/** The fault tests start a product of their own, to kill its parts: none is started for them beforehand. */
export default defineConfig({
  ...base,
  testIgnore: [],
  testMatch: /faults\/.*\.spec\.ts/,
  globalSetup: undefined,
  // What a failed browser test left to be looked at stays.
  outputDir: 'test-results/faults',
})
