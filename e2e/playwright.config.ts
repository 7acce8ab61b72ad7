import { defineConfig } from '@playwright/test'
import { chromium } from './support/browser.js'
import { product } from './support/accounts.js'

/** A machine that does much else besides: E2E_PATIENCE=4 waits four times as long before it gives up. */
const patience = Number(process.env['E2E_PATIENCE'] ?? 1)

/**
 * Against a product that is already running: `npm test` starts one with its demonstration and says where it is.
 * `door` shows that people can get in at all, `work` is what they do, and `outages` pulls plugs: never with the others.
 */
export default defineConfig({
  testDir: '.',
  outputDir: 'test-results',
  forbidOnly: true,
  fullyParallel: true,
  workers: 2,
  retries: 0,
  // the whole way of a sample, with real signatures, PDFs and mail
  timeout: 420_000 * patience,
  expect: { timeout: 20_000 * patience },
  reporter: [['list']],
  use: {
    ...chromium,
    baseURL: product().url,
    viewport: { width: 1440, height: 1000 },
    locale: 'en-GB',
    // by the server's clock and the laboratory's zone, never by the browser's
    timezoneId: 'Pacific/Auckland',
    // a click in the tenth of a second in which a dialog opens would miss its button
    contextOptions: { reducedMotion: 'reduce' },
    actionTimeout: 20_000 * patience,
    navigationTimeout: 40_000 * patience,
    // recording costs as much as the tests themselves: E2E_TRACE=1 when a failure needs more than its picture
    trace: process.env['E2E_TRACE'] ? 'retain-on-failure' : 'off',
    screenshot: 'only-on-failure',
  },
  projects: [
    { name: 'door', testMatch: /door\.spec\.ts$/ },
    {
      name: 'work',
      testMatch: /\.spec\.ts$/,
      testIgnore: /(door|outages|pictures)\.spec\.ts$/,
      dependencies: ['door'],
    },
    { name: 'outages', testMatch: /outages\.spec\.ts$/, workers: 1 },
  ],
})
