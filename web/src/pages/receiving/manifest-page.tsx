import { ReceiveManifest } from '../../features/samples'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'
import { ReceivingSections } from './receiving-sections'

export function ManifestPage() {
  return (
    <MarginPage
      title="Receive a manifest"
      subtitle="A sheet of samples, one a row"
      back={{ to: paths.receiving, label: 'Receiving' }}
      notes={[
        'Nothing is received before you have seen every row. All rows are received, or none.',
        'Each sample gets its number; acceptance is decided for each of them afterwards.',
      ]}
      bar={<ReceivingSections />}
    >
      <ReceiveManifest />
    </MarginPage>
  )
}
