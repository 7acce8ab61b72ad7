import type { DynamicModule, Type } from '@nestjs/common'
import type { NestFastifyApplication } from '@nestjs/platform-fastify'
import { Test, type TestingModuleBuilder } from '@nestjs/testing'
import { afterAll, beforeAll } from 'vitest'
import { FEATURES } from '../app.module.js'
import { Clock } from '../platform/clock/clock.js'
import { readSettings, type SettingsValues } from '../platform/config/settings.js'
import { configureApp, newAdapter } from '../platform/http/app.js'
import { RouteCheck } from '../platform/http/route-check.js'
import { PlatformModule } from '../platform/platform.module.js'
import { Agent, sessionCookie } from './agent.js'
import type { FakeSmtp } from './fake-smtp.js'
import { cloneDatabase, type TestDatabase } from './test-database.js'

export interface TestAppOptions {
  /** the modules under test; every feature when absent */
  imports?: readonly (DynamicModule | Type)[]
  isWorker?: boolean
  /** to show that the guard refuses them; otherwise they keep the application from starting */
  allowUndeclaredRoutes?: boolean
  settings?: Partial<SettingsValues>
  /** a database that is there already, for a second process beside the first; it is not dropped */
  database?: TestDatabase
  /** `(builder) => builder.overrideProvider(MailTransport).useValue(fake)` */
  override?: (builder: TestingModuleBuilder) => TestingModuleBuilder
}

export interface TestApp {
  app: NestFastifyApplication
  database: TestDatabase
  settings: SettingsValues
  get<T>(token: Type<T> | (abstract new (...args: never[]) => T)): T
  /** nobody signed in */
  anonymous(): Agent
  /** this person, signed in; the session is real, the sign-in page is not gone through */
  as(user: { userId: string }): Promise<Agent>
  close(): Promise<void>
}

export function testSettings(databaseUrl: string, changes: Partial<SettingsValues> = {}): SettingsValues {
  const settings = readSettings({
    NODE_ENV: 'test',
    DATABASE_URL: databaseUrl,
    DATABASE_POOL: '10',
    // nobody listens there: a test that needs mail brings a fake server or transport
    SMTP_URL: 'smtp://127.0.0.1:1',
    PUBLIC_URL: 'http://127.0.0.1:3000',
    SESSION_SECRET: 'a secret for tests alone, of forty letters',
    LOG_LEVEL: 'silent',
    RATE_LIMIT: '0',
  })
  return { ...settings, ...changes }
}

export async function createTestApp(options: TestAppOptions = {}): Promise<TestApp> {
  const database = options.database ?? (await cloneDatabase())
  const settings = testSettings(database.appUrl, options.settings)
  const builder = Test.createTestingModule({
    imports: [
      PlatformModule.create({ settings, isWorker: options.isWorker ?? false, isStrict: false }),
      ...(options.imports ?? FEATURES),
    ],
  })
  // one clock for the services and for the database of the test: pinning it pins both
  builder.overrideProvider(Clock).useValue(database.clock)
  if (options.allowUndeclaredRoutes) {
    builder.overrideProvider(RouteCheck).useValue({})
  }
  const module = await (options.override?.(builder) ?? builder).compile()
  const app = module.createNestApplication<NestFastifyApplication>(newAdapter(settings), {
    logger: process.env['TEST_LOG'] ? ['error', 'warn', 'log'] : false,
  })
  await configureApp(app)
  await app.init()
  await app.getHttpAdapter().getInstance().ready()
  return {
    app,
    database,
    settings,
    get: (token) => app.get(token),
    anonymous: () => new Agent(app),
    as: async ({ userId }) => new Agent(app, await sessionCookie({ database, settings, userId })),
    close: async () => {
      await app.close()
      if (!options.database) await database.drop()
    },
  }
}

/**
 * `const at = useTestApp({ imports: [SamplesModule] })` at the top of a test file; `at()` inside tests. Mail goes to `smtp`, which
 * lives as long as the application.
 */
export function useTestApp({ smtp, ...options }: TestAppOptions & { smtp?: FakeSmtp } = {}): () => TestApp {
  let built: TestApp | undefined
  beforeAll(async () => {
    await smtp?.start()
    built = await createTestApp(
      smtp ? { ...options, settings: { ...options.settings, smtpUrl: smtp.url } } : options,
    )
  })
  afterAll(async () => {
    await built?.close()
    await smtp?.stop()
  })
  return () => {
    if (!built) throw new Error('The test application is there inside tests and hooks.')
    return built
  }
}
