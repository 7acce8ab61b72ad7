import { useMemo } from 'react'
import { useSearchParams } from 'react-router-dom'
import { SampleLabels } from '../../features/samples'
import { paths } from '../../lib'
import { Empty, MarginPage } from '../../ui'

export function LabelsPage() {
  const [search] = useSearchParams()
  const asked = search.get('samples') ?? ''
  const ids = useMemo(() => [...new Set(asked.split(',').filter((id) => /^[1-9]\d*$/.test(id)))], [asked])
  if (ids.length === 0) {
    return (
      <MarginPage title="Labels" back={{ to: paths.receiving, label: 'Receiving' }}>
        <Empty title="No sample was named">Open a sample and choose Label.</Empty>
      </MarginPage>
    )
  }
  return <SampleLabels ids={ids} />
}
