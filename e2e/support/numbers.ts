/** The straight line by ordinary least squares, written out here so that the product is not compared with itself. */
export interface Line {
  slope: number
  slopeError: number
  intercept: number
  interceptError: number
  r: number
  residualStandardDeviation: number
}

export interface Point {
  concentration: number
  absorbance: number
}

/** Formulas of any textbook (e.g. Draper and Smith, Applied Regression Analysis, chapter 1). */
export function leastSquares(points: readonly Point[]): Line {
  const n = points.length
  const meanX = points.reduce((sum, each) => sum + each.concentration, 0) / n
  const meanY = points.reduce((sum, each) => sum + each.absorbance, 0) / n
  let sxx = 0
  let sxy = 0
  let syy = 0
  for (const { concentration, absorbance } of points) {
    sxx += (concentration - meanX) ** 2
    sxy += (concentration - meanX) * (absorbance - meanY)
    syy += (absorbance - meanY) ** 2
  }
  const slope = sxy / sxx
  const intercept = meanY - slope * meanX
  const residuals = points.reduce(
    (sum, each) => sum + (each.absorbance - intercept - slope * each.concentration) ** 2,
    0,
  )
  const s = Math.sqrt(residuals / (n - 2))
  return {
    slope,
    slopeError: s / Math.sqrt(sxx),
    intercept,
    interceptError: s * Math.sqrt(1 / n + meanX ** 2 / sxx),
    r: sxy / Math.sqrt(sxx * syy),
    residualStandardDeviation: s,
  }
}

/** What the law of Beer and Lambert lets expect, A per mg/L: molar absorptivity × path ÷ (1000 × molar mass). */
export function expectedSlope(given: {
  molarAbsorptivity: number
  molarMass: number
  cellPathCm: number
}): number {
  return (given.molarAbsorptivity * given.cellPathCm) / (1000 * given.molarMass)
}

/** A blank of 0.0012 and a scatter of a few ten-thousandths, the same each time: constructed. */
const SCATTER = [0.0002, -0.0003, 0.0001, -0.0001, 0.0003, -0.0002, 0.0001]

export function constructedReading(given: {
  slope: number
  concentration: number
  row: number
  replicate: number
}): string {
  const scatter = SCATTER[(given.row * 3 + given.replicate * 2) % SCATTER.length] ?? 0
  return (0.0012 + given.slope * given.concentration + scatter).toFixed(4)
}
