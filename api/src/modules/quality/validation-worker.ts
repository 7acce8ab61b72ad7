import { runValidationCases, type ValidationCase, type ValidationReport } from '@weirlight/shared/assay'
import { listFixtures, readFixture } from '../../platform/files/fixtures.js'

/** Every published case there is; in a thread of its own, because it computes for a second or more. */
export default function validate({ now }: { now: string }): ValidationReport {
  const cases = listFixtures('assay/cases').flatMap((path) => readFixture(path) as ValidationCase[])
  return runValidationCases(cases, { now })
}
