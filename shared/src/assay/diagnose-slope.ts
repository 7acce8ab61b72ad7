import { finiteResult, requireFinite, requireObject, requirePositive } from './argument-checks.js'
import { expectedSlope, type ExpectedSlopeInput } from './light.js'

export type SlopeCause = 'path-length' | 'dilution' | 'wavelength' | 'reagent' | 'unit'

export interface DiagnoseSlopeInput {
  /** absorbance per mg/L, as fitted */
  slope: number
  expected: ExpectedSlopeInput
  /** how far from the expected slope is still as expected, in percent */
  tolerancePercent: number
}

interface Clue {
  ratio: number
  likely: SlopeCause[]
  explanation: string
}

function clues(molarMass: number): Clue[] {
  const cell = (times: number): Clue[] => [
    {
      ratio: times,
      likely: ['path-length', 'dilution'],
      explanation: `The slope is about ${times} times the expected one: was a cell ${times} times as long used, or were the standards ${times} times as strong as entered?`,
    },
    {
      ratio: 1 / times,
      likely: ['path-length', 'dilution'],
      explanation: `The slope is about 1/${times} of the expected one: was a cell ${times} times shorter used than entered, or were the standards diluted ${times} times more?`,
    },
  ]
  return [
    ...cell(2),
    ...cell(5),
    ...cell(10),
    {
      ratio: 1000,
      likely: ['unit'],
      explanation: 'The slope is about 1000 times the expected one: were the concentrations entered in g/L?',
    },
    {
      ratio: 1 / 1000,
      likely: ['unit'],
      explanation: 'The slope is about 1/1000 of the expected one: were the concentrations entered in µg/L?',
    },
    {
      ratio: molarMass,
      likely: ['unit'],
      explanation: 'The slope is off by the molar mass: were the concentrations entered in mmol/L?',
    },
    {
      ratio: molarMass / 1000,
      likely: ['unit'],
      explanation: 'The slope is off by the molar mass: were the concentrations entered in µmol/L?',
    },
  ]
}

/**
 * Compares a fitted slope with the one molar absorptivity, molar mass and path let expect, and names what usually
 * lies behind the difference.
 *
 * A ratio near 1/2, 1/5, 1/10, 2, 5 or 10 points to the cell or a dilution, 1000, 1/1000 or the molar mass to the
 * unit. Near means within the tolerance, at least 5 %, and the nearest one wins. Otherwise a low slope points to the
 * wavelength or the reagent, a high one to the standards or the reagent. Common practice, no standard's rule.
 *
 * @returns ratio (fitted to expected), verdict, likely causes with the likeliest first, explanation for a technician,
 *          the expected slope
 * @throws AssayError non-finite; invalid-argument: tolerance or an expected quantity not above zero
 */
export function diagnoseSlope(input: DiagnoseSlopeInput) {
  requireObject(input, 'slope to diagnose')
  const slope = requireFinite(input.slope, 'slope')
  const expected = expectedSlope(input.expected)
  const tolerance = requirePositive(input.tolerancePercent, 'tolerance')
  const ratio = finiteResult(slope / expected, 'ratio of the slopes')
  const base = {
    ratio,
    expectedSlope: expected,
    method: 'Beer-Lambert slope, common practice for its causes',
  }
  const percent = (value: number) => Math.abs((value - 1) * 100).toFixed(Math.abs(value - 1) < 0.1 ? 1 : 0)
  // a hair of slack, so that a slope exactly at the tolerance is inside whatever its last bit
  if (Math.abs(ratio - 1) * 100 <= tolerance * (1 + 1e-12)) {
    return {
      ...base,
      verdict: 'as-expected' as const,
      likely: [] as SlopeCause[],
      explanation: `The slope is within ${tolerance} % of the expected one (off by ${percent(ratio)} %).`,
    }
  }
  const verdict: 'low' | 'high' = ratio < 1 ? 'low' : 'high'
  if (ratio <= 0) {
    return {
      ...base,
      verdict,
      likely: ['reagent', 'wavelength'] as SlopeCause[],
      explanation:
        'The absorbance does not rise with the concentration: check reagent, wavelength and the order of the standards.',
    }
  }
  const off = (clue: Clue) => Math.abs(ratio / clue.ratio - 1)
  const nearest = clues(input.expected.molarMass)
    .filter((clue) => off(clue) * 100 <= Math.max(5, tolerance) * (1 + 1e-12))
    .sort((a, b) => off(a) - off(b))[0]
  if (nearest) return { ...base, verdict, likely: nearest.likely, explanation: nearest.explanation }
  return verdict === 'low'
    ? {
        ...base,
        verdict,
        likely: ['wavelength', 'reagent', 'dilution'] as SlopeCause[],
        explanation: `The slope is ${percent(ratio)} % below the expected one: check the wavelength, the age and amount of the reagent, and the standards.`,
      }
    : {
        ...base,
        verdict,
        likely: ['dilution', 'reagent', 'path-length'] as SlopeCause[],
        explanation: `The slope is ${percent(ratio)} % above the expected one: check how the standards were made, the reagent for contamination, and the cell.`,
      }
}
