import { AssayError } from './assay-error.js'

/** Checks of arguments, shared by the light, reporting and compliance functions. Each throws an AssayError. */

export function requireObject(value: unknown, what: string): void {
  if (typeof value === 'object' && value !== null && !Array.isArray(value)) return
  throw new AssayError('invalid-argument', `The ${what} must be given as one object.`)
}

export function requireFinite(value: unknown, what: string, index?: number): number {
  if (typeof value === 'number' && Number.isFinite(value)) return value
  throw new AssayError('non-finite', `The ${what} must be a finite number.`, index)
}

export function requirePositive(value: unknown, what: string): number {
  const number = requireFinite(value, what)
  if (number > 0) return number
  throw new AssayError('invalid-argument', `The ${what} must be above zero.`)
}

export function requireNotNegative(value: unknown, what: string): number {
  const number = requireFinite(value, what)
  if (number >= 0) return number
  throw new AssayError('invalid-argument', `The ${what} cannot be negative.`)
}

export function requireArray<T>(value: readonly T[], what: string): readonly T[] {
  if (Array.isArray(value)) return value
  throw new AssayError('invalid-argument', `The ${what} must be given as a list.`)
}

export function requireOneOf<T extends string>(value: unknown, allowed: readonly T[], what: string): T {
  const found = allowed.find((one) => one === value)
  if (found !== undefined) return found
  throw new AssayError('invalid-argument', `The ${what} must be one of: ${allowed.join(', ')}.`)
}

/** Last gate before a number leaves the engine: arithmetic on finite numbers can still overflow. */
export function finiteResult(value: number, what: string): number {
  if (Number.isFinite(value)) return value === 0 ? 0 : value
  throw new AssayError(
    'numerical-overflow',
    `The ${what} is too large or too small to compute with these numbers.`,
  )
}
