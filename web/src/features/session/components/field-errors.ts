import type { z } from 'zod'
import { contractProblems } from '../../../lib/contract-problems'
import { asProblem } from '../../../lib/problem-error'

export type FieldErrors = Record<string, string>

/** Complaints by field name, the first of each; `''` holds what belongs to no field. */
export function errorsOf(problems: readonly { path: string; message: string }[]): FieldErrors {
  const errors: FieldErrors = {}
  for (const problem of problems) errors[problem.path] ??= problem.message
  return errors
}

export function slipsOf(schema: z.ZodType, value: unknown): FieldErrors | null {
  const problems = contractProblems(schema, value)
  return problems.length > 0 ? errorsOf(problems) : null
}

export function refusalOf(error: unknown, fields: readonly string[]): FieldErrors {
  const problem = asProblem(error)
  const errors = errorsOf(problem.errors)
  const isOnField = fields.some((field) => errors[field] !== undefined)
  return isOnField ? errors : { ...errors, '': problem.message }
}
