import { requireFinite, requireNotNegative, requireObject, requirePositive } from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { gate } from './finite-gate.js'
import { rootOfSquares } from './root-of-squares.js'
import { ENGINE_VERSION } from './version.js'

export interface ProficiencyScore {
  score: number
  verdict: 'satisfactory' | 'questionable' | 'unsatisfactory'
  engineVersion: string
  method: string
}

function verdictOf(score: number, isEn: boolean): ProficiencyScore['verdict'] {
  const size = Math.abs(score)
  if (isEn) return size <= 1 ? 'satisfactory' : 'unsatisfactory'
  if (size <= 2) return 'satisfactory'
  return size < 3 ? 'questionable' : 'unsatisfactory'
}

function scoreOf(given: {
  value: number
  assigned: number
  divisor: number
  method: string
  isEn?: boolean
}) {
  const { value, assigned, divisor, method } = given
  if (!(divisor > 0)) throw new AssayError('no-spread', 'Both uncertainties are zero: there is no score.')
  const score = (value - assigned) / divisor
  return gate<ProficiencyScore>({
    score,
    verdict: verdictOf(score, given.isEn === true),
    engineVersion: ENGINE_VERSION,
    method,
  })
}

/**
 * z score of a proficiency test: (value - assigned) / sigma, sigma the standard deviation for proficiency assessment.
 * Up to 2 satisfactory, from 3 unsatisfactory. Source: ISO 13528:2022 section 9.4.
 * @throws AssayError invalid-argument (sigma not above 0), non-finite
 */
export function zScore(input: { value: number; assigned: number; sigma: number }): ProficiencyScore {
  requireObject(input, 'z score')
  return scoreOf({
    value: requireFinite(input.value, 'result'),
    assigned: requireFinite(input.assigned, 'assigned value'),
    divisor: requirePositive(input.sigma, 'standard deviation for proficiency assessment'),
    method: 'z score (ISO 13528:2022, 9.4)',
  })
}

/**
 * zeta score: (value - assigned) / sqrt(u^2 + u_assigned^2), standard uncertainties; judged as z.
 * Source: ISO 13528:2022 section 9.6.
 * @throws AssayError no-spread (both uncertainties zero), invalid-argument (a negative one), non-finite
 */
export function zetaScore(input: {
  value: number
  assigned: number
  /** standard uncertainty of the laboratory's result */
  uValue: number
  /** standard uncertainty of the assigned value */
  uAssigned: number
}): ProficiencyScore {
  requireObject(input, 'zeta score')
  return scoreOf({
    value: requireFinite(input.value, 'result'),
    assigned: requireFinite(input.assigned, 'assigned value'),
    divisor: rootOfSquares([
      requireNotNegative(input.uValue, 'uncertainty of the result'),
      requireNotNegative(input.uAssigned, 'uncertainty of the assigned value'),
    ]),
    method: 'zeta score (ISO 13528:2022, 9.6)',
  })
}

/**
 * E_n number: (value - assigned) / sqrt(U^2 + U_assigned^2), expanded uncertainties (k = 2). Up to 1 satisfactory.
 * Source: ISO 13528:2022 section 9.7; ISO/IEC 17043.
 * @throws AssayError no-spread (both uncertainties zero), invalid-argument (a negative one), non-finite
 */
export function enNumber(input: {
  value: number
  assigned: number
  /** expanded uncertainty of the laboratory's result */
  expandedValue: number
  /** expanded uncertainty of the assigned value */
  expandedAssigned: number
}): ProficiencyScore {
  requireObject(input, 'En number')
  return scoreOf({
    value: requireFinite(input.value, 'result'),
    assigned: requireFinite(input.assigned, 'assigned value'),
    divisor: rootOfSquares([
      requireNotNegative(input.expandedValue, 'expanded uncertainty of the result'),
      requireNotNegative(input.expandedAssigned, 'expanded uncertainty of the assigned value'),
    ]),
    isEn: true,
    method: 'En number (ISO 13528:2022, 9.7)',
  })
}
