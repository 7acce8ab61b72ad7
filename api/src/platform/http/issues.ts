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

/** A sentence that the contract gives stands; zod's own is for programmers. */
function sentence(issue: z.core.$ZodIssue): string {
  if (!/^(Invalid|Too (big|small)|Unrecognized)\b/.test(issue.message)) return issue.message
  switch (issue.code) {
    case 'invalid_type':
      return 'This entry is missing or of the wrong kind.'
    case 'invalid_value':
      return 'Choose one of the values offered.'
    case 'too_small':
      return `At least ${issue.minimum}${unitOf(issue.origin)}.`
    case 'too_big':
      return `At most ${issue.maximum}${unitOf(issue.origin)}.`
    case 'invalid_format':
      return 'This is not written as expected here.'
    default:
      return 'This entry does not fit.'
  }
}

function unitOf(origin: string): string {
  return origin === 'string' ? ' characters' : ''
}
