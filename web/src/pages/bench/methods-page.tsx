import { MethodsList } from '../../features/methods'
import { MarginPage } from '../../ui'
import { BenchSections } from './bench-sections'

export function MethodsPage() {
  return (
    <MarginPage
      title="Methods"
      subtitle="The laboratory’s colour-forming methods"
      notes={[
        'Each number of a method stands with its source and a mark that says how it is known. Check the current text before you rely on it.',
      ]}
      bar={<BenchSections />}
    >
      <MethodsList />
    </MarginPage>
  )
}
