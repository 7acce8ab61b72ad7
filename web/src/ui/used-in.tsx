import { Link } from 'react-router-dom'
import { Box } from './sheet'

interface Use {
  id: string
  number: string
}

interface UsedInProps {
  title: string
  groups: readonly { words: string; uses: readonly Use[]; to: (id: string) => string }[]
  /** said when there is none */
  none: string
}

/** What stands on a lot or an instrument: numbers close together, kind by kind. */
export function UsedIn({ title, groups, none }: UsedInProps) {
  const shown = groups.filter((group) => group.uses.length > 0)
  return (
    <Box title={title}>
      {shown.length === 0 ? (
        <p className="quiet">{none}</p>
      ) : (
        <dl className="used-in">
          {shown.map((group) => (
            <div key={group.words}>
              <dt>
                {group.words}: {group.uses.length}
              </dt>
              <dd>
                <ul>
                  {group.uses.map((use) => (
                    <li key={use.id}>
                      <Link to={group.to(use.id)}>{use.number}</Link>
                    </li>
                  ))}
                </ul>
              </dd>
            </div>
          ))}
        </dl>
      )}
    </Box>
  )
}
