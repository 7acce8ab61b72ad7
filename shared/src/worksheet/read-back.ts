import {
  AssayError,
  describeSample,
  predictConcentration,
  recoveryPercent,
  type CalibrationFit,
} from '../assay/index.js'

export interface StandardToReadBack {
  /** mg/L */
  concentration: number
  absorbances: readonly number[]
}
export interface StandardReadBack {
  /** of the replicates */
  meanAbsorbance: number | null
  /** mg/L, the replicates read off the curve together */
  concentration: number | null
  /** percent away from the nominal concentration; null for a blank */
  errorPercent: number | null
}

/**
 * Each standard read back from the curve as if it were a sample, its replicates together: the same for those in the fit, those left
 * out and those of the second source. Composes functions of the engine; what cannot be read back is null.
 */
export function readBackStandards(
  fit: CalibrationFit | null,
  standards: readonly StandardToReadBack[],
): StandardReadBack[] {
  return standards.map(({ concentration, absorbances }) => {
    if (absorbances.length === 0) return { meanAbsorbance: null, concentration: null, errorPercent: null }
    const meanAbsorbance = describeSample(absorbances).mean
    const found = fit ? readOff(fit, absorbances) : null
    const hasError = found !== null && concentration > 0
    const errorPercent = hasError ? recoveryPercent({ found, expected: concentration }) - 100 : null
    return { meanAbsorbance, concentration: found, errorPercent }
  })
}

function readOff(fit: CalibrationFit, absorbances: readonly number[]): number | null {
  try {
    return predictConcentration(fit, { absorbances: [...absorbances] }).concentration
  } catch (error) {
    if (error instanceof AssayError) return null
    throw error
  }
}
