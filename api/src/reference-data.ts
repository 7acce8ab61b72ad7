import { methodDefinition, referenceFiles } from '@weirlight/shared/contracts'
import type { z } from 'zod'
import { loadMethods } from './modules/methods/index.js'
import { loadProgrammes } from './modules/programmes/index.js'
import { openPool } from './platform/database/pool.js'
import { listFixtures, readFixture } from './platform/files/fixtures.js'
import { Clock, Database, SYSTEM } from './platform/index.js'

type File = keyof typeof referenceFiles

/**
 * Writes the shipped catalogue of methods, programmes, limits and clocks; again after each update. Existing rows
 * keep their ids, so that results and calibrations go on referring to them.
 * @returns how many rows were added or changed
 */
export async function loadReferenceData(ownerUrl: string): Promise<number> {
  const pool = openPool({ url: ownerUrl, size: 1, name: 'weirlight-reference' })
  const db = new Database({ pool, clock: new Clock() })
  try {
    return await db.transaction(SYSTEM, 'reference.load', null, async (trx) => {
      const programmes = await loadProgrammes(trx, {
        programmes: read('programmes.json'),
        limits: read('limits.json'),
        clocks: read('clocks.json'),
      })
      const methods = await loadMethods(trx, {
        methods: listFixtures('reference/methods').map((path) => methodDefinition.parse(readFixture(path))),
        analytes: read('analytes.json'),
        holdTimeRules: read('hold-time-rules.json'),
      })
      return programmes + methods
    })
  } finally {
    await db.onApplicationShutdown()
  }
}

function read<F extends File>(file: F): z.output<(typeof referenceFiles)[F]> {
  return referenceFiles[file].parse(readFixture(`reference/${file}`)) as z.output<(typeof referenceFiles)[F]>
}
