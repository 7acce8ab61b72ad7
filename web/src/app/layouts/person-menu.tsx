import { ROLE_NAMES } from '@weirlight/shared/permissions'
import { Link } from 'react-router-dom'
import { closeSession } from '../../features/session'
import { paths } from '../../lib/paths'
import { useSession } from '../../lib/session'
import { usePanel } from './use-panel'

/** Who is signed in, and the way out. */
export function PersonMenu({ label }: { label?: string }) {
  const { name, email, role, laboratoryName } = useSession()
  const { frame, isOpen, setOpen } = usePanel()
  return (
    <div className="go" ref={frame}>
      <button
        type="button"
        className="person"
        aria-expanded={isOpen}
        aria-label={`${label ?? name}: account`}
        onClick={() => setOpen(!isOpen)}
      >
        {label ?? name}
      </button>
      {isOpen && (
        <div className="panel">
          <p>
            <strong className="strong">{name}</strong>
            <br />
            <span className="note">
              {email}
              <br />
              {ROLE_NAMES[role]}, {laboratoryName}
            </span>
          </p>
          <Link to={paths.account} onClick={() => setOpen(false)}>
            Your account
          </Link>
          <button type="button" onClick={() => void closeSession(paths.signIn)}>
            Sign out
          </button>
        </div>
      )}
    </div>
  )
}
