import { LIMITS } from '@weirlight/shared/limits'
import { useState } from 'react'
import { DoorField } from '../../../ui/door'
import type { FieldErrors } from './field-errors'

/** A new passphrase, twice, with its length said while it is typed. */
export function NewPassphrase({ errors }: { errors: FieldErrors }) {
  const [length, setLength] = useState(0)
  const missing = LIMITS.passphraseMinimum - length
  return (
    <>
      <DoorField
        label="New passphrase"
        name="passphrase"
        type="password"
        autoComplete="new-password"
        required
        maxLength={LIMITS.passphraseMaximum}
        error={errors['passphrase']}
        hint={
          missing > 0
            ? `At least ${LIMITS.passphraseMinimum} characters, ${missing} to go. Several words in a row are easy to remember.`
            : 'Long enough.'
        }
        onChange={(event) => setLength(event.target.value.length)}
      />
      <DoorField
        label="The same again"
        name="repeated"
        type="password"
        autoComplete="new-password"
        required
        maxLength={LIMITS.passphraseMaximum}
        error={errors['repeated']}
      />
    </>
  )
}
