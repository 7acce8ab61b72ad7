import { migrate } from './platform/database/migrator.js'
import { loadReferenceData } from './reference-data.js'

/** `node dist/migrate.js`: brings the database of OWNER_DATABASE_URL up to date for the role of DATABASE_URL, then its catalogue. */
const ownerUrl = process.env['OWNER_DATABASE_URL']
const appUrl = process.env['DATABASE_URL']
if (!ownerUrl || !appUrl) {
  console.error('Set OWNER_DATABASE_URL (owns the tables) and DATABASE_URL (the application’s role).')
  process.exit(1)
}

try {
  const done = await migrate({ ownerUrl, appRole: decodeURIComponent(new URL(appUrl).username) })
  console.log(done.length === 0 ? 'The database is up to date.' : `Ran ${done.join(', ')}.`)
  const changed = await loadReferenceData(ownerUrl)
  if (changed > 0) console.log(`Wrote ${changed} rows of the catalogue of methods, programmes and limits.`)
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
}
