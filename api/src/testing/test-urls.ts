/**
 * Where the tests find PostgreSQL: TEST_ADMIN_URL may create roles and databases. The other two addresses
 * are needed only where those roles sign in with secrets of their own.
 */
export interface TestUrls {
  admin: string
  owner: string
  app: string
}

export function readTestUrls(env: NodeJS.ProcessEnv = process.env): TestUrls {
  const admin = env['TEST_ADMIN_URL']
  if (!admin) {
    throw new Error(
      'Database tests need TEST_ADMIN_URL, a superuser’s address of a throw-away PostgreSQL (npm test sets it).',
    )
  }
  return {
    admin,
    owner: env['TEST_OWNER_URL'] ?? asRole(admin, 'weirlight_owner'),
    app: env['TEST_APP_URL'] ?? asRole(admin, 'weirlight_app'),
  }
}

function asRole(url: string, role: string): string {
  const changed = new URL(url)
  changed.username = role
  changed.password = ''
  return changed.href
}

export function withDatabase(url: string, name: string): string {
  const changed = new URL(url)
  changed.pathname = `/${name}`
  return changed.href
}

export function roleOf(url: string): string {
  return decodeURIComponent(new URL(url).username)
}
