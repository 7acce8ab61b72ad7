import { paths } from '../../lib'
import { SectionNav } from '../../ui'

export function HistorySections() {
  return (
    <SectionNav
      label="History"
      sections={[
        { to: paths.history, title: 'Every change' },
        { to: paths.historySeals, title: 'Seals' },
      ]}
    />
  )
}
