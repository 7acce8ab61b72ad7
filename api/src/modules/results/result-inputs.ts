import type { AssessmentRules, PositionLimit, ReportingRules } from '@weirlight/shared/contracts'

/** What was frozen when the result was stored. */
export interface ResultInputs {
  readings: { id: string; replicate: number; absorbance: string }[]
  dilution: string
  rules: AssessmentRules
  limits: PositionLimit[]
  reporting: ReportingRules
}

export const CAUTION =
  'This is a laboratory finding about one sample. It is not a determination of compliance or of safety; the primacy agency decides under its current rules.'
