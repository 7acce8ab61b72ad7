import { ResultsOfOurs } from '../../features/portal'
import { MarginPage } from '../../ui'

export function OurResultsPage() {
  return (
    <MarginPage title="Our results" subtitle="Released, newest first">
      <ResultsOfOurs />
    </MarginPage>
  )
}
