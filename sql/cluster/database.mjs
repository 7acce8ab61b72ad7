import { chmodSync, existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { inRoot } from './paths.mjs'
import { run } from './processes.mjs'
import { quiet, Refusal, say, step } from './say.mjs'

const databaseName = 'weirlight'

const nodeRun = async ({ what, program, env, onLine }) => {
  const args = ['--enable-source-maps', inRoot('api', 'dist', program)]
  const answer = await run(process.execPath, args, { cwd: inRoot(), env: { ...process.env, ...env }, onLine })
  if (answer.code !== 0) throw new Refusal(`${what} failed:\n\n${answer.output.slice(-6000)}`)
  return answer
}

/** Brings the schema up to date, as the role that owns it, and lets the application's role in. */
export const migrate = ({ ownerUrl, appUrl }) =>
  step('Running the migrations', () =>
    nodeRun({
      what: 'Running the migrations',
      program: 'migrate.js',
      env: { OWNER_DATABASE_URL: ownerUrl, DATABASE_URL: appUrl },
    }),
  )

/** How far the demo laboratory has got: `loading` found at a start means that an earlier load broke off. */
const demoMark = (home) => {
  const file = join(home, 'demo')
  return {
    read: () => (existsSync(file) ? readFileSync(file, 'utf8') : undefined),
    write: (state) => writeFileSync(file, state),
    clear: () => rmSync(file, { force: true }),
  }
}

/** A restored database holds its own people and past: no demo goes on top of it. */
export const markRestored = (home) => demoMark(home).write('restored')

/** The product's database on a cluster of ours: made when missing, and migrated. */
export const openDatabase = async ({ cluster, home, name = databaseName }) => {
  // Nobody can have worked in a half-loaded demo: the application starts after it.
  if (demoMark(home).read() === 'loading') await cluster.dropDatabase(name)
  if (!(await cluster.hasDatabase(name))) {
    await cluster.createDatabase(name)
    demoMark(home).clear()
  }
  const ownerUrl = cluster.url('owner', name)
  const appUrl = cluster.url('app', name)
  await migrate({ ownerUrl, appUrl })
  return { name, ownerUrl, appUrl }
}

/** Fills a new database with the demo laboratory. `env` is the application's: the demo goes through its services. */
export const ensureDemo = async ({ cluster, home, database, accountsFile, env }) => {
  const mark = demoMark(home)
  if (mark.read() !== undefined) return
  mark.write('loading')
  rmSync(accountsFile, { force: true })
  await step('Loading the demo laboratory (the first time only; some minutes)', () =>
    nodeRun({
      what: 'Loading the demo laboratory',
      program: 'load-demo.js',
      env: {
        ...env,
        NODE_ENV: 'production',
        OWNER_DATABASE_URL: database.ownerUrl,
        DEMO_ACCOUNTS_FILE: accountsFile,
      },
      onLine: (line) => say(quiet(`  ${line}`)),
    }),
  )
  if (!existsSync(accountsFile)) throw new Refusal(`Loading the demo laboratory wrote no ${accountsFile}.`)
  await cluster.sql('analyze', { database: database.name })
  mark.write('loaded')
}

/** Adds what only the launcher knows to the accounts that the demo wrote, for people's tools. */
export const completeAccounts = (accountsFile, { url, mailUrl, databaseUrl }) => {
  if (!existsSync(accountsFile)) return []
  const written = JSON.parse(readFileSync(accountsFile, 'utf8'))
  const accounts = Array.isArray(written) ? written : written.accounts
  const whole = { url, mailUrl, databaseUrl, accounts }
  writeFileSync(accountsFile, `${JSON.stringify(whole, null, 2)}\n`)
  // It names a database and how to sign in to it.
  chmodSync(accountsFile, 0o600)
  return accounts
}
