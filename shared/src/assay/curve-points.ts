import { requireArray, requireFinite, requireObject } from './argument-checks.js'
import { AssayError } from './assay-error.js'

/** A point of a curve under either pair of names. */
export type CurvePoint = { x: number; y: number } | { concentration: number; absorbance: number }

export interface Curve {
  x: number[]
  y: number[]
}

/** Reads points given as x and y or as concentration and absorbance; a concentration may not be negative. */
export function readCurve(points: readonly CurvePoint[], what = 'points'): Curve {
  const given = requireArray(points, what)
  const x: number[] = []
  const y: number[] = []
  Array.from(given).forEach((point, index) => {
    requireObject(point, 'point')
    if ('concentration' in point) {
      x.push(requireConcentration(point.concentration, index))
      y.push(requireFinite(point.absorbance, 'absorbance', index) + 0)
      return
    }
    x.push(requireFinite(point.x, 'x value', index) + 0)
    y.push(requireFinite(point.y, 'y value', index) + 0)
  })
  return { x, y }
}

export function requireConcentration(value: unknown, index: number): number {
  const concentration = requireFinite(value, 'concentration', index)
  if (concentration < 0) {
    throw new AssayError('negative-concentration', 'A standard cannot have a negative concentration.', index)
  }
  return concentration + 0
}

export function requireWeight(value: unknown, index: number): number {
  if (typeof value === 'number' && Number.isFinite(value) && value > 0) return value
  throw new AssayError('invalid-weight', 'Every weight must be a finite number above zero.', index)
}

/**
 * Refuses a set of x values from which a polynomial cannot be fitted with an error estimate.
 */
export function requireSpread(given: { x: readonly number[]; degree: number; throughOrigin: boolean }): void {
  const { x, degree, throughOrigin } = given
  const parameters = degree + (throughOrigin ? 0 : 1)
  const distinct = new Set(x)
  if (x.length > 1 && distinct.size === 1) {
    throw new AssayError(
      'all-concentrations-equal',
      'All concentrations are equal: there is no line through them.',
    )
  }
  if (throughOrigin) distinct.delete(0)
  if (x.length < parameters + 1 || distinct.size < parameters) {
    throw new AssayError(
      'too-few-points',
      `This model needs at least ${parameters + 1} readings at ${parameters} or more different concentrations.`,
    )
  }
}
