import { describe, expect, it } from 'vitest'
import {
  complementaryHue,
  diagnoseSlope,
  expectedSlope,
  molarAbsorptivity,
  readableRange,
  solutionColour,
  transitionEnergy,
} from '../assay/index.js'
import { readMethods, readTyped } from './reference.test-support.js'

/** Hue of a colour on the wheel, degrees. */
function hueOf(hex: string): number {
  const [r, g, b] = [1, 3, 5].map((at) => Number.parseInt(hex.slice(at, at + 2), 16) / 255) as [
    number,
    number,
    number,
  ]
  const high = Math.max(r, g, b)
  const span = high - Math.min(r, g, b)
  if (span === 0) return Number.NaN
  const sixth = high === r ? ((g - b) / span + 6) % 6 : high === g ? (b - r) / span + 2 : (r - g) / span + 4
  return sixth * 60
}

/** Where a colour word lies on the wheel, and what the complement table calls its neighbourhood (common practice). */
const WORDS: Record<string, { hue: [number, number]; seen: string[] }> = {
  yellow: { hue: [42, 62], seen: ['yellow', 'orange'] },
  orange: { hue: [26, 48], seen: ['orange', 'red'] },
  'orange-red': { hue: [8, 30], seen: ['red', 'purple-red'] },
  'red-violet': { hue: [300, 325], seen: ['violet', 'purple-red'] },
  purple: { hue: [300, 325], seen: ['violet', 'purple-red'] },
  magenta: { hue: [285, 312], seen: ['violet-blue', 'violet'] },
}

const molarMasses = new Map(readTyped('analytes.json').map((row) => [row.code, row.molarMass]))

describe.each(readMethods().map((method) => [method.code, method] as const))('%s', (_code, method) => {
  const molarMass = molarMasses.get(method.analyte) ?? 0
  const epsilon = method.molarAbsorptivity.value

  it('reads at the peak of its band', () => {
    expect(method.band.peakNm).toBe(method.wavelengthNm)
  })

  it('states the energy of its wavelength', () => {
    const { kJPerMol } = transitionEnergy({ wavelengthNm: method.wavelengthNm })
    expect(Math.abs(kJPerMol - method.transitionEnergyKJPerMol.value)).toBeLessThanOrEqual(0.005)
  })

  it('states the slope its molar absorptivity lets expect', () => {
    const slope = expectedSlope({ molarAbsorptivity: epsilon, molarMass, pathLengthCm: 1 })
    expect(Math.abs(slope / method.slopeInOneCm.value - 1)).toBeLessThan(5e-5)
    const back = molarAbsorptivity({ slope: method.slopeInOneCm.value, molarMass, pathLengthCm: 1 })
    expect(Math.abs(back / epsilon - 1)).toBeLessThan(5e-5)
    expect(
      diagnoseSlope({
        slope: method.slopeInOneCm.value,
        expected: { molarAbsorptivity: epsilon, molarMass, pathLengthCm: 1 },
        tolerancePercent: method.slopeTolerancePercent.value,
      }).verdict,
    ).toBe('as-expected')
  })

  it('shows the colour it names: the tint by its band, and the complement of its wavelength', () => {
    const word = WORDS[method.colour]
    expect(word, method.colour).toBeDefined()
    for (const absorbance of [0.3, 0.5, 1]) {
      const hue = hueOf(solutionColour({ band: method.band, absorbance }).hex)
      expect(hue, `${method.colour} at ${absorbance}`).toBeGreaterThanOrEqual(word?.hue[0] ?? 0)
      expect(hue, `${method.colour} at ${absorbance}`).toBeLessThanOrEqual(word?.hue[1] ?? 0)
    }
    expect(word?.seen).toContain(complementaryHue({ wavelengthNm: method.wavelengthNm }).seen)
  })

  it('gives each cell a range whose absorbances can be read', () => {
    for (const cell of method.cells) {
      const perMg = expectedSlope({ molarAbsorptivity: epsilon, molarMass, pathLengthCm: cell.pathCm })
      const limits = { low: method.absorbanceLimits.low * 0.8, high: method.absorbanceLimits.high }
      // the published 15 cm row for manganese starts at 0.03 A
      if (!(method.analyte === 'Mn' && cell.pathCm === 15)) {
        expect(readableRange(cell.low * perMg, limits), `${cell.pathCm} cm, low`).toBe('good')
      }
      expect(readableRange(cell.high * perMg, limits), `${cell.pathCm} cm, high`).toBe('good')
    }
  })

  it('can see its reporting limit in its longest cell', () => {
    const longest = Math.max(...method.cells.map((cell) => cell.pathCm))
    const perMg = expectedSlope({ molarAbsorptivity: epsilon, molarMass, pathLengthCm: longest })
    // twice the absorbance of 98 % transmittance, the least that Standard Methods 3500-Mn B counts as seen
    expect(method.reportingLimit.value * perMg).toBeGreaterThan(2 * 0.00877)
  })

  it('lets the colour develop before it fades', () => {
    expect(method.development.minMinutes).toBeLessThan(method.development.maxMinutes)
  })
})

describe('the catalogue', () => {
  it('holds the four methods of the laboratory and the optional ones', () => {
    const standard = readMethods().filter((method) => method.availability === 'standard')
    expect(standard.map((method) => [method.analyte, method.wavelengthNm]).sort()).toEqual([
      ['Cr', 540],
      ['Cu', 484],
      ['Fe', 510],
      ['Mn', 525],
    ])
  })

  it('warns of what each reagent can do', () => {
    const text = (code: string) => {
      const method = readMethods().find((one) => one.code === code)
      return JSON.stringify(method?.cautions)
    }
    expect(text('cr6-diphenylcarbazide')).toMatch(/hexavalent chromium/)
    expect(text('cr6-diphenylcarbazide')).toMatch(/azide/)
    expect(text('mn-persulfate')).toMatch(/mercury.*silver/)
    expect(text('cu-neocuproine')).toMatch(/chloroform/)
  })
})
