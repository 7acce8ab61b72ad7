import { existsSync, mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuilt } from './build.mjs'
import { completeAccounts, ensureDemo, openDatabase } from './database.mjs'
import { demandNode, ensurePackages } from './packages.mjs'
import { throwAwayFolder } from './places.mjs'
import { freePort } from './ports.mjs'
import { startCluster } from './postgres.mjs'
import { apiService, keptSecret, mailService } from './services.mjs'
import { step } from './say.mjs'
import { startWatchdog } from './watchdog.mjs'

/** What every launcher needs before it starts anything. */
export const prepare = async () => {
  demandNode()
  await ensurePackages()
  await ensureBuilt()
}

/**
 * Things to undo, undone once and in the reverse order. A second signal while undoing changes nothing; each
 * step has its own limit of time.
 */
export const undoStack = () => {
  const steps = []
  let undoing
  const undo = async () => {
    const troubles = []
    while (steps.length > 0) {
      try {
        await steps.pop()()
      } catch (error) {
        troubles.push(error)
      }
    }
    if (troubles.length > 0) throw troubles[0]
  }
  return {
    push: (work) => steps.push(work),
    run: () => (undoing ??= undo()),
  }
}

/** A throw-away home and a cluster in it, both gone when `undo` has run, even after kill -9. */
export const startThrowAwayCluster = async ({ undo, watchdog, onDeath }) => {
  const home = await throwAwayFolder()
  watchdog.removeLater(home)
  undo.push(() => rmSync(home, { recursive: true, force: true, maxRetries: 5 }))
  const cluster = await step('Starting a throw-away PostgreSQL', () =>
    startCluster({ home, isThrowAway: true, watchdog, onDeath }),
  )
  undo.push(cluster.stop)
  return { home, cluster }
}

/** Waits for all before it fails for one: nothing must still be starting when things are undone. */
const together = async (promises) => {
  const outcomes = await Promise.allSettled(promises)
  const failed = outcomes.find(({ status }) => status === 'rejected')
  if (failed) throw failed.reason
  return outcomes.map(({ value }) => value)
}

/**
 * The whole product on a running cluster: database, mailbox, application.
 * `folder` takes logs, mail and ports; `home` is the cluster's.
 */
export const startProductOn = async (options) => {
  const { cluster, home, folder, accountsFile, undo, watchdog, onDeath } = options
  const { hasDemo = true, ports = {}, databaseName, smtpUrl, apiEnv = {} } = options
  mkdirSync(folder, { recursive: true })
  const startMail = async () => {
    const wished = { smtp: ports.smtp, web: ports.mailbox }
    const mail = await step('Starting the mailbox', () => mailService({ folder, wished, watchdog, onDeath }))
    undo.push(mail.stop)
    return mail
  }
  const [database, mail] = await together([
    openDatabase({ cluster, home, name: databaseName }),
    smtpUrl ? undefined : startMail(),
  ])

  const port = await freePort(...(ports.web ?? []))
  const url = `http://127.0.0.1:${port}`
  const env = {
    DATABASE_URL: database.appUrl,
    OWNER_DATABASE_URL: undefined,
    SMTP_URL: smtpUrl ?? mail.smtpUrl,
    PUBLIC_URL: url,
    SESSION_SECRET: keptSecret(home, 'session-secret'),
    ...apiEnv,
  }
  if (hasDemo) await ensureDemo({ cluster, home, database, accountsFile, env })
  const api = await step('Starting the application', () =>
    apiService({ folder, port, env, watchdog, onDeath }),
  )
  undo.push(api.stop)

  const facts = { url, mailUrl: mail?.url, databaseUrl: database.appUrl }
  const accounts = completeAccounts(accountsFile, facts)
  return {
    ...facts,
    ownerUrl: database.ownerUrl,
    databaseName: database.name,
    accountsFile: existsSync(accountsFile) ? accountsFile : undefined,
    accounts,
    port,
    api,
    mail,
  }
}

/**
 * The product with the demo laboratory on a throw-away cluster, for tests, benches and pictures.
 * `stop()` ends and removes all of it.
 */
export const startProduct = async ({ hasDemo = true, onDeath, apiEnv, undo = undoStack() } = {}) => {
  const watchdog = startWatchdog()
  try {
    const { home, cluster } = await startThrowAwayCluster({ undo, watchdog, onDeath })
    const folder = join(home, 'product')
    const accountsFile = join(home, 'demo-accounts.json')
    const options = { cluster, home, folder, accountsFile, hasDemo, undo, watchdog, onDeath, apiEnv }
    return { ...(await startProductOn(options)), cluster, home, stop: undo.run }
  } catch (error) {
    await undo.run()
    throw error
  }
}
