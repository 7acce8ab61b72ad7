import { readdirSync, readFileSync } from 'node:fs'
import { fileURLToPath } from 'node:url'
import { methodDefinition, referenceFiles } from '@weirlight/shared/reference'
import { loadMethods } from '../../modules/methods/index.js'
import { loadProgrammes } from '../../modules/programmes/index.js'
import { SYSTEM } from '../../platform/database/acting.js'
import type { TestDatabase } from '../test-database.js'

const FOLDER = fileURLToPath(new URL('../../../../fixtures/reference/', import.meta.url))
const read = (file: string): unknown => JSON.parse(readFileSync(`${FOLDER}${file}`, 'utf8'))

export interface Reference {
  /** by the catalogue's code */
  methods: Record<string, string>
  programmes: Record<string, string>
}

const loaded = new WeakMap<TestDatabase, Promise<Reference>>()

/** The shipped reference data and a laboratory, loaded once a test database; ids by code. */
export function theReference(database: TestDatabase): Promise<Reference> {
  const known = loaded.get(database)
  if (known) return known
  const made = load(database)
  loaded.set(database, made)
  return made
}

async function load({ owner }: TestDatabase): Promise<Reference> {
  return owner.transaction(SYSTEM, 'reference.load', null, async (trx) => {
    await loadMethods(trx, {
      methods: readdirSync(`${FOLDER}methods`)
        .sort()
        .map((file) => methodDefinition.parse(read(`methods/${file}`))),
      analytes: referenceFiles['analytes.json'].parse(read('analytes.json')),
      holdTimeRules: referenceFiles['hold-time-rules.json'].parse(read('hold-time-rules.json')),
    })
    await loadProgrammes(trx, {
      programmes: referenceFiles['programmes.json'].parse(read('programmes.json')),
      limits: referenceFiles['limits.json'].parse(read('limits.json')),
      clocks: referenceFiles['clocks.json'].parse(read('clocks.json')),
    })
    await trx
      .insertInto('laboratory')
      .values({
        name: 'Test Waterworks Laboratory',
        address: '1 Test Street',
        accreditation: 'T-1',
        timeZone: 'America/New_York',
        email: 'laboratory@test.example',
        phone: '555-0100',
      })
      .onConflict((conflict) => conflict.doNothing())
      .execute()
    const methods = await trx.selectFrom('methods').select(['id', 'code']).execute()
    const programmes = await trx.selectFrom('programmes').select(['id', 'code']).execute()
    const byCode = (rows: { id: string; code: string }[]) =>
      Object.fromEntries(rows.map(({ id, code }) => [code, id]))
    return { methods: byCode(methods), programmes: byCode(programmes) }
  })
}

export async function methodId(database: TestDatabase, code: string): Promise<string> {
  const id = (await theReference(database)).methods[code]
  if (id === undefined) throw new Error(`There is no method ${code} in the catalogue.`)
  return id
}
