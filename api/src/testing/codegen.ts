import { makeTemplate } from './template-database.js'
import { readTestUrls, withDatabase } from './test-urls.js'
import { TYPES_FILE, writeTypes } from '../platform/database/codegen.js'

/** `npm run codegen -w api`: the tables' types, from a database made of the migrations as they are now. */
const urls = readTestUrls()
writeTypes(withDatabase(urls.owner, await makeTemplate(urls)))
console.log(`Wrote ${TYPES_FILE}`)
