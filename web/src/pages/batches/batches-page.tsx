import { Link } from 'react-router-dom'
import { AllBatches, BatchesAtTheBench } from '../../features/batches'
import { paths, useCan } from '../../lib'
import { Bar, MarginPage } from '../../ui'

export function BatchesPage() {
  const may = useCan()
  return (
    <MarginPage
      title="Batches"
      subtitle="Runs at the bench and their results"
      notes={['A batch holds samples with the blanks, standards and controls they are judged by.']}
      bar={
        <Bar
          actions={
            may('batches.run') && (
              <Link className="button main" to={paths.newBatch}>
                New batch
              </Link>
            )
          }
        />
      }
    >
      <div className="stack">
        <BatchesAtTheBench />
        <AllBatches />
      </div>
    </MarginPage>
  )
}
