import { Link, useParams } from 'react-router-dom'
import { CheckAnswerBox, CheckForm } from '../../features/certificates'
import { paths } from '../../lib'
import { Door } from '../../ui/door'

/** Anyone may ask whether a certificate is genuine and current. */
export function CheckPage() {
  const { code = '' } = useParams()
  return (
    <Door title="Check a certificate">
      <p className="quiet">Is it genuine, and is it the current one? The laboratory’s own record answers.</p>
      <CheckForm key={code} code={code} />
      {code !== '' && <CheckAnswerBox code={code} />}
      <p className="door-foot">
        <Link to={paths.signIn}>Sign in</Link>
      </p>
    </Door>
  )
}
