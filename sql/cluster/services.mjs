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

const ask = async (url) => {
  try {
    const response = await fetch(url, { signal: AbortSignal.timeout(5000) })
    return { status: response.status, text: await response.text() }
  } catch {
    return undefined
  }
}

/** Waits until `url` answers well; gives what it said, or undefined when the service ended or stayed silent. */
const waitForAnswer = async ({ url, service, patienceMs = 120_000 }) => {
  const begun = performance.now()
  while (!service.hasEnded() && performance.now() - begun < patienceMs) {
    const answer = await ask(url)
    if (answer?.status === 200) return answer.text
    await pause(100)
  }
  return undefined
}

/**
 * Jobs may well be behind after a stop; a database or a mail server out of reach is worth a word. On a busy machine
 * the first answer may come too late, so it is asked again.
 */
const failingParts = async (url, firstAnswer) => {
  let health = JSON.parse(firstAnswer)
  for (let i = 0; i < 5 && (health.database === 'failing' || health.mail === 'failing'); i += 1) {
    await pause(1000)
    health = JSON.parse((await ask(url))?.text ?? firstAnswer)
  }
  return [
    ...(health.database === 'failing' ? ['its database'] : []),
    ...(health.mail === 'failing' ? ['the mail server'] : []),
  ]
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
    const answer = await waitForAnswer({ url: `${url}/api/email`, service })
    if (answer === undefined) throw new Error(`The mailbox (maildev) did not start:\n${service.lastLines()}`)
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
    const answer = await waitForAnswer({ url: `${url}/api/health`, service })
    if (answer === undefined) throw new Error(`The application did not start:\n${service.lastLines()}`)
    for (const part of await failingParts(`${url}/api/health`, answer)) {
      warn(`The application runs, but ${part} does not answer.`)
    }
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
