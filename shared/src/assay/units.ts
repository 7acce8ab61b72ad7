import {
  finiteResult,
  requireFinite,
  requireNotNegative,
  requireObject,
  requirePositive,
} from './argument-checks.js'
import { AssayError } from './assay-error.js'
import { Decimal } from './decimal.js'

export const CONCENTRATION_UNITS = ['mg/L', 'ug/L', 'mmol/L', 'umol/L'] as const
export type ConcentrationUnit = (typeof CONCENTRATION_UNITS)[number]

/** Amount units below the litre: how many of each make one mg or one mmol. */
const PARTS: Record<ConcentrationUnit, number> = { 'mg/L': 1, 'ug/L': 1000, 'mmol/L': 1, 'umol/L': 1000 }

function requireUnit(unit: unknown): ConcentrationUnit {
  const found = CONCENTRATION_UNITS.find((one) => one === unit)
  if (found) return found
  throw new AssayError(
    'unknown-unit',
    `The unit must be one of: ${CONCENTRATION_UNITS.join(', ')} (u stands for micro).`,
  )
}

const isAmount = (unit: ConcentrationUnit) => unit === 'mmol/L' || unit === 'umol/L'

export interface ConvertUnitInput {
  value: number
  from: ConcentrationUnit
  to: ConcentrationUnit
  /** g/mol; needed only between a mass and an amount of substance */
  molarMass?: number | undefined
}

/**
 * A concentration in another unit. Powers of ten are taken in decimal arithmetic, so that 0.0105 mg/L is
 * 10.5 ug/L and a tie stays a tie.
 *
 * Source: definition of the units; mmol/L = mg/L divided by the molar mass in g/mol (CIAAW 2021 atomic weights).
 *
 * @returns the value in the unit asked for
 * @throws AssayError unknown-unit; non-finite; invalid-argument: no molar mass where one is needed, or not above zero
 */
export function convertUnit(input: ConvertUnitInput): number {
  requireObject(input, 'conversion')
  const value = requireFinite(input.value, 'value to convert')
  const from = requireUnit(input.from)
  const to = requireUnit(input.to)
  let factor = new Decimal(PARTS[to]).div(PARTS[from])
  if (isAmount(from) !== isAmount(to)) {
    if (input.molarMass === undefined) {
      throw new AssayError('invalid-argument', 'Between mg and mmol the molar mass in g/mol is needed.')
    }
    const molarMass = requirePositive(input.molarMass, 'molar mass')
    factor = isAmount(to) ? factor.div(molarMass) : factor.mul(molarMass)
  }
  return finiteResult(new Decimal(value).mul(factor).toNumber(), 'converted value')
}

export interface ApplyDilutionInput {
  /** in the solution that was read, any unit; may be negative */
  concentration: number
  /** same unit; leave out where it is not known */
  standardError?: number | undefined
  /** final volume divided by the volume of sample taken, 1 or more */
  dilutionFactor: number
  /** relative standard uncertainty of the factor itself, from the glassware; 0 when left out */
  relativeDilutionUncertainty?: number | undefined
}

/**
 * From the solution in the cell back to the sample: concentration and standard error times the factor.
 *
 * The uncertainty of the glassware, when given, is combined in quadrature (JCGM 100:2008, 5.1.6: relative
 * uncertainties of a product): u = sqrt((f u_c)^2 + (f c u_f,rel)^2).
 *
 * @returns concentration and standardError (null when none was given) in the sample, same unit as handed in
 * @throws AssayError non-finite; invalid-argument: a factor below 1, a negative standard error; numerical-overflow
 */
export function applyDilution(input: ApplyDilutionInput) {
  requireObject(input, 'dilution')
  const concentration = requireFinite(input.concentration, 'concentration')
  const dilutionFactor = requireFinite(input.dilutionFactor, 'dilution factor')
  if (dilutionFactor < 1) {
    throw new AssayError('invalid-argument', 'The dilution factor must be 1 or more (10 for one in ten).')
  }
  const relative = requireNotNegative(input.relativeDilutionUncertainty ?? 0, 'uncertainty of the dilution')
  const diluted = finiteResult(concentration * dilutionFactor, 'concentration in the sample')
  const readingPart =
    input.standardError === undefined
      ? null
      : finiteResult(
          requireNotNegative(input.standardError, 'standard error') * dilutionFactor,
          'standard error',
        )
  const glasswarePart = finiteResult(Math.abs(diluted) * relative, 'uncertainty of the dilution')
  return {
    concentration: diluted,
    standardError:
      readingPart === null
        ? null
        : finiteResult(
            glasswarePart === 0 ? readingPart : Math.hypot(readingPart, glasswarePart),
            'standard error',
          ),
    dilutionFactor,
    method: 'concentration and standard error multiplied by the dilution factor',
  }
}
