import { z } from 'zod'

const url = (protocols: RegExp, what: string) =>
  z.string().refine((text) => protocols.test(text) && URL.canParse(text), `must be the address of ${what}`)

const yes = z
  .enum(['1', '0', 'true', 'false', ''])
  .default('')
  .transform((text) => text === '1' || text === 'true')

const POSTGRES = /^postgres(ql)?:\/\//

/** Everything the processes read from their environment, and nowhere else. */
export const settingsSchema = z
  .object({
    NODE_ENV: z.enum(['production', 'development', 'test']).default('production'),
    /** signs in as the application's role, which cannot change history */
    DATABASE_URL: url(POSTGRES, 'a PostgreSQL database (postgres://role@host:port/name)'),
    DATABASE_READ_URL: url(POSTGRES, 'a PostgreSQL replica').optional(),
    DATABASE_POOL: z.coerce.number().int().min(2).max(200).default(20),
    SMTP_URL: url(/^smtps?:\/\//, 'a mail server (smtp://host:port)'),
    MAIL_FROM: z.string().min(3).max(254).default('Weirlight <laboratory@weirlight.example>'),
    PUBLIC_URL: url(/^https?:\/\//, 'the web page as people type it (https://lab.example)'),
    SESSION_SECRET: z.string().min(32, 'must be 32 characters or more'),
    PORT: z.coerce.number().int().min(0).max(65_535).default(3000),
    HOST: z.string().default('127.0.0.1'),
    /** hops or addresses of the proxies in front; unset, none is believed */
    TRUST_PROXY: z.string().optional(),
    /** the built web application, served by the API when set */
    WEB_DIST: z.string().optional(),
    /** requests a minute from one address to one process; 0 switches the valve off */
    RATE_LIMIT: z.coerce.number().int().min(0).default(6000),
    WORKER: z.enum(['inside', 'none']).default('inside'),
    LOG_LEVEL: z.enum(['fatal', 'error', 'warn', 'info', 'debug', 'trace', 'silent']).default('info'),
    /** lets the API start while contracts have no route yet */
    WEIRLIGHT_PARTIAL: yes,
  })
  .transform((env) => ({
    environment: env.NODE_ENV,
    isProduction: env.NODE_ENV === 'production',
    databaseUrl: env.DATABASE_URL,
    databaseReadUrl: env.DATABASE_READ_URL,
    databasePool: env.DATABASE_POOL,
    smtpUrl: env.SMTP_URL,
    mailFrom: env.MAIL_FROM,
    publicUrl: env.PUBLIC_URL.replace(/\/+$/, ''),
    isSecure: env.PUBLIC_URL.startsWith('https:'),
    sessionSecret: env.SESSION_SECRET,
    port: env.PORT,
    host: env.HOST,
    trustProxy: env.TRUST_PROXY,
    webDist: env.WEB_DIST,
    rateLimit: env.RATE_LIMIT,
    worker: env.WORKER,
    logLevel: env.LOG_LEVEL,
    isPartial: env.WEIRLIGHT_PARTIAL,
  }))

export type SettingsValues = z.output<typeof settingsSchema>

/** The injectable: `constructor(private readonly settings: Settings)`. */
export abstract class Settings implements SettingsValues {
  abstract readonly environment: SettingsValues['environment']
  abstract readonly isProduction: boolean
  abstract readonly databaseUrl: string
  abstract readonly databaseReadUrl: string | undefined
  abstract readonly databasePool: number
  abstract readonly smtpUrl: string
  abstract readonly mailFrom: string
  abstract readonly publicUrl: string
  abstract readonly isSecure: boolean
  abstract readonly sessionSecret: string
  abstract readonly port: number
  abstract readonly host: string
  abstract readonly trustProxy: string | undefined
  abstract readonly webDist: string | undefined
  abstract readonly rateLimit: number
  abstract readonly worker: 'inside' | 'none'
  abstract readonly logLevel: SettingsValues['logLevel']
  abstract readonly isPartial: boolean
}

/** Names every wrong variable at once; never prints a value, which may be a secret. */
export function readSettings(env: Record<string, unknown>): SettingsValues {
  const parsed = settingsSchema.safeParse(env)
  if (parsed.success) return parsed.data
  const lines = parsed.error.issues.map((issue) => {
    const name = issue.path.join('.')
    return `  ${name} ${env[name] === undefined ? 'is not set' : issue.message}`
  })
  throw new Error(`The environment is not complete:\n${lines.join('\n')}`)
}
