import { createHash } from 'node:crypto'
import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, rmSync, writeFileSync } from 'node:fs'
import { join, relative } from 'node:path'
import { inData, inRoot, root } from './paths.mjs'
import { run } from './processes.mjs'
import { Refusal, step } from './say.mjs'

const skipped = new Set(['node_modules', 'dist', 'coverage', 'test-results', 'pictures'])

const filesBelow = (folder) => {
  if (!existsSync(folder)) return []
  return readdirSync(folder, { withFileTypes: true })
    .filter((entry) => !skipped.has(entry.name) && !/\.(spec|test-support)\.tsx?$/.test(entry.name))
    .flatMap((entry) => {
      const path = join(folder, entry.name)
      return entry.isDirectory() ? filesBelow(path) : [path]
    })
    .sort()
}

const hashOf = (folders) => {
  const hash = createHash('sha256')
  for (const folder of folders) {
    for (const file of filesBelow(inRoot(folder))) {
      hash.update(relative(root, file)).update('\0').update(readFileSync(file)).update('\0')
    }
  }
  for (const file of ['package-lock.json', 'tsconfig.base.json']) hash.update(readFileSync(inRoot(file)))
  return hash.digest('hex')
}

/** What each workspace's build is made from, and a file that shows it was made. */
const builds = [
  { name: 'shared', sources: ['shared'], proof: 'shared/dist/errors.js' },
  { name: 'api', sources: ['api'], proof: 'api/dist/main.js' },
  { name: 'web', sources: ['web', 'shared'], proof: 'web/dist/index.html' },
]

const stampFile = (name) => inData('build', name)

const readStamp = (name) => (existsSync(stampFile(name)) ? readFileSync(stampFile(name), 'utf8') : undefined)

/** Compilers write over what they made before but leave what has no source any more. */
const removeLeftovers = (folder, begunMs) => {
  if (!existsSync(folder)) return
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    const path = join(folder, entry.name)
    if (entry.isDirectory()) removeLeftovers(path, begunMs)
    else if (/\.(js|js\.map|d\.ts)$/.test(entry.name) && statSync(path).mtimeMs < begunMs - 2000) rmSync(path)
  }
}

export const buildOne = async ({ name, sources, proof }) => {
  const hash = hashOf(sources)
  const begunMs = Date.now()
  const answer = await run('npm', ['run', 'build', '-w', name], { cwd: root })
  if (answer.code !== 0) throw new Refusal(`Building ${name} failed:\n\n${answer.output.slice(-6000)}`)
  removeLeftovers(inRoot(name, 'dist'), begunMs)
  if (!existsSync(inRoot(proof))) throw new Refusal(`Building ${name} made no ${proof}:\n\n${answer.output}`)
  mkdirSync(inData('build'), { recursive: true })
  writeFileSync(stampFile(name), hash)
}

/** The builds that are missing or older than their sources. */
export const staleBuilds = () =>
  builds.filter(
    ({ name, sources, proof }) => !existsSync(inRoot(proof)) || readStamp(name) !== hashOf(sources),
  )

export const ensureBuilt = async () => {
  for (const build of staleBuilds()) await step(`Building ${build.name}`, () => buildOne(build))
}
