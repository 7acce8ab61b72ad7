import { AssayError } from './assay-error.js'
import { readCurve, requireSpread, type CurvePoint } from './curve-points.js'
import { fUpperProbability, fUpperQuantile } from './distributions.js'
import { describeSample, largestOf } from './descriptive-statistics.js'
import { exactSum } from './double-double.js'
import { gate } from './finite-gate.js'
import { solveLeastSquares } from './least-squares.js'
import { ENGINE_VERSION } from './version.js'

export type LinearityVerdict = 'linear' | 'not-linear'

export interface MandelTest {
  testValue: number
  probability: number
  linearResidualSd: number
  quadraticResidualSd: number
  degreesOfFreedom: [number, number]
  criticalValue95: number
  criticalValue99: number
  verdict95: LinearityVerdict
  verdict99: LinearityVerdict
  engineVersion: string
  method: string
}

/** Readings carry no more than 52 bits: no standard deviation below that is believed, so that a ratio stays finite. */
function roundingOf(y: readonly number[]): number {
  return 2 ** -52 * largestOf(y)
}

/**
 * Mandel's fitting test: is a parabola significantly better than a line?
 *
 * Test value ((n-2) s1^2 - (n-3) s2^2) / s2^2 against F(1, n-3), s1 and s2 the residual standard deviations of line
 * and parabola. The verdict is 'not-linear' where the test value exceeds the critical value; ISO 8466-1 decides at
 * 99 %. Points on an exact line give 0; an s2 below the rounding of the readings counts as that rounding.
 *
 * Sources: ISO 8466-1:1990 section 4.1.3; Mandel, The Statistical Analysis of Experimental Data (1964); IUPAC,
 * Guidelines for calibration in analytical chemistry (1998).
 *
 * @param points at least 4 readings at 3 levels; x and y or concentration and absorbance
 * @throws AssayError too-few-points, all-concentrations-equal, non-finite, negative-concentration
 */
export function mandelTest(points: readonly CurvePoint[]): MandelTest {
  const { x, y } = readCurve(points)
  requireSpread({ x, degree: 2, throughOrigin: false })
  const s1 = solveLeastSquares({ x, y, degree: 1, throughOrigin: false }).residualStandardDeviation
  const s2 = solveLeastSquares({ x, y, degree: 2, throughOrigin: false }).residualStandardDeviation
  const df = x.length - 3
  const rounding = roundingOf(y)
  const divisor = Math.max(s2, rounding)
  const isExactLine = s1 <= rounding
  const gain = isExactLine
    ? 0
    : (df + 1) * (s1 / divisor) * (s1 / divisor) - df * (s2 / divisor) * (s2 / divisor)
  const testValue = Math.max(0, gain)
  const criticalValue95 = fUpperQuantile(0.05, 1, df)
  const criticalValue99 = fUpperQuantile(0.01, 1, df)
  return gate({
    testValue,
    probability: fUpperProbability(testValue, 1, df),
    linearResidualSd: s1,
    quadraticResidualSd: s2,
    degreesOfFreedom: [1, df],
    criticalValue95,
    criticalValue99,
    verdict95: testValue > criticalValue95 ? 'not-linear' : 'linear',
    verdict99: testValue > criticalValue99 ? 'not-linear' : 'linear',
    engineVersion: ENGINE_VERSION,
    method: "Mandel's fitting test (ISO 8466-1:1990)",
  })
}

export interface LackOfFitTest {
  fValue: number
  probability: number
  degreesOfFreedom: [number, number]
  pureErrorSd: number
  lackOfFitSumOfSquares: number
  pureErrorSumOfSquares: number
  criticalValue95: number
  verdict95: 'adequate' | 'lack-of-fit'
  engineVersion: string
  method: string
}

/**
 * Lack-of-fit test: do the means of the replicates lie further from the curve than the replicates scatter?
 *
 * F = (SS lack of fit / (levels - p)) / (SS pure error / (n - levels)), p parameters of an unweighted polynomial.
 * Levels are equal concentrations; replicate numbers may differ. The two sums of squares are each computed directly.
 *
 * Sources: Draper and Smith, Applied Regression Analysis, 2.1; Massart et al. Part A, 8.2.2.2; IUPAC (1998).
 *
 * @param points readings with replicates; x and y or concentration and absorbance
 * @param degree 1 when left out
 * @throws AssayError too-few-points (no replicates, or no more levels than parameters), no-spread (all replicates
 *         agree to the last digit, so there is no pure error to compare with), and as `mandelTest`
 */
export function lackOfFitTest(points: readonly CurvePoint[], degree = 1): LackOfFitTest {
  if (!Number.isInteger(degree) || degree < 1 || degree > 12) {
    throw new AssayError('invalid-argument', 'The degree must be a whole number from 1 to 12.')
  }
  const { x, y } = readCurve(points)
  requireSpread({ x, degree, throughOrigin: false })
  const levels = new Map<number, number[]>()
  x.forEach((value, i) => levels.set(value, [...(levels.get(value) ?? []), i]))
  const dfLack = levels.size - degree - 1
  const dfPure = x.length - levels.size
  if (dfLack < 1) {
    throw new AssayError(
      'too-few-points',
      `A lack-of-fit test needs at least ${degree + 2} different concentrations.`,
    )
  }
  if (dfPure < 1) {
    throw new AssayError(
      'too-few-points',
      'A lack-of-fit test needs replicate readings of at least one standard.',
    )
  }
  const { residuals } = solveLeastSquares({ x, y, degree, throughOrigin: false })
  const lack: number[] = []
  const pure: number[] = []
  const scale = largestOf(y) || 1
  for (const indices of levels.values()) {
    const sample = describeSample(indices.map((i) => y[i] ?? 0))
    const meanResidual = exactSum(indices.map((i) => residuals[i] ?? 0)) / sample.n / scale
    lack.push(sample.n * meanResidual * meanResidual)
    const deviation = sample.standardDeviation / scale
    pure.push((sample.n - 1) * deviation * deviation)
  }
  const lackSum = exactSum(lack)
  const pureSum = exactSum(pure)
  const pureErrorSd = Math.sqrt(pureSum / dfPure)
  if (!(pureErrorSd > 2 ** -52)) {
    throw new AssayError(
      'no-spread',
      'All replicates agree exactly: there is no spread to compare the curve with.',
    )
  }
  const fValue = lackSum / dfLack / (pureSum / dfPure)
  const criticalValue95 = fUpperQuantile(0.05, dfLack, dfPure)
  return gate({
    fValue,
    probability: fUpperProbability(fValue, dfLack, dfPure),
    degreesOfFreedom: [dfLack, dfPure],
    pureErrorSd: pureErrorSd * scale,
    lackOfFitSumOfSquares: lackSum * scale * scale,
    pureErrorSumOfSquares: pureSum * scale * scale,
    criticalValue95,
    verdict95: fValue > criticalValue95 ? 'lack-of-fit' : 'adequate',
    engineVersion: ENGINE_VERSION,
    method: 'Lack-of-fit F test (Draper and Smith, section 2.1)',
  })
}
