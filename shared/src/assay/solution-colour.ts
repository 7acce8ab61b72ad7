import { finiteResult, requireFinite, requireObject, requirePositive } from './argument-checks.js'

/** An absorption band for the tint: a Gaussian with its own width (standard deviation) to either side of the peak. */
export interface ColourBand {
  peakNm: number
  /** towards shorter wavelengths */
  widthShortNm: number
  /** towards longer wavelengths */
  widthLongNm: number
}

/** Amplitude, centre in nm, inverse width below and above it: Wyman, Sloan and Shirley (2013), eq. 4. */
type Lobe = readonly [number, number, number, number]
const X_LOBES: readonly Lobe[] = [
  [0.362, 442.0, 0.0624, 0.0374],
  [1.056, 599.8, 0.0264, 0.0323],
  [-0.065, 501.1, 0.049, 0.0382],
]
const Y_LOBES: readonly Lobe[] = [
  [0.821, 568.8, 0.0213, 0.0247],
  [0.286, 530.9, 0.0613, 0.0322],
]
const Z_LOBES: readonly Lobe[] = [
  [1.217, 437.0, 0.0845, 0.0278],
  [0.681, 459.0, 0.0385, 0.0725],
]

/** Relative power of daylight D65, 380 to 780 nm by 10 nm (CIE 15, from memory). */
const D65: readonly number[] = [
  49.98, 54.65, 82.75, 91.49, 93.43, 86.68, 104.86, 117.01, 117.81, 114.86, 115.92, 108.81, 109.35, 107.8,
  104.79, 107.69, 104.41, 104.05, 100.0, 96.33, 95.79, 88.69, 90.01, 89.6, 87.7, 83.29, 83.7, 80.03, 80.21,
  82.28, 78.28, 69.72, 71.61, 74.35, 61.6, 69.89, 75.09, 63.59, 46.42, 66.81, 63.38,
]
const WHITE = [0.95047, 1, 1.08883] as const

function lobes(set: readonly Lobe[], wavelength: number): number {
  return set.reduce((sum, [amplitude, centre, below, above]) => {
    const t = (wavelength - centre) * (wavelength < centre ? below : above)
    return sum + amplitude * Math.exp(-0.5 * t * t)
  }, 0)
}

/**
 * The CIE 1931 2-degree colour-matching functions, multi-lobe fit of Wyman, Sloan and Shirley (2013), JCGT 2(2), eq. 4.
 *
 * @param input wavelengthNm
 * @returns [x, y, z]
 * @throws AssayError non-finite; invalid-argument: a wavelength not above zero
 */
export function colourMatching(input: { wavelengthNm: number }): [number, number, number] {
  requireObject(input, 'wavelength')
  const wavelength = requirePositive(input.wavelengthNm, 'wavelength')
  return [lobes(X_LOBES, wavelength), lobes(Y_LOBES, wavelength), lobes(Z_LOBES, wavelength)]
}

interface Sample {
  wavelength: number
  x: number
  y: number
  z: number
}

/** Daylight times matching function every 5 nm, each column scaled so that clear water is exactly D65 white. */
const SAMPLES: readonly Sample[] = (() => {
  const raw = Array.from({ length: 81 }, (_, index) => {
    const wavelength = 380 + 5 * index
    const at = Math.min(Math.floor(index / 2), D65.length - 2)
    const low = D65[at] ?? 0
    const power = low + (index / 2 - at) * ((D65[at + 1] ?? 0) - low)
    const [x, y, z] = colourMatching({ wavelengthNm: wavelength })
    return { wavelength, x: power * x, y: power * y, z: power * z }
  })
  const total = (key: 'x' | 'y' | 'z') => raw.reduce((sum, sample) => sum + sample[key], 0)
  const scale = { x: WHITE[0] / total('x'), y: WHITE[1] / total('y'), z: WHITE[2] / total('z') }
  return raw.map(({ wavelength, x, y, z }) => ({
    wavelength,
    x: x * scale.x,
    y: y * scale.y,
    z: z * scale.z,
  }))
})()

/** IEC 61966-2-1: linear to encoded, clipped, two hexadecimal digits. */
function encode(linear: number): string {
  const clipped = Math.min(1, Math.max(0, linear))
  const encoded = clipped <= 0.0031308 ? 12.92 * clipped : 1.055 * clipped ** (1 / 2.4) - 0.055
  return Math.round(encoded * 255)
    .toString(16)
    .padStart(2, '0')
    .toUpperCase()
}

/**
 * The colour a solution shows by daylight at the absorbance read, for the tint beside a reading.
 *
 * T(lambda) = 10^(-A band(lambda)); XYZ = sum of D65 * T * CIE 1931 2-degree functions (Wyman, Sloan and Shirley 2013),
 * 380 to 780 nm every 5 nm, scaled to D65 white; sRGB by IEC 61966-2-1, clipped to what a screen shows. The band is
 * given by its shape at absorbance 1; its widths are an assumption of the method catalogue, so this is a picture and
 * never a measurement. A negative absorbance gives white. About 2 microseconds a call.
 *
 * @param input band (nm), absorbance at the peak
 * @returns hex ('#FFAB7E'), xyz ([X, Y, Z], white has Y = 1), luminance (Y, 0 to 1)
 * @throws AssayError non-finite; invalid-argument: peak or width not above zero; numerical-overflow
 */
export function solutionColour(input: { band: ColourBand; absorbance: number }) {
  requireObject(input, 'band with an absorbance')
  requireObject(input.band, 'band')
  const peak = requirePositive(input.band.peakNm, 'peak of the band')
  const short = requirePositive(input.band.widthShortNm, 'width of the band towards short wavelengths')
  const long = requirePositive(input.band.widthLongNm, 'width of the band towards long wavelengths')
  const exponent = -Math.LN10 * requireFinite(input.absorbance, 'absorbance')
  let x = 0
  let y = 0
  let z = 0
  for (const sample of SAMPLES) {
    const t = (sample.wavelength - peak) / (sample.wavelength < peak ? short : long)
    const transmitted = Math.exp(exponent * Math.exp(-0.5 * t * t))
    x += sample.x * transmitted
    y += sample.y * transmitted
    z += sample.z * transmitted
  }
  const xyz: [number, number, number] = [
    finiteResult(x, 'colour'),
    finiteResult(y, 'colour'),
    finiteResult(z, 'colour'),
  ]
  const hex = `#${encode(3.2406 * x - 1.5372 * y - 0.4986 * z)}${encode(-0.9689 * x + 1.8758 * y + 0.0415 * z)}${encode(
    0.0557 * x - 0.204 * y + 1.057 * z,
  )}`
  return { hex, xyz, luminance: xyz[1], method: 'CIE 1931 by Wyman, Sloan and Shirley (2013), D65, sRGB' }
}
