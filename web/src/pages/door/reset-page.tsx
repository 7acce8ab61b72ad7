import { resetPassphrase } from '@weirlight/shared/contracts'
import { useState, type FormEvent } from 'react'
import { Link, useNavigate, useParams } from 'react-router-dom'
import { refusalOf, slipsOf, type FieldErrors, NewPassphrase } from '../../features/session'
import { call } from '../../lib/call'
import { paths } from '../../lib/paths'
import { Door, formTexts } from '../../ui/door'
import { Strip } from '../../ui/sheet'

export function ResetPage() {
  const { token = '' } = useParams()
  const navigate = useNavigate()
  const [errors, setErrors] = useState<FieldErrors>({})
  const [isBusy, setBusy] = useState(false)

  const submit = async (event: FormEvent<HTMLFormElement>) => {
    const texts = formTexts(event)
    if (isBusy) return
    const body = { token, passphrase: texts['passphrase'] ?? '' }
    if (body.passphrase !== texts['repeated']) return setErrors({ repeated: 'The two passphrases differ.' })
    const slips = slipsOf(resetPassphrase.body, body)
    if (slips)
      return setErrors(
        slips['token'] ? { '': 'This link is not complete. Open it from the e-mail again.' } : slips,
      )
    setBusy(true)
    setErrors({})
    try {
      await call(resetPassphrase, { body })
      await navigate(`${paths.signIn}?done=reset`, { replace: true })
    } catch (error) {
      setErrors(refusalOf(error, ['passphrase']))
    } finally {
      setBusy(false)
    }
  }

  return (
    <Door title="Choose a new passphrase">
      <form className="door-form" noValidate onSubmit={(event) => void submit(event)}>
        {errors[''] && (
          <Strip tone="above" isAlert>
            {errors['']}
          </Strip>
        )}
        <NewPassphrase errors={errors} />
        <button type="submit" className="button main" disabled={isBusy}>
          {isBusy ? 'Setting…' : 'Set the passphrase'}
        </button>
      </form>
      <p className="door-foot">
        <Link to={paths.forgot}>Ask for a new link</Link>
      </p>
    </Door>
  )
}
