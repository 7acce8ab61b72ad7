import { useQuery } from '@tanstack/react-query'
import { acceptInvitation, type ResponseOf, type getInvitation } from '@weirlight/shared/contracts'
import { ROLE_NAMES } from '@weirlight/shared/permissions'
import { useState, type FormEvent } from 'react'
import { Link, useNavigate, useParams } from 'react-router-dom'
import { invitationQuery, refusalOf, slipsOf, type FieldErrors, NewPassphrase } from '../../features/session'
import { call } from '../../lib/call'
import { paths } from '../../lib/paths'
import { asProblem } from '../../lib/problem-error'
import { Door, DoorField, formTexts } from '../../ui/door'
import { SkeletonLines } from '../../ui/page-states'
import { Strip } from '../../ui/sheet'

type Invitation = ResponseOf<typeof getInvitation>

export function InvitationPage() {
  const { token = '' } = useParams()
  const invitation = useQuery({ ...invitationQuery(token), staleTime: Infinity })
  return (
    <Door title="Your invitation">
      {invitation.data ? (
        <Accept invitation={invitation.data} token={token} />
      ) : invitation.isError ? (
        <>
          <p>{refusalSentence(invitation.error)}</p>
          <p className="door-foot">
            <Link to={paths.signIn}>Go to signing in</Link>
          </p>
        </>
      ) : (
        <SkeletonLines />
      )}
    </Door>
  )
}

function refusalSentence(error: unknown): string {
  const problem = asProblem(error)
  return problem.code === 'not-found' || problem.code === 'invalid-input'
    ? 'This invitation is used, too old or not complete. Ask the administrator of the laboratory for a new one.'
    : problem.message
}

function Accept({ invitation, token }: { invitation: Invitation; token: string }) {
  const navigate = useNavigate()
  const [errors, setErrors] = useState<FieldErrors>({})
  const [isBusy, setBusy] = useState(false)

  const submit = async (event: FormEvent<HTMLFormElement>) => {
    const texts = formTexts(event)
    if (isBusy) return
    const body = { name: texts['name'] ?? '', passphrase: texts['passphrase'] ?? '' }
    if (body.passphrase !== texts['repeated']) return setErrors({ repeated: 'The two passphrases differ.' })
    const slips = slipsOf(acceptInvitation.body, body)
    if (slips) return setErrors(slips)
    setBusy(true)
    setErrors({})
    try {
      await call(acceptInvitation, { params: { token }, body })
      await navigate(`${paths.signIn}?done=accepted`, { replace: true })
    } catch (error) {
      setErrors(refusalOf(error, ['name', 'passphrase']))
    } finally {
      setBusy(false)
    }
  }

  return (
    <>
      <p>
        {invitation.laboratoryName} invites {invitation.email} as {ROLE_NAMES[invitation.role]}
        {invitation.clientName && ` of ${invitation.clientName}`}.
      </p>
      <form className="door-form" noValidate onSubmit={(event) => void submit(event)}>
        {errors[''] && (
          <Strip tone="above" isAlert>
            {errors['']}
          </Strip>
        )}
        <input type="hidden" name="username" autoComplete="username" value={invitation.email} readOnly />
        <DoorField
          label="Your name, as it is printed beside what you sign"
          name="name"
          autoComplete="name"
          defaultValue={invitation.name}
          required
          error={errors['name']}
        />
        <NewPassphrase errors={errors} />
        <button type="submit" className="button main" disabled={isBusy}>
          {isBusy ? 'Setting up…' : 'Accept the invitation'}
        </button>
      </form>
    </>
  )
}
