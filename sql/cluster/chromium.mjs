import { existsSync } from 'node:fs'
import { aptInstall } from './debian.mjs'
import { Refusal } from './say.mjs'

const find = () =>
  [process.env.CHROMIUM_PATH, '/usr/bin/chromium', '/usr/bin/chromium-browser'].find(
    (path) => path && existsSync(path),
  )

/** Debian's Chromium, installed when missing. */
export const ensureChromium = async () => {
  if (!find()) await aptInstall(['chromium'], 'Chromium is not installed.')
  const path = find()
  if (!path) throw new Refusal('No Chromium, even after installing it. Set CHROMIUM_PATH to where it is.')
  return path
}
