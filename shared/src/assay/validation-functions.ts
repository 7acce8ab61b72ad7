import { compareWithLimit } from './compare-with-limit.js'
import { percentile90, runningAnnualAverage } from './compliance-statistics.js'
import { diagnoseSlope } from './diagnose-slope.js'
import { holdTime } from './hold-time.js'
import {
  complementaryHue,
  expectedSlope,
  molarAbsorptivity,
  ownColour,
  readableRange,
  transitionEnergy,
} from './light.js'
import { reportValue } from './report-value.js'
import { roundReported } from './rounding.js'
import { colourMatching, solutionColour } from './solution-colour.js'
import { applyDilution, convertUnit } from './units.js'

/** Cases come from files: each function checks what it is handed, as it does for every caller. */
type AnyFunction = (...input: unknown[]) => unknown
const table = <T extends Record<string, (...input: never[]) => unknown>>(functions: T) =>
  functions as unknown as Readonly<Record<string, AnyFunction>>

/** Every function of the engine that a case may name. */
export const validationFunctions = table({
  applyDilution,
  colourMatching,
  compareWithLimit,
  complementaryHue,
  convertUnit,
  diagnoseSlope,
  expectedSlope,
  holdTime,
  molarAbsorptivity,
  ownColour,
  percentile90,
  readableRange,
  reportValue,
  roundReported,
  runningAnnualAverage,
  solutionColour,
  transitionEnergy,
})
