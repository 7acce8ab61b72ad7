import type { PlaywrightTestConfig } from '@playwright/test'

/** Debian's Chromium; as root, which has no sandbox to give. */
export const chromium: NonNullable<PlaywrightTestConfig['use']> = {
  browserName: 'chromium',
  headless: true,
  launchOptions: {
    executablePath: process.env['CHROMIUM_PATH'] ?? '/usr/bin/chromium',
    args: [
      '--headless',
      ...(process.getuid?.() === 0 ? ['--no-sandbox'] : []),
      '--disable-gpu',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  },
}
