import { existsSync, readFileSync } from 'node:fs'
import { run } from './processes.mjs'
import { inRoot } from './paths.mjs'
import { Refusal, step } from './say.mjs'

const readJson = (...parts) => JSON.parse(readFileSync(inRoot(...parts), 'utf8'))

/** Package.json says `>=20.19 <21`; npm would say the same, but less clearly and later. */
export const demandNode = () => {
  const [major, minor] = process.versions.node.split('.').map(Number)
  if (major === 20 && minor >= 19) return
  throw new Refusal(
    `This needs Node 20 (20.19 or newer); here runs ${process.version}.\n` +
      'Install Node 20, for example from nodejs.org or with your version manager (.nvmrc is there).',
  )
}

/**
 * The packages that the lock file wants and `node_modules` lacks or has in another version. npm notes what it
 * installed in `node_modules/.package-lock.json`. Packages for other systems are optional and may be absent.
 */
export const findStale = ({ wanted, installed, isPresent }) =>
  Object.entries(wanted)
    .filter(([place]) => place.includes('node_modules/'))
    .filter(([place, entry]) => {
      const have = installed[place]
      if (!have) return !entry.optional
      return have.version !== entry.version || !isPresent(place)
    })
    .map(([place]) => place)

const stalePackages = () => {
  if (!existsSync(inRoot('node_modules', '.package-lock.json'))) return ['everything']
  return findStale({
    wanted: readJson('package-lock.json').packages,
    installed: readJson('node_modules', '.package-lock.json').packages,
    isPresent: (place) => existsSync(inRoot(place)),
  })
}

/** Installs the npm packages of the lock file unless they are there. */
export const ensurePackages = async () => {
  const stale = stalePackages()
  if (stale.length === 0) return
  const why = existsSync(inRoot('node_modules')) ? ` (${stale.length} missing or of another version)` : ''
  await step(`Installing npm packages${why}`, async () => {
    const answer = await run('npm', ['ci', '--include=dev', '--no-audit', '--no-fund'], { cwd: inRoot() })
    if (answer.code !== 0) throw new Refusal(`npm ci failed:\n\n${answer.output.slice(-4000)}`)
  })
}
