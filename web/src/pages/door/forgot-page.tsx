import { forgotPassphrase } from '@weirlight/shared/contracts'
import { useState, type FormEvent } from 'react'
import { Link } from 'react-router-dom'
import { refusalOf, slipsOf, type FieldErrors } from '../../features/session'
import { call } from '../../lib/call'
import { paths } from '../../lib/paths'
import { Door, DoorField, formTexts } from '../../ui/door'
import { Strip } from '../../ui/sheet'

export function ForgotPage() {
  const [errors, setErrors] = useState<FieldErrors>({})
  const [isBusy, setBusy] = useState(false)
  const [sentTo, setSentTo] = useState<string | null>(null)

  const submit = async (event: FormEvent<HTMLFormElement>) => {
    const email = formTexts(event)['email'] ?? ''
    if (isBusy) return
    const slips = slipsOf(forgotPassphrase.body, { email })
    if (slips) return setErrors(slips)
    setBusy(true)
    setErrors({})
    try {
      await call(forgotPassphrase, { body: { email } })
      setSentTo(email)
    } catch (error) {
      setErrors(refusalOf(error, ['email']))
    } finally {
      setBusy(false)
    }
  }

  return (
    <Door title="A new passphrase">
      {sentTo === null ? (
        <>
          <p className="quiet">We send you a link to choose a new one.</p>
          <form className="door-form" noValidate onSubmit={(event) => void submit(event)}>
            {errors[''] && (
              <Strip tone="above" isAlert>
                {errors['']}
              </Strip>
            )}
            <DoorField
              label="E-mail"
              name="email"
              type="email"
              autoComplete="username"
              autoFocus
              required
              error={errors['email']}
            />
            <button type="submit" className="button main" disabled={isBusy}>
              {isBusy ? 'Sending…' : 'Send the link'}
            </button>
          </form>
        </>
      ) : (
        <p role="status">
          If {sentTo} has an account here, a link is on its way. It works once and for a short time. Look
          among unwanted mail too; if nothing comes, ask the administrator.
        </p>
      )}
      <p className="door-foot">
        <Link to={paths.signIn}>Back to signing in</Link>
      </p>
    </Door>
  )
}
