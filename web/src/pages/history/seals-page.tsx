import { Seals } from '../../features/history'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'
import { HistorySections } from './history-sections'

export function SealsPage() {
  return (
    <MarginPage
      title="Seals"
      subtitle="How to see that the history was not touched"
      back={{ to: paths.history, label: 'History' }}
      notes={[
        'A seal closes a run of entries: their hashes make a tree, and its root is chained to the seal before. Whoever changes an old entry breaks every seal after it.',
        'A seal shows that something was changed. It cannot bring back what was there: backups do.',
      ]}
      bar={<HistorySections />}
    >
      <Seals />
    </MarginPage>
  )
}
