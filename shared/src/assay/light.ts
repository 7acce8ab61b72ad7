import { finiteResult, requireFinite, requireObject, requirePositive } from './argument-checks.js'
import { AssayError } from './assay-error.js'

/** h in J s, c in m/s, N_A in 1/mol, e in C: exact by definition (SI, 2019). */
const PLANCK = 6.62607015e-34
const LIGHT_SPEED = 299_792_458
const AVOGADRO = 6.02214076e23
const ELEMENTARY_CHARGE = 1.602176634e-19

export interface MolarAbsorptivityInput {
  /** absorbance per mg/L, in the cell that was used; negative when the line falls */
  slope: number
  /** g/mol */
  molarMass: number
  /** cm */
  pathLengthCm: number
}

/**
 * Molar absorptivity from the slope of a calibration: epsilon = slope * 1000 * M / b (Beer-Lambert law).
 *
 * In print the unit goes astray: one restatement of 3500-Cr B gives 40 000 L/(g cm), 7196A gives it per gram-atom. Here it
 * is L/(mol cm) throughout; per gram it would be larger by the molar mass, 52 for chromium.
 *
 * Source: definition (IUPAC, molar decadic absorption coefficient); check values in the project's iron set:
 * 0.19697 A per mg/L in 1 cm is 11 000 L/(mol cm).
 *
 * @returns L mol-1 cm-1
 * @throws AssayError non-finite; invalid-argument: molar mass or path not above zero; numerical-overflow
 */
export function molarAbsorptivity(input: MolarAbsorptivityInput): number {
  requireObject(input, 'slope with molar mass and path')
  const slope = requireFinite(input.slope, 'slope')
  const molarMass = requirePositive(input.molarMass, 'molar mass')
  const path = requirePositive(input.pathLengthCm, 'path length')
  return finiteResult((slope * 1000 * molarMass) / path, 'molar absorptivity')
}

export interface ExpectedSlopeInput {
  /** L mol-1 cm-1 */
  molarAbsorptivity: number
  /** g/mol */
  molarMass: number
  /** cm */
  pathLengthCm: number
}

/**
 * Slope to expect of a calibration in mg/L: epsilon * b / (1000 * M) (Beer-Lambert law).
 *
 * @returns absorbance per mg/L
 * @throws AssayError non-finite; invalid-argument: any of the three not above zero; numerical-overflow
 */
export function expectedSlope(input: ExpectedSlopeInput): number {
  requireObject(input, 'molar absorptivity with molar mass and path')
  const epsilon = requirePositive(input.molarAbsorptivity, 'molar absorptivity')
  const molarMass = requirePositive(input.molarMass, 'molar mass')
  const path = requirePositive(input.pathLengthCm, 'path length')
  return finiteResult((epsilon * path) / (1000 * molarMass), 'expected slope')
}

/**
 * Concentration to expect at an absorbance, from the slope the complex lets expect: A / slope (Beer-Lambert law, no
 * blank). For planning and for drawing a ladder; a result is read off a calibration by `predictConcentration`.
 *
 * @param input absorbance, and slope in absorbance per mg/L
 * @returns mg/L
 * @throws AssayError non-finite; invalid-argument: slope not above zero; numerical-overflow
 */
export function expectedConcentration(input: { absorbance: number; slope: number }): number {
  requireObject(input, 'absorbance with a slope')
  const absorbance = requireFinite(input.absorbance, 'absorbance')
  return finiteResult(absorbance / requirePositive(input.slope, 'slope'), 'expected concentration')
}

/**
 * Energy of the light absorbed: h c N_A / lambda for a mole, h c / (e lambda) for one photon.
 *
 * Source: exact SI constants of 2019. 510 nm is 234.56 kJ/mol.
 *
 * @param input wavelengthNm in nanometres
 * @returns kJPerMol, electronVolt
 * @throws AssayError non-finite; invalid-argument: a wavelength not above zero; numerical-overflow
 */
export function transitionEnergy(input: { wavelengthNm: number }) {
  requireObject(input, 'wavelength')
  const metres = requirePositive(input.wavelengthNm, 'wavelength') * 1e-9
  return {
    kJPerMol: finiteResult((PLANCK * LIGHT_SPEED * AVOGADRO) / metres / 1000, 'energy'),
    electronVolt: finiteResult((PLANCK * LIGHT_SPEED) / (ELEMENTARY_CHARGE * metres), 'energy'),
    method: 'h c N_A / wavelength, SI 2019 constants',
  }
}

/** From, absorbed, seen; each band reaches to the next. Textbook table, from memory. */
const HUES: readonly (readonly [number, string, string])[] = [
  [380, 'violet', 'green-yellow'],
  [420, 'violet-blue', 'yellow'],
  [440, 'blue', 'orange'],
  [470, 'blue-green', 'red'],
  [500, 'green', 'purple-red'],
  [520, 'yellow-green', 'violet'],
  [550, 'yellow', 'violet-blue'],
  [580, 'orange', 'blue'],
  [620, 'red', 'blue-green'],
]

/**
 * The hue absorbed at a wavelength and the hue left for the eye, by the usual table of complementary colours.
 *
 * A rule of thumb: it takes the band as narrow. A wide band shifts the colour, as with iron and
 * 1,10-phenanthroline (510 nm), which is orange-red; solutionColour computes it from the band.
 * A wavelength on an edge belongs to the upper band; the last one, red, is taken on to 780 nm.
 *
 * @param input wavelengthNm, 380 to 780
 * @returns absorbed and seen, in words
 * @throws AssayError non-finite; invalid-argument: outside the visible, 380 to 780 nm
 */
export function complementaryHue(input: { wavelengthNm: number }) {
  requireObject(input, 'wavelength')
  const wavelength = requireFinite(input.wavelengthNm, 'wavelength')
  const hue = wavelength <= 780 ? HUES.findLast(([from]) => wavelength >= from) : undefined
  if (hue === undefined) {
    throw new AssayError('invalid-argument', 'Only visible light has a hue: 380 to 780 nm.')
  }
  return { absorbed: hue[1], seen: hue[2], method: 'table of complementary colours (textbook, from memory)' }
}

/**
 * Whether a metal ion in water can be read by colour as it is, by a rule of thumb of the trade (common practice):
 * an ion with an empty or a full d level (titanium(IV), zinc(II)) shows no colour of its own and needs a reagent
 * that brings one. It speaks of the plain ion, not of oxo-anions such as permanganate or chromate.
 *
 * @param input dElectrons, a whole number from 0 to 10
 * @returns hasOwnColour, needsColouredReagent, explanation
 * @throws AssayError non-finite; invalid-argument: not a whole number from 0 to 10
 */
export function ownColour(input: { dElectrons: number }) {
  requireObject(input, 'ion')
  const d = requireFinite(input.dElectrons, 'number of d electrons')
  if (!Number.isInteger(d) || d < 0 || d > 10) {
    throw new AssayError('invalid-argument', 'The number of d electrons is a whole number from 0 to 10.')
  }
  const hasOwnColour = d > 0 && d < 10
  return {
    hasOwnColour,
    needsColouredReagent: !hasOwnColour,
    explanation: hasOwnColour
      ? 'The ion can show a colour of its own; a reagent makes it strong enough to measure.'
      : 'The ion shows no colour of its own; the colour must come from the reagent.',
    method: 'rule of thumb, common practice',
  }
}

/** Absorbances a photometer reads well: 0.1 to 1.0 (common practice). A method may bring its own. */
export const COMFORTABLE_ABSORBANCE = { low: 0.1, high: 1 } as const

/**
 * Where an absorbance lies against the limits handed in; both limits themselves are good.
 *
 * @param absorbance any finite number; negative is data and lies below
 * @param limits low and high in absorbance; 0.1 to 1.0 (common practice) when left out
 * @throws AssayError non-finite; invalid-argument: low not below high
 */
export function readableRange(
  absorbance: number,
  limits: { low: number; high: number } = COMFORTABLE_ABSORBANCE,
): 'below' | 'good' | 'above' {
  const value = requireFinite(absorbance, 'absorbance')
  requireObject(limits, 'limits of the readable range')
  const low = requireFinite(limits.low, 'lower limit')
  const high = requireFinite(limits.high, 'upper limit')
  if (low >= high) throw new AssayError('invalid-argument', 'The lower limit must lie below the upper one.')
  if (value < low) return 'below'
  return value > high ? 'above' : 'good'
}
