import { defineConfig } from '@playwright/test'
import { product } from './support/accounts.js'
import { chromium } from './support/browser.js'

/** `npm run pictures -- --config=tour.config.ts`: takes the pictures of the README's tour anew, into `tour/`. */
export default defineConfig({
  testDir: 'tour',
  // not a spec: the browser tests do not take it along
  testMatch: /tour\.shots\.ts$/,
  outputDir: 'test-results/tour',
  workers: 1,
  timeout: 600_000,
  expect: { timeout: 60_000 },
  reporter: [['list']],
  use: {
    ...chromium,
    baseURL: product().url,
    locale: 'en-GB',
    colorScheme: 'light',
    actionTimeout: 60_000,
    navigationTimeout: 60_000,
  },
})
