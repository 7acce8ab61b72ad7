import { AssayError } from './assay-error.js'
import { requireArray, requireObject } from './argument-checks.js'
import { validationFunctions } from './validation-functions.js'
import { ENGINE_VERSION } from './version.js'

export type CaseValue = number | string | boolean | null

export interface CaseTolerance {
  absolute?: number
  /** part of the expected value: 1e-9 */
  relative?: number
  /** where one path has a tolerance of its own */
  paths?: Record<string, { absolute?: number; relative?: number }>
}

/**
 * One published (or constructed) case, as `fixtures/assay/cases/*.json` holds them in lists.
 *
 * `input` is the one argument of the function; a list is its arguments in order (so a function that takes a list gets
 * a list in a list). An object `{ "$call": name, "input": ... }` anywhere in it is computed first, so that a prediction
 * can start from a fit. `expected` goes by path into the result: `coefficients.1`, `interval.low`; a result that is a
 * plain number or text stands at `result`, the code of a refusal at `error`. Without a tolerance the value must be equal.
 */
export interface ValidationCase {
  id: string
  title: string
  source: string
  mark: string
  function: string
  input: unknown
  expected: Record<string, CaseValue>
  tolerance?: CaseTolerance
}

export interface ValidationCheck {
  path: string
  expected: CaseValue
  /** null where the result has nothing at this path */
  got: CaseValue
  /** got - expected, for numbers */
  difference: number | null
  /** what the difference may be at most, absolute; null where the value must be equal */
  tolerance: number | null
  verdict: 'pass' | 'fail'
}

export interface ValidationRow {
  id: string
  title: string
  source: string
  mark: string
  function: string
  checks: ValidationCheck[]
  verdict: 'pass' | 'fail'
}

export interface ValidationReport {
  engineVersion: string
  /** ISO 8601 */
  at: string
  cases: number
  passed: number
  failed: number
  /** comparisons made in all cases together */
  comparisons: number
  rows: ValidationRow[]
}

function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value)
}

function callByName(name: string, input: unknown): unknown {
  const compute = validationFunctions[name]
  if (compute === undefined) {
    throw new AssayError('invalid-argument', `The engine has no function ${name}.`)
  }
  const resolved = resolveCalls(input)
  return compute(...(Array.isArray(resolved) ? resolved : [resolved]))
}

function resolveCalls(value: unknown): unknown {
  if (Array.isArray(value)) return value.map(resolveCalls)
  if (!isRecord(value)) return value
  if (typeof value['$call'] === 'string') return callByName(value['$call'], value['input'])
  return Object.fromEntries(Object.entries(value).map(([key, part]) => [key, resolveCalls(part)]))
}

function valueAt(result: unknown, path: string): CaseValue {
  if (path === 'result' && (typeof result !== 'object' || result === null)) return plain(result)
  let here: unknown = result
  for (const part of path.replaceAll('[', '.').replaceAll(']', '').split('.')) {
    if (Array.isArray(here)) here = part === 'length' ? here.length : here[Number(part)]
    else if (isRecord(here)) here = here[part]
    else return null
  }
  return plain(here)
}

function plain(value: unknown): CaseValue {
  if (typeof value === 'number' || typeof value === 'string' || typeof value === 'boolean') return value
  return null
}

/** A refusal is an answer too: its code stands at `error`. */
function compute(entry: ValidationCase): unknown {
  try {
    return callByName(entry.function, entry.input)
  } catch (error) {
    if (error instanceof AssayError) return { error: error.code, message: error.message }
    throw error
  }
}

function check(found: {
  result: unknown
  path: string
  expected: CaseValue
  tolerance: CaseTolerance
}): ValidationCheck {
  const { path, expected } = found
  const got = valueAt(found.result, path)
  const rule = found.tolerance.paths?.[path] ?? found.tolerance
  if (typeof expected === 'number' && typeof got === 'number') {
    const difference = got - expected
    const isExact = rule.absolute === undefined && rule.relative === undefined
    const tolerance = isExact ? null : Math.max(rule.absolute ?? 0, (rule.relative ?? 0) * Math.abs(expected))
    const verdict = Math.abs(difference) <= (tolerance ?? 0) ? 'pass' : 'fail'
    return { path, expected, got, difference, tolerance, verdict }
  }
  return {
    path,
    expected,
    got,
    difference: null,
    tolerance: null,
    verdict: got === expected ? 'pass' : 'fail',
  }
}

/**
 * Runs every case through the engine by the name of its function and compares. This is the evidence a laboratory keeps
 * that the calculations were checked before use and after each change (ISO/IEC 17025:2017, 7.11.2). Pure: the caller
 * reads the cases, gives the time, and writes the report.
 *
 * @param cases as `fixtures/assay/cases/*.json` holds them
 * @param options now: the time to print
 * @returns every comparison with source, expected, got, difference, tolerance and verdict; the version and the counts
 * @throws AssayError invalid-argument: no list of cases, a case without name or expectations, two cases of one id
 */
export function runValidationCases(
  cases: readonly ValidationCase[],
  options: { now: Date | string },
): ValidationReport {
  const seen = new Set<string>()
  const rows = requireArray(cases, 'cases').map((entry, index): ValidationRow => {
    requireObject(entry, 'case')
    requireObject(entry.expected, 'expected values of a case')
    if (seen.has(entry.id)) {
      throw new AssayError('invalid-argument', `The case ${entry.id} stands there twice.`, index)
    }
    seen.add(entry.id)
    const paths = Object.entries(entry.expected)
    if (paths.length === 0) {
      throw new AssayError('invalid-argument', `The case ${entry.id} expects nothing.`, index)
    }
    const result = compute(entry)
    const checks = paths.map(([path, expected]) =>
      check({ result, path, expected, tolerance: entry.tolerance ?? {} }),
    )
    return {
      id: entry.id,
      title: entry.title,
      source: entry.source,
      mark: entry.mark,
      function: entry.function,
      checks,
      verdict: checks.every((one) => one.verdict === 'pass') ? 'pass' : 'fail',
    }
  })
  const passed = rows.filter((row) => row.verdict === 'pass').length
  return {
    engineVersion: ENGINE_VERSION,
    at: typeof options.now === 'string' ? options.now : options.now.toISOString(),
    cases: rows.length,
    passed,
    failed: rows.length - passed,
    comparisons: rows.reduce((sum, row) => sum + row.checks.length, 0),
    rows,
  }
}
