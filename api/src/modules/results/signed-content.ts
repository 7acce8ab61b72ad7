import type { ResultRecord } from './results.repository.js'

/** What a release signature covers: every number of the batch as it was on the screen. */
export function signedContent(results: readonly ResultRecord[]): unknown {
  return results.map((row) => ({
    result: row.id,
    sample: row.sampleNumber,
    analyte: row.analyte,
    form: row.form,
    state: row.state,
    concentration: row.concentration,
    text: row.reportedText,
    unit: row.unit,
    uncertainty: row.uncertaintyText,
    verdict: row.verdict,
    flags: row.flags,
    engineVersion: row.engineVersion,
  }))
}
