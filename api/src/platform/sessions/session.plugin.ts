import cookie from '@fastify/cookie'
import session from '@fastify/session'
import connectPgSimple from 'connect-pg-simple'
import type { FastifyInstance } from 'fastify'
import type pg from 'pg'
import type { SettingsValues } from '../config/settings.js'
import { IDLE_MINUTES } from './session.service.js'

export async function registerSessions(
  fastify: FastifyInstance,
  { pool, settings }: { pool: pg.Pool; settings: SettingsValues },
): Promise<void> {
  // connect-pg-simple was written for another server; all it takes from it is the class to extend
  const Store = connectPgSimple({ Store: session.Store } as unknown as Parameters<typeof connectPgSimple>[0])
  const store = new Store({
    pool,
    tableName: 'sessions',
    createTableIfMissing: false,
    pruneSessionInterval: 15 * 60,
  })
  await fastify.register(cookie)
  await fastify.register(session, {
    secret: settings.sessionSecret,
    cookieName: settings.isSecure ? '__Host-weirlight' : 'weirlight',
    store: store as unknown as NonNullable<Parameters<typeof session>[1]['store']>,
    saveUninitialized: false,
    rolling: false,
    cookie: {
      httpOnly: true,
      sameSite: 'strict',
      secure: settings.isSecure,
      path: '/',
      maxAge: IDLE_MINUTES * 60_000,
    },
  })
  fastify.addHook('onClose', (_, done) => {
    store.close()
    done()
  })
}
