import { useQueryClient } from '@tanstack/react-query'
import { signIn } from '@weirlight/shared/contracts'
import { useEffect, useRef, useState, type FormEvent } from 'react'
import { paths } from '../../../lib/paths'
import { gaveUpSignIn, signedInAgain } from '../../../lib/re-sign-in'
import { DoorField, formTexts } from '../../../ui/door'
import { Strip } from '../../../ui/sheet'
import { openSession } from '../api/session-api'
import { CodeField, isCodeNeeded } from './code-field'
import { refusalOf, slipsOf, type FieldErrors } from './field-errors'

interface SignInDialogProps {
  email: string
  name: string
}

/** Over a page whose session has run out: the same person signs in again and goes on where they were. */
export function SignInDialog({ email, name }: SignInDialogProps) {
  const client = useQueryClient()
  const dialog = useRef<HTMLDialogElement>(null)
  const [errors, setErrors] = useState<FieldErrors>({})
  const [isBusy, setBusy] = useState(false)
  const [wantsCode, setWantsCode] = useState(false)

  useEffect(() => {
    const element = dialog.current
    if (!element || element.open) return
    element.showModal()
    element.querySelector<HTMLInputElement>('input[type=password]')?.focus()
    return () => element.close()
  }, [])

  const submit = async (event: FormEvent<HTMLFormElement>) => {
    const texts = formTexts(event)
    if (isBusy) return
    const given = {
      email,
      password: texts['password'] ?? '',
      ...(wantsCode ? { code: texts['code'] ?? '' } : {}),
    }
    const slips = slipsOf(signIn.body, given)
    if (slips) return setErrors(slips)
    setBusy(true)
    setErrors({})
    try {
      await openSession(client, given)
      signedInAgain()
    } catch (error) {
      if (!wantsCode && isCodeNeeded(error)) setWantsCode(true)
      else setErrors(refusalOf(error, ['password', 'code']))
    } finally {
      setBusy(false)
    }
  }
  const leave = () => {
    gaveUpSignIn()
    window.location.assign(paths.signIn)
  }

  return (
    <dialog
      ref={dialog}
      className="ask"
      aria-labelledby="ask-title"
      // Escape would hide the only way on
      onCancel={(event) => event.preventDefault()}
    >
      <h2 id="ask-title">Please sign in again</h2>
      <p>
        Your session has ended, {name}. Nothing you entered is lost: sign in and what you were doing is sent.
      </p>
      <form noValidate onSubmit={(event) => void submit(event)}>
        {errors[''] && (
          <Strip tone="above" isAlert>
            {errors['']}
          </Strip>
        )}
        <DoorField label="E-mail" name="email" type="email" value={email} readOnly autoComplete="username" />
        <DoorField
          label="Passphrase"
          name="password"
          type="password"
          autoComplete="current-password"
          error={errors['password']}
        />
        {wantsCode && <CodeField errors={errors} />}
        <div className="row">
          <button type="button" className="button" onClick={leave} disabled={isBusy}>
            Leave this page
          </button>
          <button type="submit" className="button main" disabled={isBusy}>
            {isBusy ? 'Signing in…' : 'Sign in'}
          </button>
        </div>
      </form>
    </dialog>
  )
}
