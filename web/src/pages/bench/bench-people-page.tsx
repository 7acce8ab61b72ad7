import { Link } from 'react-router-dom'
import { AllAuthorisations, AuthorisationsByMethod } from '../../features/users'
import { paths } from '../../lib'
import { Bar, MarginPage } from '../../ui'
import { BenchSections } from './bench-sections'

export function BenchPeoplePage() {
  return (
    <MarginPage
      title="People"
      subtitle="Who may do what, by which method"
      notes={[
        'An authorisation names a person, a method, an activity, its days, and what shows that the person can do it.',
        'Without one in force nobody measures, signs or reviews.',
      ]}
      bar={
        <>
          <BenchSections />
          <Bar
            lead={
              <>
                Accounts and new authorisations: <Link to={paths.settingsPeople}>Settings, People</Link>
              </>
            }
          />
        </>
      }
    >
      <div className="stack">
        <AuthorisationsByMethod />
        <AllAuthorisations />
      </div>
    </MarginPage>
  )
}
