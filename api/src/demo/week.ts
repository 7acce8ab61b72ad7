import type { DemoMethod } from './demo-world.js'

export interface Week {
  index: number
  /** five working days, Monday first, `2026-08-03` */
  days: readonly string[]
}

/** What happens once in the four months, so that the record shows how slips are handled. */
export interface Incidents {
  /** from this week on no alert is answered yet */
  lastAnswered: number
  /** week in which the second source of the manganese calibration does not agree */
  returnedCalibration: number
  /** week in which the last verification of the iron run drifts away */
  failedVerification: number
  /** points and weeks with levels far above the usual */
  excursions: readonly { week: number; point: string; analyte: DemoMethod['analyte']; mgPerL: number }[]
}
