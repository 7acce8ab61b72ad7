import { chmodSync, existsSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { inRoot } from './paths.mjs'
import { run } from './processes.mjs'
import { Refusal, step } from './say.mjs'

const databaseName = 'weirlight'

const nodeRun = async (what, args, env) => {
  const answer = await run(process.execPath, args, { cwd: inRoot(), env: { ...process.env, ...env } })
  if (answer.code !== 0) throw new Refusal(`${what} failed:\n\n${answer.output.slice(-6000)}`)
  return answer
}

/** Brings the schema up to date, as the role that owns it, and lets the application's role in. */
export const migrate = ({ ownerUrl, appUrl }) =>
  step('Running the migrations', () =>
    nodeRun('Running the migrations', ['--enable-source-maps', inRoot('api', 'dist', 'migrate.js')], {
      OWNER_DATABASE_URL: ownerUrl,
      DATABASE_URL: appUrl,
    }),
  )

/** How far the demo laboratory has got: `loading` found at a start means that an earlier load broke off. */
const demoMark = (home) => {
  const file = join(home, 'demo')
  return {
    read: () => (existsSync(file) ? readFileSync(file, 'utf8') : undefined),
    write: (state) => writeFileSync(file, state),
  }
}

/** A restored database holds its own people and past: no demo goes on top of it. */
export const markRestored = (home) => demoMark(home).write('restored')

const loadDemo = async ({ ownerUrl, appUrl, accountsFile }) => {
  rmSync(accountsFile, { force: true })
  await nodeRun(
    'Loading the demo laboratory',
    ['--enable-source-maps', inRoot('api', 'dist', 'load-demo.js')],
    {
      NODE_ENV: 'production',
      OWNER_DATABASE_URL: ownerUrl,
      DATABASE_URL: appUrl,
      DEMO_ACCOUNTS_FILE: accountsFile,
    },
  )
  if (!existsSync(accountsFile)) throw new Refusal(`Loading the demo laboratory wrote no ${accountsFile}.`)
}

/**
 * The product's database on a cluster of ours: made when missing, migrated, and filled with the demo
 * laboratory the first time.
 */
export const openDatabase = async ({ cluster, home, hasDemo, accountsFile, name = databaseName }) => {
  const mark = demoMark(home)
  // Nobody can have worked in a half-loaded demo: the application starts after it.
  if (mark.read() === 'loading') await cluster.dropDatabase(name)
  const isNew = !(await cluster.hasDatabase(name))
  if (isNew) await cluster.createDatabase(name)

  const ownerUrl = cluster.url('owner', name)
  const appUrl = cluster.url('app', name)
  await migrate({ ownerUrl, appUrl })

  const isDemoWanted = hasDemo && (isNew || mark.read() === undefined)
  if (isDemoWanted) {
    mark.write('loading')
    await step('Loading the demo laboratory (the first time only; a minute or so)', () =>
      loadDemo({ ownerUrl, appUrl, accountsFile }),
    )
    await cluster.sql('analyze', { database: name })
    mark.write('loaded')
  }
  return { name, ownerUrl, appUrl }
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
