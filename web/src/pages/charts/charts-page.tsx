import { ControlCharts } from '../../features/charts'
import { MarginPage } from '../../ui'

export function ChartsPage() {
  return (
    <MarginPage
      title="Charts"
      subtitle="Quality control over time"
      foldLabel="How it is charted"
      notes={[
        'The limits come from the values themselves: individuals with moving ranges.',
        'A signal asks for a look at the run; what was done about it stands with the batch.',
      ]}
    >
      <ControlCharts />
    </MarginPage>
  )
}
