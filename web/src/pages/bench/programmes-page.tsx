import { ProgrammesList } from '../../features/programmes'
import { MarginPage, Strip } from '../../ui'
import { BenchSections } from './bench-sections'

export function ProgrammesPage() {
  return (
    <MarginPage
      title="Programmes and limits"
      subtitle="What results are compared with"
      notes={[
        'A result above a limit is a laboratory finding. Whether a rule was kept is decided by the agency.',
        'Limits are dated and never overwritten: a result keeps the limit it was compared with.',
      ]}
      bar={<BenchSections />}
    >
      <Strip title="Limits are data">
        Each limit was taken from the named edition on its date. Check it against the text in force where you
        are before you rely on it.
      </Strip>
      <ProgrammesList />
    </MarginPage>
  )
}
