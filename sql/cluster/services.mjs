import { randomBytes } from 'node:crypto'
import { createWriteStream, existsSync, mkdirSync, readFileSync, renameSync, writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { inRoot } from './paths.mjs'
import { freePort } from './ports.mjs'
import { pause, startService } from './processes.mjs'
import { warn } from './say.mjs'

const host = '127.0.0.1'

/** The log of this start; the one before it is kept beside it. */
const openLog = (folder, name) => {
  mkdirSync(folder, { recursive: true })
  const file = join(folder, `${name}.log`)
  if (existsSync(file)) renameSync(file, `${file}.1`)
  const stream = createWriteStream(file, { mode: 0o600 })
  return { file, write: (chunk) => stream.write(chunk) }
}

const statusOf = async (url) => {
  try {
    const response = await fetch(url, { signal: AbortSignal.timeout(2000) })
    await response.arrayBuffer()
    return response.status
  } catch {
    return undefined
  }
}

/** Waits until `url` answers well. A service that answers badly for a while is up, but not well. */
const waitForAnswer = async ({ url, service, patienceMs = 60_000, unwellMs = 10_000 }) => {
  const begun = performance.now()
  let answeredSince
  while (!service.hasEnded() && performance.now() - begun < patienceMs) {
    const status = await statusOf(url)
    if (status === 200) return { isUp: true }
    if (status !== undefined) answeredSince ??= performance.now()
    if (answeredSince && performance.now() - answeredSince > unwellMs) return { isUp: true, status }
    await pause(100)
  }
  return { isUp: false }
}

/** Kept ports make addresses that stay the same from start to start. */
const keptPorts = (folder) => {
  const file = join(folder, 'ports.json')
  const read = () => (existsSync(file) ? JSON.parse(readFileSync(file, 'utf8')) : {})
  return {
    get: (name) => read()[name],
    keep: (name, port) => writeFileSync(file, JSON.stringify({ ...read(), [name]: port })),
  }
}

/** The mail fake: takes mail by SMTP, shows it on a web page. Mail is kept in `folder` across starts. */
export const mailService = async ({ folder, wished = {}, watchdog, onDeath }) => {
  mkdirSync(join(folder, 'mail'), { recursive: true })
  const kept = keptPorts(folder)
  const smtpPort = await freePort(kept.get('smtp'), wished.smtp)
  const webPort = await freePort(kept.get('mailbox'), wished.web)
  kept.keep('smtp', smtpPort)
  kept.keep('mailbox', webPort)
  const log = openLog(join(folder, 'log'), 'mail')
  const url = `http://${host}:${webPort}`
  let service

  const start = async () => {
    service = startService({
      name: 'The mailbox (maildev)',
      command: process.execPath,
      args: [
        inRoot('node_modules', 'maildev', 'dist', 'bin', 'maildev.js'),
        ...['--smtp', smtpPort, '--ip', host, '--web', webPort, '--web-ip', host].map(String),
        ...['--mail-directory', join(folder, 'mail')],
      ],
      cwd: folder,
      env: process.env,
      onOutput: log.write,
      onDeath,
    })
    watchdog?.watch(service)
    const { isUp } = await waitForAnswer({ url: `${url}/api/email`, service })
    if (!isUp) throw new Error(`The mailbox (maildev) did not start:\n${service.lastLines()}`)
  }

  await start()
  return {
    url,
    smtpUrl: `smtp://${host}:${smtpPort}`,
    start,
    kill: () => service.kill(),
    stop: () => service.stop(),
  }
}

/** A secret that stays the same from start to start, so that a restart signs nobody out. */
export const keptSecret = (folder, name) => {
  const file = join(folder, name)
  if (!existsSync(file)) writeFileSync(file, randomBytes(48).toString('hex'), { mode: 0o600 })
  return readFileSync(file, 'utf8')
}

/** The application: API and web page in one process. `env` goes over the launcher's own environment. */
export const apiService = async ({ folder, port, env, watchdog, onDeath }) => {
  const log = openLog(join(folder, 'log'), 'api')
  const url = `http://${host}:${port}`
  let service

  const start = async () => {
    service = startService({
      name: 'The application',
      command: process.execPath,
      args: ['--enable-source-maps', inRoot('api', 'dist', 'main.js')],
      cwd: inRoot(),
      env: {
        ...process.env,
        NODE_ENV: 'production',
        HOST: host,
        PORT: String(port),
        WEB_DIST: inRoot('web', 'dist'),
        ...env,
      },
      onOutput: log.write,
      onDeath,
    })
    watchdog?.watch(service)
    const { isUp, status } = await waitForAnswer({ url: `${url}/api/health`, service })
    if (!isUp) throw new Error(`The application did not start:\n${service.lastLines()}`)
    if (status)
      warn(`The application runs, but ${url}/api/health answers ${status}: a part of it is not well.`)
  }

  await start()
  return {
    url,
    logFile: log.file,
    pid: () => service.pid,
    start,
    kill: () => service.kill(),
    stop: () => service.stop({ patienceMs: 15_000 }),
    ended: () => service.ended,
  }
}
