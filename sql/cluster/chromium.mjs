import { existsSync } from 'node:fs'
import { aptInstall } from './debian.mjs'
import { explain, Refusal } from './say.mjs'

const shell = '/usr/bin/chromium-headless-shell'

const find = () =>
  [process.env.CHROMIUM_PATH, '/usr/bin/chromium', '/usr/bin/chromium-browser'].find(
    (path) => path && existsSync(path),
  )

/**
 * The same engine without windows, for tests: half the time, but it shows no PDF inside a page. Where Debian has no such package, or
 * it may not be installed, Chromium itself.
 */
export const ensureTestBrowser = async () => {
  if (process.env.CHROMIUM_PATH) return ensureChromium()
  if (!existsSync(shell)) {
    await aptInstall(['chromium-headless-shell'], 'The browser for tests is not installed.').catch(explain)
  }
  return existsSync(shell) ? shell : ensureChromium()
}

/** Debian's Chromium, installed when missing. */
export const ensureChromium = async () => {
  if (!find()) await aptInstall(['chromium'], 'Chromium is not installed.')
  const path = find()
  if (!path) throw new Refusal('No Chromium, even after installing it. Set CHROMIUM_PATH to where it is.')
  return path
}
