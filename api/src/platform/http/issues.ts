import type { FieldProblem } from '@weirlight/shared/errors'
import type { z } from 'zod'

/** zod's issues as the form names them: `standards.2.readings.0`. */
export function toFieldProblems(issues: readonly z.core.$ZodIssue[]): FieldProblem[] {
  return issues.flatMap((issue) => {
    if (issue.code === 'unrecognized_keys') {
      return issue.keys.map((key) => ({
        path: [...issue.path, key].join('.'),
        message: 'This entry is not known here.',
      }))
    }
    return [{ path: issue.path.join('.'), message: sentence(issue) }]
  })
}

function sentence(issue: z.core.$ZodIssue): string {
  if (issue.code === 'invalid_type') return 'This entry is missing or of the wrong kind.'
  if (issue.code === 'invalid_value') return 'Choose one of the values offered.'
  return issue.message
}
