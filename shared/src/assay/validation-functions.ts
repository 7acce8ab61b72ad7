import { cochranTest } from './cochran-test.js'
import { compareWithLimit } from './compare-with-limit.js'
import { percentile90, runningAnnualAverage } from './compliance-statistics.js'
import { curveBand } from './curve-band.js'
import { chartConstants } from './control-chart-constants.js'
import { ewmaChart, individualsChart, meanChart, rangeChart } from './control-charts.js'
import { descriptiveStatistics } from './descriptive-statistics.js'
import { detectionLimits, detectionLimitsFromBlanks } from './detection-limits.js'
import { diagnoseSlope } from './diagnose-slope.js'
import {
  chiSquareUpperProbability,
  chiSquareUpperQuantile,
  fUpperProbability,
  fUpperQuantile,
  normalUpperProbability,
  normalUpperQuantile,
  tTwoSidedProbability,
  tTwoSidedQuantile,
  tUpperProbability,
  tUpperQuantile,
} from './distributions.js'
import { dixonTest } from './dixon-test.js'
import { fitCalibration } from './fit-calibration.js'
import { fitPolynomial } from './fit-polynomial.js'
import { holdTime } from './hold-time.js'
import {
  complementaryHue,
  expectedConcentration,
  expectedSlope,
  molarAbsorptivity,
  ownColour,
  readableRange,
  transitionEnergy,
} from './light.js'
import { lackOfFitTest, mandelTest } from './linearity-tests.js'
import { methodDetectionLimit } from './method-detection-limit.js'
import { generalizedEsd, grubbsTest } from './outlier-tests.js'
import { predictConcentration } from './predict-concentration.js'
import { enNumber, zetaScore, zScore } from './proficiency-scores.js'
import {
  absoluteDifference,
  recoveryPercent,
  relativePercentDifference,
  spikeRecoveryPercent,
} from './recovery.js'
import { reportValue } from './report-value.js'
import { roundReported } from './rounding.js'
import { evaluateRunRules } from './run-rules.js'
import { slopeComparison } from './slope-comparison.js'
import { colourMatching, solutionColour } from './solution-colour.js'
import { standardAddition } from './standard-addition.js'
import { combinedUncertainty, topDownUncertainty } from './uncertainty.js'
import { applyDilution, convertUnit } from './units.js'

/** Cases come from files: each function checks what it is handed, as it does for every caller. */
type AnyFunction = (...input: unknown[]) => unknown
const table = <T extends Record<string, (...input: never[]) => unknown>>(functions: T) =>
  functions as unknown as Readonly<Record<string, AnyFunction>>

/** Every function of the engine that a case may name. */
export const validationFunctions = table({
  absoluteDifference,
  applyDilution,
  chartConstants,
  chiSquareUpperProbability,
  chiSquareUpperQuantile,
  cochranTest,
  colourMatching,
  combinedUncertainty,
  compareWithLimit,
  complementaryHue,
  convertUnit,
  curveBand,
  descriptiveStatistics,
  detectionLimits,
  detectionLimitsFromBlanks,
  diagnoseSlope,
  dixonTest,
  enNumber,
  evaluateRunRules,
  ewmaChart,
  expectedConcentration,
  expectedSlope,
  fitCalibration,
  fitPolynomial,
  fUpperProbability,
  fUpperQuantile,
  generalizedEsd,
  grubbsTest,
  holdTime,
  individualsChart,
  lackOfFitTest,
  mandelTest,
  meanChart,
  methodDetectionLimit,
  molarAbsorptivity,
  normalUpperProbability,
  normalUpperQuantile,
  ownColour,
  percentile90,
  predictConcentration,
  rangeChart,
  readableRange,
  recoveryPercent,
  relativePercentDifference,
  reportValue,
  roundReported,
  runningAnnualAverage,
  slopeComparison,
  solutionColour,
  spikeRecoveryPercent,
  standardAddition,
  topDownUncertainty,
  transitionEnergy,
  tTwoSidedProbability,
  tTwoSidedQuantile,
  tUpperProbability,
  tUpperQuantile,
  zetaScore,
  zScore,
})
