import { useSearchParams } from 'react-router-dom'
import { OpenBatch } from '../../features/batches'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'

export function NewBatchPage() {
  const [search] = useSearchParams()
  return (
    <MarginPage
      title="New batch"
      subtitle="From waiting determinations"
      back={{ to: paths.batches, label: 'Batches' }}
      notes={['The holding time that runs out first stands at the head of the list.']}
    >
      <OpenBatch methodId={search.get('method') ?? ''} />
    </MarginPage>
  )
}
