import { loadReferenceData } from './reference-data.js'

/** `node dist/seed-reference.js`: brings methods, programmes, limits and clocks of OWNER_DATABASE_URL up to date. */
const ownerUrl = process.env['OWNER_DATABASE_URL']
if (!ownerUrl) {
  console.error('Set OWNER_DATABASE_URL (owns the tables).')
  process.exit(1)
}

try {
  const changed = await loadReferenceData(ownerUrl)
  console.log(changed === 0 ? 'The catalogue is up to date.' : `Wrote ${changed} rows of the catalogue.`)
} catch (error) {
  console.error(error instanceof Error ? error.message : error)
  process.exit(1)
}
