import { useQueryClient } from '@tanstack/react-query'
import { signIn } from '@weirlight/shared/contracts'
import { useState, type FormEvent } from 'react'
import { Link, useNavigate, useSearchParams } from 'react-router-dom'
import {
  CodeField,
  isCodeNeeded,
  openSession,
  refusalOf,
  slipsOf,
  type FieldErrors,
} from '../../features/session'
import { paths } from '../../lib/paths'
import { Door, DoorField, formTexts } from '../../ui/door'
import { Strip } from '../../ui/sheet'

/** Only a path of this application; another site's address is never followed. */
function safeNext(next: string | null): string {
  return next && /^\/(?![/\\])/.test(next) ? next : '/'
}

export function SignInPage() {
  const client = useQueryClient()
  const navigate = useNavigate()
  const [search] = useSearchParams()
  const [errors, setErrors] = useState<FieldErrors>({})
  const [isBusy, setBusy] = useState(false)
  const [wantsCode, setWantsCode] = useState(false)

  const submit = async (event: FormEvent<HTMLFormElement>) => {
    const texts = formTexts(event)
    if (isBusy) return
    const given = {
      email: texts['email'] ?? '',
      password: texts['password'] ?? '',
      ...(wantsCode ? { code: texts['code'] ?? '' } : {}),
    }
    const slips = slipsOf(signIn.body, given)
    if (slips) return setErrors(slips)
    setBusy(true)
    setErrors({})
    try {
      await openSession(client, given)
      await navigate(safeNext(search.get('next')), { replace: true })
    } catch (error) {
      if (!wantsCode && isCodeNeeded(error)) setWantsCode(true)
      else setErrors(refusalOf(error, ['email', 'password', 'code']))
    } finally {
      setBusy(false)
    }
  }

  return (
    <Door title="Sign in">
      <p className="quiet">The record of the laboratory, from bench to certificate.</p>
      <form className="door-form" noValidate onSubmit={(event) => void submit(event)}>
        {search.has('done') && (
          <Strip tone="quiet">{DONE[search.get('done') ?? ''] ?? 'Please sign in.'}</Strip>
        )}
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
        <DoorField
          label="Passphrase"
          name="password"
          type="password"
          autoComplete="current-password"
          required
          error={errors['password']}
        />
        {wantsCode && <CodeField errors={errors} />}
        <button type="submit" className="button main" disabled={isBusy}>
          {isBusy ? 'Signing in…' : 'Sign in'}
        </button>
      </form>
      <p className="door-foot">
        <Link to={paths.forgot}>I do not know my passphrase</Link>
      </p>
      <p className="door-foot note">
        <Link to={paths.check}>Check a certificate</Link>
      </p>
    </Door>
  )
}

const DONE: Record<string, string> = {
  reset: 'Your new passphrase is set. Sign in with it.',
  accepted: 'Your account is ready. Sign in with your new passphrase.',
}
