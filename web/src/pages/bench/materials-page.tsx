import { Link } from 'react-router-dom'
import { MaterialsList } from '../../features/materials'
import { paths, useCan } from '../../lib'
import { Bar, MarginPage } from '../../ui'
import { BenchSections } from './bench-sections'

export function MaterialsPage() {
  const may = useCan()
  return (
    <MarginPage
      title="Materials"
      subtitle="Reagents and standards, lot by lot"
      notes={[
        'Every lot leads back to the certificate of its stock, and forward to everything it touched.',
        'A lot that is expired or withdrawn cannot be chosen for work.',
      ]}
      bar={
        <>
          <BenchSections />
          {may('materials.manage') && (
            <Bar
              actions={
                <Link className="button main" to={paths.newMaterial}>
                  Record a lot
                </Link>
              }
            />
          )}
        </>
      }
    >
      <MaterialsList />
    </MarginPage>
  )
}
