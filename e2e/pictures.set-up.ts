import { listCalibrations } from '@weirlight/shared/contracts'
import { accountOf } from './support/accounts.js'
import { draftUnderWay } from './support/drafting.js'
import { test } from './support/test.js'

/** The demonstration leaves no work half done at the bench; the pictures show the workbench in use. */
test('a calibration is under way', async ({ apiOf }) => {
  const bench = await apiOf(accountOf('technician'))
  const { items } = await bench.call(listCalibrations, { query: { state: 'draft' } })
  if (items.length === 0) await draftUnderWay(bench, 'fe-phenanthroline')
})
