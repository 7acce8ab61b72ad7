import fc from 'fast-check'
import { linearRegression } from 'simple-statistics'
import { describe, expect, it } from 'vitest'
import { AssayError } from './assay-error.js'
import { detectionLimits } from './detection-limits.js'
import { fitCalibration, type CalibrationFit, type CalibrationModel } from './fit-calibration.js'
import { fitPolynomial } from './fit-polynomial.js'
import { predictConcentration } from './predict-concentration.js'

/* Properties need no published number: each follows from what the functions promise. */

const LEVELS = [0, 0.5, 1, 2, 3.5, 5]
const noise = fc.array(fc.double({ min: -0.02, max: 0.02, noNaN: true }), { minLength: 6, maxLength: 6 })
const slope = fc.double({ min: 0.05, max: 2, noNaN: true })
const intercept = fc.double({ min: -0.1, max: 0.1, noNaN: true })

function pointsOf(given: { a: number; b: number; noise: readonly number[]; unit?: number }) {
  return LEVELS.map((level, i) => ({
    concentration: level * (given.unit ?? 1),
    absorbance: given.a + given.b * level + (given.noise[i] ?? 0),
  }))
}

function near(got: number, expected: number, relative: number, size = 0): void {
  expect(Math.abs(got - expected), `${got} for ${expected}`).toBeLessThanOrEqual(
    relative * Math.max(Math.abs(expected), size),
  )
}

describe('fits', () => {
  it('recover a line and a parabola through exact points', () => {
    const whole = fc.integer({ min: -1000, max: 1000 })
    fc.assert(
      fc.property(whole, whole, whole, (a, b, c) => {
        // whole numbers are exact in a double, so the answer must be too
        const points = [0, 1, 3, 4, 7, 12].map((x) => ({ x, y: a + b * x + c * x * x }))
        const fit = fitPolynomial(points, 2)
        ;[a, b, c].forEach((value, i) => near(fit.coefficients[i] ?? NaN, value, 1e-15, 1e-6))
        expect(fit.residualStandardDeviation).toBeLessThan(1e-15)
      }),
    )
  })

  it('scale inversely with the unit of the concentrations', () => {
    fc.assert(
      fc.property(
        intercept,
        slope,
        noise,
        fc.double({ min: 1e-6, max: 1e6, noNaN: true }),
        (a, b, r, unit) => {
          const one = fitCalibration({ points: pointsOf({ a, b, noise: r }), model: 'linear' })
          const other = fitCalibration({ points: pointsOf({ a, b, noise: r, unit }), model: 'linear' })
          near((other.coefficients[1] ?? 0) * unit, one.coefficients[1] ?? 0, 1e-12, 0.01)
          near((other.standardErrors[1] ?? 0) * unit, one.standardErrors[1] ?? 0, 1e-11, 1e-4)
          near(other.residualStandardDeviation, one.residualStandardDeviation, 1e-11, 1e-4)
        },
      ),
    )
  })

  it('give the same digits for absorbances of 1e-4 and counts of 1e7', () => {
    fc.assert(
      fc.property(intercept, slope, noise, fc.integer({ min: -40, max: 40 }), (a, b, r, power) => {
        const points = pointsOf({ a, b, noise: r })
        const scaled = points.map((point) => ({ ...point, absorbance: point.absorbance * 2 ** power }))
        const one = fitCalibration({ points, model: 'quadratic' })
        const other = fitCalibration({ points: scaled, model: 'quadratic' })
        expect(other.coefficients).toEqual(one.coefficients.map((value) => value * 2 ** power))
        expect(other.standardErrors).toEqual(one.standardErrors.map((value) => value * 2 ** power))
        expect(other.rSquared).toBe(one.rSquared)
      }),
    )
  })

  it('do not depend on the order of the points', () => {
    const order = fc.shuffledSubarray([0, 1, 2, 3, 4, 5], { minLength: 6 })
    const models = fc.constantFrom<CalibrationModel>('linear', 'linear-through-origin', 'quadratic')
    fc.assert(
      fc.property(fc.tuple(intercept, slope, noise), order, models, ([a, b, r], shuffled, model) => {
        const points = pointsOf({ a, b, noise: r })
        const mixed = shuffled.map((i) => points[i]).filter((point) => point !== undefined)
        const weighting = 'inverse-concentration'
        const one = fitCalibration({ points, model, weighting })
        const other = fitCalibration({ points: mixed, model, weighting })
        one.coefficients.forEach((value, i) => near(other.coefficients[i] ?? 0, value, 1e-13, 1e-2))
        one.standardErrors.forEach((value, i) => near(other.standardErrors[i] ?? 0, value, 1e-11, 1e-4))
      }),
    )
  })

  it('are the same line, weighted equally or as a polynomial', () => {
    fc.assert(
      fc.property(
        intercept,
        slope,
        noise,
        fc.double({ min: 0.01, max: 100, noNaN: true }),
        (a, b, r, weight) => {
          const points = pointsOf({ a, b, noise: r })
          const plain = fitCalibration({ points, model: 'linear' })
          const given = fitCalibration({
            points: points.map((point) => ({ ...point, weight })),
            model: 'linear',
            weighting: 'given',
          })
          const polynomial = fitPolynomial(
            points.map((point) => ({ x: point.concentration, y: point.absorbance })),
            1,
          )
          expect(polynomial.coefficients).toEqual(plain.coefficients)
          plain.coefficients.forEach((value, i) => near(given.coefficients[i] ?? 0, value, 1e-13, 1e-2))
        },
      ),
    )
  })

  it('scale the weights of a fit to sum to n', () => {
    const fit = fitCalibration({
      points: pointsOf({ a: 0, b: 1, noise: [] }).map((p, i) => ({
        ...p,
        absorbance: p.absorbance + (i % 2) / 100,
      })),
      model: 'linear',
      weighting: 'inverse-concentration-squared',
    })
    near(
      fit.readBack.reduce((sum, row) => sum + row.weight, 0),
      6,
      1e-14,
    )
    // the zero standard takes the weight of the lowest above zero
    expect(fit.readBack[0]?.weight).toBe(fit.readBack[1]?.weight)
  })
})

describe('ill-conditioned lines', () => {
  const x = [0, 1, 4, 9, 16, 25, 36, 49, 64, 81].map((value) => 1e9 + value)
  const y = x.map((value, i) => 7 + 3 * value + ([1, -2, 0, 3, -1, 2, -3, 1, 0, -1][i] ?? 0))

  /** The exact least-squares line of whole numbers, in whole numbers. */
  function exactLine() {
    const bx = x.map(BigInt)
    const by = y.map(BigInt)
    const n = BigInt(x.length)
    const sum = (values: bigint[]) => values.reduce((total, value) => total + value, 0n)
    const sx = sum(bx)
    const sy = sum(by)
    const sxx = sum(bx.map((value) => value * value))
    const sxy = sum(bx.map((value, i) => value * (by[i] ?? 0n)))
    const under = n * sxx - sx * sx
    const ratio = (over: bigint) => Number((over * 10n ** 25n) / under) / 1e25
    return { slope: ratio(n * sxy - sx * sy), intercept: ratio(sxx * sy - sx * sxy) }
  }

  it('keep their digits, more of them than simple-statistics keeps', () => {
    const exact = exactLine()
    const fit = fitPolynomial(
      x.map((value, i) => ({ x: value, y: y[i] ?? 0 })),
      1,
    )
    const simple = linearRegression(x.map((value, i) => [value, y[i] ?? 0]))
    const errorOf = (got: number | undefined, expected: number) => Math.abs((got ?? 0) / expected - 1)
    expect(errorOf(fit.coefficients[1], exact.slope)).toBeLessThan(1e-15)
    expect(errorOf(fit.coefficients[0], exact.intercept)).toBeLessThan(1e-15)
    expect(errorOf(fit.coefficients[0], exact.intercept)).toBeLessThanOrEqual(
      errorOf(simple.b, exact.intercept),
    )
    expect(errorOf(fit.coefficients[1], exact.slope)).toBeLessThanOrEqual(errorOf(simple.m, exact.slope))
  })
})

describe('inverse prediction', () => {
  it('gives a standard back after an exact fit', () => {
    fc.assert(
      fc.property(
        intercept,
        slope,
        fc.constantFrom('linear' as const, 'quadratic' as const),
        (a, b, model) => {
          const points = pointsOf({ a, b, noise: [] })
          const fit = fitCalibration({ points, model })
          for (const { concentration, absorbance } of points) {
            near(
              predictConcentration(fit, { absorbances: [absorbance] }).concentration,
              concentration,
              1e-9,
              5,
            )
          }
        },
      ),
    )
  })

  it('gives bit for bit the same from a stored fit', () => {
    fc.assert(
      fc.property(intercept, slope, noise, (a, b, r) => {
        const points = pointsOf({ a, b, noise: r })
        const fit = fitCalibration({ points, model: 'linear', weighting: 'inverse-concentration' })
        const stored = JSON.parse(JSON.stringify(fit)) as CalibrationFit
        expect(stored).toEqual(fit)
        const absorbances = [a + b * 1.7]
        const compute = (one: CalibrationFit) => {
          try {
            return predictConcentration(one, { absorbances })
          } catch (error) {
            return error instanceof AssayError ? error.code : error
          }
        }
        expect(compute(stored)).toEqual(compute(fit))
      }),
    )
  })

  it('puts the concentration inside both intervals, and Fieller limits meet the plain ones for a tight line', () => {
    fc.assert(
      fc.property(intercept, fc.double({ min: 0.2, max: 2, noNaN: true }), noise, (a, b, r) => {
        const small = r.map((value) => value * 0.01)
        const fit = fitCalibration({ points: pointsOf({ a, b, noise: small }), model: 'linear' })
        const found = predictConcentration(fit, { absorbances: [a + 2 * b] })
        expect(found.fieller).not.toBeNull()
        expect(found.interval.low).toBeLessThanOrEqual(found.concentration)
        expect(found.interval.high).toBeGreaterThanOrEqual(found.concentration)
        const width = found.interval.high - found.interval.low
        near(found.fieller?.low ?? NaN, found.interval.low, 0.02, width)
        near(found.fieller?.high ?? NaN, found.interval.high, 0.02, width)
      }),
    )
  })

  it('inverts a nearly straight parabola without losing digits', () => {
    // y = x + e x^2 with whole e and x scaled so that every number is exact
    for (const e of [2 ** -20, 2 ** -30, 2 ** -40, -(2 ** -30)]) {
      const points = [0, 1, 2, 4, 8, 16].map((c) => ({ concentration: c, absorbance: c + e * c * c }))
      const fit = fitCalibration({ points, model: 'quadratic' })
      for (const { concentration, absorbance } of points.slice(1)) {
        near(predictConcentration(fit, { absorbances: [absorbance] }).concentration, concentration, 1e-15)
      }
    }
  })

  it('narrows with more readings and widens with more confidence', () => {
    const fit = fitCalibration({
      points: pointsOf({ a: 0, b: 1, noise: [0.01, -0.01, 0, 0.02, -0.01, 0] }),
      model: 'linear',
    })
    const width = (absorbances: number[], confidence: number) => {
      const { low, high } = predictConcentration(fit, { absorbances, confidence }).interval
      return high - low
    }
    expect(width([1, 1, 1], 0.95)).toBeLessThan(width([1], 0.95))
    expect(width([1], 0.99)).toBeGreaterThan(width([1], 0.95))
  })

  it('returns a negative concentration as it is', () => {
    const fit = fitCalibration({ points: pointsOf({ a: 0.01, b: 0.2, noise: [0.001] }), model: 'linear' })
    const found = predictConcentration(fit, { absorbances: [-0.02] })
    expect(found.concentration).toBeLessThan(0)
    expect(found.outsideRange).toBe('below')
  })

  it('refuses where the curve turns inside its range', () => {
    const points = [0, 1, 2, 3, 4, 5].map((c) => ({ concentration: c, absorbance: 0.5 * c - 0.07 * c * c }))
    const fit = fitCalibration({ points, model: 'quadratic' })
    expect(() => predictConcentration(fit, { absorbances: [0.8] })).toThrowError(/two concentrations/)
  })

  it('follows the weight model at the concentration found', () => {
    const points = pointsOf({ a: 0, b: 1, noise: [0.001, 0.002, -0.003, 0.01, -0.01, 0.02] })
    const fit = fitCalibration({ points, model: 'linear', weighting: 'inverse-concentration' })
    const free = predictConcentration(fit, { absorbances: [2] })
    const given = predictConcentration(fit, { absorbances: [2], responseWeight: 1 / free.concentration })
    near(given.standardError, free.standardError, 1e-14)
  })
})

describe('limits', () => {
  it('rise from critical value over detection limit to quantification limit, and fall with more readings', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.5, max: 2, noNaN: true }), noise, (b, r) => {
        fc.pre(r.some((value) => Math.abs(value) > 1e-6))
        const fit = fitCalibration({ points: pointsOf({ a: 0, b, noise: r }), model: 'linear' })
        const one = detectionLimits(fit)
        const five = detectionLimits(fit, { readings: 5 })
        expect(one.criticalValue).toBeLessThanOrEqual(one.detectionLimit)
        expect(one.detectionLimit).toBeLessThanOrEqual(one.quantificationLimit)
        expect(five.criticalValue).toBeLessThanOrEqual(one.criticalValue)
      }),
    )
  })

  it('a straight parabola has nearly the limits of the line', () => {
    const r = [0.002, -0.004, 0.003, 0.001, -0.003, 0.001]
    const points = pointsOf({ a: 0, b: 1, noise: r })
    const line = detectionLimits(fitCalibration({ points, model: 'linear' }))
    const curve = detectionLimits(fitCalibration({ points, model: 'quadratic' }))
    expect(curve.quantificationLimit / line.quantificationLimit).toBeGreaterThan(0.5)
    expect(curve.quantificationLimit / line.quantificationLimit).toBeLessThan(2)
  })
})
