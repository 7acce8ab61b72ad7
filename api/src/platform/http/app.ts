import { randomUUID } from 'node:crypto'
import type { INestApplication } from '@nestjs/common'
import { FastifyAdapter, type NestFastifyApplication } from '@nestjs/platform-fastify'
import { SwaggerModule } from '@nestjs/swagger'
import type { FastifyInstance } from 'fastify'
import { Logger } from 'nestjs-pino'
import { Settings, type SettingsValues } from '../config/settings.js'
import { Database } from '../database/database.js'
import { registerSessions } from '../sessions/session.plugin.js'
import { openApiDocument } from './openapi.js'
import { registerRequestContext } from './request-context.hook.js'
import { registerSecurity } from './security.js'
import { registerWebFiles } from './web-files.js'

const BODY_LIMIT = 1024 * 1024

export function newAdapter(settings: SettingsValues): FastifyAdapter {
  return new FastifyAdapter({
    bodyLimit: BODY_LIMIT,
    trustProxy: trusted(settings.trustProxy),
    genReqId: () => randomUUID(),
    // a request that trickles in is cut off
    requestTimeout: 60_000,
    forceCloseConnections: true,
  })
}

function trusted(value: string | undefined): boolean | number | string {
  if (!value) return false
  return /^\d+$/.test(value) ? Number(value) : value
}

/** Everything around the routes, the same in production and in tests. */
export async function configureApp(app: NestFastifyApplication): Promise<void> {
  const settings = app.get(Settings)
  const fastify = app.getHttpAdapter().getInstance() as unknown as FastifyInstance
  if (settings.environment !== 'test') app.useLogger(app.get(Logger))
  app.setGlobalPrefix('api')
  registerRequestContext(fastify)
  await registerSecurity(fastify, settings)
  await registerSessions(fastify, { pool: app.get(Database).pool, settings })
  if (settings.environment !== 'test') publishApi(app)
  if (settings.webDist) await registerWebFiles(fastify, settings.webDist)
  app.enableShutdownHooks(['SIGINT', 'SIGTERM'])
}

function publishApi(app: INestApplication): void {
  SwaggerModule.setup('api/docs', app, openApiDocument(), {
    jsonDocumentUrl: 'api/openapi.json',
    customSiteTitle: 'Weirlight API',
  })
}
