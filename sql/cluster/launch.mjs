import { existsSync, mkdirSync, rmSync } from 'node:fs'
import { join } from 'node:path'
import { ensureBuilt } from './build.mjs'
import { completeAccounts, openDatabase } from './database.mjs'
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

/**
 * The whole product on a running cluster: database, mailbox, application.
 * `folder` takes logs, mail and ports; `home` is the cluster's.
 */
export const startProductOn = async (options) => {
  const { cluster, home, folder, accountsFile, undo, watchdog, onDeath } = options
  const { hasDemo = true, ports = {}, databaseName, smtpUrl, apiEnv = {} } = options
  mkdirSync(folder, { recursive: true })
  const database = await openDatabase({ cluster, home, hasDemo, accountsFile, name: databaseName })

  const startMail = () =>
    mailService({ folder, wished: { smtp: ports.smtp, web: ports.mailbox }, watchdog, onDeath })
  const mail = smtpUrl ? undefined : await step('Starting the mailbox', startMail)
  if (mail) undo.push(mail.stop)

  const port = await freePort(...(ports.web ?? []))
  const url = `http://127.0.0.1:${port}`
  const api = await step('Starting the application', () =>
    apiService({
      folder,
      port,
      env: {
        DATABASE_URL: database.appUrl,
        SMTP_URL: smtpUrl ?? mail.smtpUrl,
        PUBLIC_URL: url,
        SESSION_SECRET: keptSecret(home, 'session-secret'),
        OWNER_DATABASE_URL: undefined,
        ...apiEnv,
      },
      watchdog,
      onDeath,
    }),
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
