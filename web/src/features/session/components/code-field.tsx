import { LIMITS } from '@weirlight/shared/limits'
import { asProblem } from '../../../lib/problem-error'
import { DoorField } from '../../../ui/door'
import type { FieldErrors } from './field-errors'

/** The passphrase was right, and the account wants a code as well. */
export function isCodeNeeded(error: unknown): boolean {
  return asProblem(error).code === 'second-factor-needed'
}

/** Asked for once the passphrase was right; takes the focus as it appears. */
export function CodeField({ errors }: { errors: FieldErrors }) {
  return (
    <DoorField
      label="Code from your device, or a recovery code"
      name="code"
      autoComplete="one-time-code"
      autoCapitalize="off"
      spellCheck={false}
      autoFocus
      maxLength={LIMITS.codeLength}
      error={errors['code']}
      hint="Your account has a second factor. The code changes every 30 seconds."
    />
  )
}
