import { ResultsList } from '../../features/results'
import { MarginPage } from '../../ui'

export function ResultsPage() {
  return (
    <MarginPage
      title="Results"
      subtitle="Everything measured"
      notes={[
        'Each number opens what is behind it, back to the bottle and the stock.',
        'Choose a point and an analyte to see the trend with its limit.',
        'A result above a limit is a laboratory finding. Compliance is determined by the primacy agency under its current rules.',
      ]}
    >
      <ResultsList />
    </MarginPage>
  )
}
