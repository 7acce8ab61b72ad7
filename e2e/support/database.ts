import type { Page } from '@playwright/test'
import pg from 'pg'
import { product } from './accounts.js'

/** The session of a page runs out on the server, as it does after an idle half hour. */
export async function endSession(page: Page): Promise<void> {
  const cookies = await page.context().cookies()
  const cookie = cookies.find((each) => each.name.endsWith('weirlight'))
  if (!cookie) throw new Error('Nobody is signed in on this page.')
  const [sid = ''] = decodeURIComponent(cookie.value).split('.')
  const client = new pg.Client({ connectionString: product().databaseUrl })
  await client.connect()
  try {
    const { rowCount } = await client.query('delete from sessions where sid = $1', [sid])
    if (rowCount !== 1) throw new Error('The session of this page is not in the database.')
  } finally {
    await client.end()
  }
}
