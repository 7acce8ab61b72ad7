import { Link } from 'react-router-dom'
import { ClientsList } from '../../features/clients'
import { paths, useCan } from '../../lib'
import { Bar, MarginPage } from '../../ui'
import { BenchSections } from './bench-sections'

export function ClientsPage() {
  const may = useCan()
  return (
    <MarginPage
      title="Clients"
      subtitle="Utilities, their points and contacts"
      notes={['A client has a programme, whose limits and rounding its results are reported by.']}
      bar={
        <>
          <BenchSections />
          {may('clients.manage') && (
            <Bar
              actions={
                <Link className="button" to={paths.newClient}>
                  Add a client
                </Link>
              }
            />
          )}
        </>
      }
    >
      <ClientsList />
    </MarginPage>
  )
}
