import { defineConfig } from '@playwright/test'
import { chromium } from './support/browser.js'
import { product } from './support/accounts.js'

/** `npm run pictures`: every screen for each role at three widths, into the git-ignored `pictures/`, to be looked at. */
export default defineConfig({
  testDir: '.',
  outputDir: 'test-results/pictures',
  fullyParallel: true,
  workers: 2,
  timeout: 600_000,
  expect: { timeout: 60_000 },
  reporter: [['list']],
  projects: [
    { name: 'set-up', testMatch: /pictures\.set-up\.ts$/ },
    { name: 'pictures', testMatch: /pictures\.spec\.ts$/, dependencies: ['set-up'] },
  ],
  use: {
    ...chromium,
    baseURL: product().url,
    locale: 'en-GB',
    // a date in the browser's zone instead of the laboratory's shows itself
    timezoneId: 'Pacific/Auckland',
    actionTimeout: 60_000,
    navigationTimeout: 60_000,
  },
})
