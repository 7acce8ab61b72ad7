// npm run dev: the product on this checkout's own data, rebuilt and restarted as files change.

import { watch } from 'node:fs'
import { ensureBuilt } from './build.mjs'
import { completeAccounts, ensureDemo, openDatabase } from './database.mjs'
import { undoStack } from './launch.mjs'
import { takeLock } from './lock.mjs'
import { demandNode, ensurePackages } from './packages.mjs'
import { inData, inRoot } from './paths.mjs'
import { checkoutHome } from './places.mjs'
import { freePort } from './ports.mjs'
import { startCluster } from './postgres.mjs'
import { run, startService } from './processes.mjs'
import { bold, green, quiet, say, step, warn } from './say.mjs'
import { keptSecret, mailService } from './services.mjs'
import { runToEnd } from './signals.mjs'
import { startWatchdog } from './watchdog.mjs'

const undo = undoStack()

const bin = (...parts) => inRoot('node_modules', ...parts)

/** Shows a watcher's output line by line under its name. */
const labelled = (name) => (chunk) => {
  for (const line of chunk.toString('utf8').split('\n')) {
    if (line.trim()) say(`${quiet(name.padEnd(7))} ${line}`)
  }
}

/** Compiles the API when its sources change; the compiler's own watch mode would need one more package. */
const compileOnChange = () => {
  const show = labelled('compile')
  let timer
  let isBusy = false
  const compile = async () => {
    if (isBusy) return soon()
    isBusy = true
    const answer = await run('npm', ['run', 'build', '-w', 'api'], { cwd: inRoot() })
    isBusy = false
    show(answer.code === 0 ? 'compiled' : answer.output)
  }
  const soon = () => {
    clearTimeout(timer)
    timer = setTimeout(() => void compile(), 200)
  }
  const watcher = watch(inRoot('api', 'src'), { recursive: true }, soon)
  undo.push(() => {
    clearTimeout(timer)
    watcher.close()
  })
}

/** What is kept running; node starts the API again when `dist` changes. */
const watchers = ({ api, web, env }) => [
  {
    name: 'shared',
    args: [bin('typescript', 'bin', 'tsc'), '-p', 'tsconfig.build.json', '--watch', '--preserveWatchOutput'],
    cwd: inRoot('shared'),
  },
  {
    name: 'api',
    args: [
      '--enable-source-maps',
      `--watch-path=${inRoot('api', 'dist')}`,
      `--watch-path=${inRoot('shared', 'dist')}`,
    ].concat([inRoot('api', 'dist', 'main.js')]),
    cwd: inRoot(),
    env: { ...env, PORT: String(api) },
  },
  {
    name: 'web',
    args: [bin('vite', 'bin', 'vite.js'), '--host', '127.0.0.1', '--port', String(web), '--strictPort'],
    cwd: inRoot('web'),
    env: { WEIRLIGHT_API: `http://127.0.0.1:${api}` },
  },
]

const work = async () => {
  const lock = takeLock('npm run dev')
  undo.push(lock.release)
  demandNode()
  await ensurePackages()
  await ensureBuilt()
  const watchdog = startWatchdog()
  let tell
  const death = new Promise((resolve) => (tell = resolve))

  const home = await checkoutHome()
  const accountsFile = inData('demo-accounts.json')
  const cluster = await step('Starting PostgreSQL', () => startCluster({ home, watchdog, onDeath: tell }))
  undo.push(cluster.stop)
  const database = await openDatabase({ cluster, home })
  const mail = await step('Starting the mailbox', () =>
    mailService({ folder: inData(), wished: { smtp: 1025, web: 1080 }, watchdog, onDeath: tell }),
  )
  undo.push(mail.stop)

  const web = await freePort(5173)
  const api = await freePort()
  const url = `http://127.0.0.1:${web}`
  const env = {
    NODE_ENV: 'development',
    LOG_LEVEL: process.env.LOG_LEVEL ?? 'warn',
    HOST: '127.0.0.1',
    DATABASE_URL: database.appUrl,
    SMTP_URL: mail.smtpUrl,
    PUBLIC_URL: url,
    SESSION_SECRET: keptSecret(home, 'session-secret'),
  }
  await ensureDemo({ cluster, home, database, accountsFile, env })
  for (const { name, args, cwd, env: own = {} } of watchers({ api, web, env })) {
    const service = startService({
      name,
      command: process.execPath,
      args,
      cwd,
      env: { ...process.env, ...own },
      onOutput: labelled(name),
      onDeath: tell,
    })
    watchdog.watch(service)
    undo.push(service.stop)
  }
  compileOnChange()
  lock.note({ url })
  completeAccounts(accountsFile, { url, mailUrl: mail.url, databaseUrl: database.appUrl })
  say(`\n${green('Watching')}  ${bold(url)}   mailbox ${mail.url}   accounts in .data/demo-accounts.json\n`)
  const { name } = await death
  warn(`${name} ended by itself; stopping the rest.`)
  return 1
}

await runToEnd({ undo, work, onInterrupt: () => 0 })
