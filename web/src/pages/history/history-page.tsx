import { HistoryList } from '../../features/history'
import { MarginPage } from '../../ui'
import { HistorySections } from './history-sections'

export function HistoryPage() {
  return (
    <MarginPage
      title="History"
      subtitle="Who, when, what from, what to, why"
      notes={[
        'Entries are written by the database itself in the same moment as the change. Nobody can change or remove one, the application included.',
        'A number finds everything that belongs to it: a sample with its determinations, readings, results, alerts and certificates.',
      ]}
      bar={<HistorySections />}
    >
      <HistoryList />
    </MarginPage>
  )
}
