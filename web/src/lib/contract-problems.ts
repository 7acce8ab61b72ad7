import type { FieldProblem } from '@weirlight/shared/errors'
import type { z } from 'zod'

/** The complaints of the contract itself, in the shape the server would send them. */
export function contractProblems(schema: z.ZodType, value: unknown): FieldProblem[] {
  const result = schema.safeParse(value)
  if (result.success) return []
  return result.error.issues.map((issue) => ({
    path: issue.path.map(String).join('.'),
    message: plainSentence(issue),
  }))
}

/** zod's own words for the two commonest slips are a programmer's; these are a person's. */
function plainSentence(issue: z.core.$ZodIssue): string {
  if (issue.code === 'invalid_type' && /received (undefined|null)/.test(issue.message))
    return 'Please fill this in.'
  if (issue.code === 'invalid_value') return 'Please choose one.'
  return issue.message
}
