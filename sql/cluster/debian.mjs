import { existsSync } from 'node:fs'
import { run } from './processes.mjs'
import { Refusal, say, step } from './say.mjs'

export const isRoot = process.getuid?.() === 0

/** Installs a Debian package, or says exactly what the reader has to install. */
export const aptInstall = async (packages, why) => {
  const command = `apt-get update && apt-get install -y ${packages.join(' ')}`
  if (!existsSync('/usr/bin/apt-get')) {
    throw new Refusal(
      `${why}\nThis is not a Debian system: install ${packages.join(', ')} with its own tools.`,
    )
  }
  if (!isRoot) {
    throw new Refusal(
      `${why}\nThis account may not install it. Please have this run as root:\n\n  ${command}\n`,
    )
  }
  await step(`${why} Installing Debian's ${packages.join(', ')}`, async () => {
    const env = { ...process.env, DEBIAN_FRONTEND: 'noninteractive' }
    // A package list of some other supplier may be out of reach; only the installation itself decides.
    const update = await run('apt-get', ['update', '-q'], { env })
    const install = await run('apt-get', ['install', '-y', '-q', '--no-install-recommends', ...packages], {
      env,
    })
    if (install.code === 0) return
    say(update.code === 0 ? '' : update.output.slice(-2000))
    say(install.output.slice(-4000))
    throw new Refusal(
      `Installing ${packages.join(', ')} failed (above). Please run as root:\n\n  ${command}\n`,
    )
  })
}
