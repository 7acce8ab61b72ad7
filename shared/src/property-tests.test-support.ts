import fc from 'fast-check'

/*
 * Properties are tried with the same numbers on every run, so that a run can be repeated; PROPERTY_SEED tries others,
 * and PROPERTY_RUNS more of them.
 */
fc.configureGlobal({
  seed: Number(process.env['PROPERTY_SEED'] ?? 20261201),
  numRuns: Number(process.env['PROPERTY_RUNS'] ?? 100),
})
