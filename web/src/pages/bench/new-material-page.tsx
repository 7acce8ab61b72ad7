import { useSearchParams } from 'react-router-dom'
import { AddMaterial } from '../../features/materials'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'

export function NewMaterialPage() {
  const [search] = useSearchParams()
  return (
    <MarginPage
      title="Record a lot"
      subtitle="What stands on the bottle, and where it comes from"
      back={{ to: paths.materials, label: 'Materials' }}
      notes={[
        'A recorded lot is not changed any more. One that was recorded wrongly is taken out of use and recorded again.',
      ]}
    >
      <AddMaterial fromId={search.get('from') ?? ''} />
    </MarginPage>
  )
}
