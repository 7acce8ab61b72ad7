import 'reflect-metadata'
import { randomBytes } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { NestFactory } from '@nestjs/core'
import type { NestFastifyApplication } from '@nestjs/platform-fastify'
import type { Role } from '@weirlight/shared/permissions'
import { AppModule } from '../app.module.js'
import { readSettings } from '../platform/config/settings.js'
import { configureApp, newAdapter } from '../platform/http/app.js'
import { Agent } from '../testing/agent.js'

export interface Account {
  role: Role
  name: string
  email: string
  passphrase: string
}

/** What `npm run bench` hands over. */
export interface BenchSettings {
  url: string
  databaseUrl: string
  ownerUrl: string
  accounts: Account[]
  webDist: string
  folder: string
}

export function readBenchSettings(env: NodeJS.ProcessEnv): BenchSettings {
  const need = (name: string) => {
    const value = env[name]
    if (!value) throw new Error(`${name} is not set: the bench is started by “npm run bench”.`)
    return value
  }
  // it loads a hundred thousand invented entries into the history, which nobody can take out again
  if (need('BENCH_THROW_AWAY') !== '1') throw new Error('The bench works on throw-away databases alone.')
  const settings = {
    url: need('BENCH_URL'),
    databaseUrl: need('DATABASE_URL'),
    ownerUrl: need('OWNER_DATABASE_URL'),
    webDist: need('WEB_DIST'),
    folder: need('BENCH_FOLDER'),
  }
  for (const address of [settings.url, settings.databaseUrl, settings.ownerUrl]) {
    const { hostname } = new URL(address)
    if (hostname !== '127.0.0.1')
      throw new Error(`The bench stays on this machine: ${hostname} is not 127.0.0.1.`)
  }
  const written = JSON.parse(readFileSync(need('DEMO_ACCOUNTS_FILE'), 'utf8')) as { accounts: Account[] }
  return { ...settings, accounts: written.accounts }
}

/** The application once more inside the bench: to make what is measured, and to hear which SQL a request runs. */
export async function startInside(given: BenchSettings): Promise<NestFastifyApplication> {
  const settings = readSettings({
    NODE_ENV: 'production',
    DATABASE_URL: given.databaseUrl,
    // nobody listens there; nothing here sends mail
    SMTP_URL: 'smtp://127.0.0.1:1',
    PUBLIC_URL: given.url,
    SESSION_SECRET: randomBytes(32).toString('hex'),
    RATE_LIMIT: '0',
    LOG_LEVEL: 'silent',
  })
  const app = await NestFactory.create<NestFastifyApplication>(
    AppModule.create({ settings, isWorker: false, isStrict: true }),
    newAdapter(settings),
    { logger: ['error'], abortOnError: false },
  )
  await configureApp(app)
  await app.init()
  await app.getHttpAdapter().getInstance().ready()
  return app
}

const cookieOf = (header: string) => header.split(';', 1)[0] ?? ''

/** A person signed in to the application inside the bench. */
export async function signInInside(app: NestFastifyApplication, account: Account): Promise<Agent> {
  const { status, headers, bytes } = await new Agent(app).raw({
    method: 'POST',
    url: '/api/session',
    payload: { email: account.email, password: account.passphrase },
  })
  if (status !== 200) throw new Error(`${account.email} cannot sign in: ${bytes.toString()}`)
  const [cookie] = [headers['set-cookie']].flat()
  return new Agent(app, cookieOf(String(cookie)))
}

/** The same person, signed in to the running product: what every request carries. */
export async function signInByHttp(url: string, account: Account): Promise<Record<string, string>> {
  const response = await fetch(new URL('/api/session', url), {
    method: 'POST',
    headers: { 'content-type': 'application/json', 'x-weirlight': '1' },
    body: JSON.stringify({ email: account.email, password: account.passphrase }),
    signal: AbortSignal.timeout(10_000),
  })
  if (!response.ok) throw new Error(`${account.email} cannot sign in: ${await response.text()}`)
  const [cookie = ''] = response.headers.getSetCookie()
  return { cookie: cookieOf(cookie), 'x-weirlight': '1' }
}
