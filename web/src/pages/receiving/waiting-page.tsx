import { WaitingList } from '../../features/samples'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'
import { ReceivingSections } from './receiving-sections'

export function WaitingPage() {
  return (
    <MarginPage
      title="Waiting for a batch"
      subtitle="By method, by the clock that runs out first"
      back={{ to: paths.receiving, label: 'Receiving' }}
      notes={['Choose a method to make a batch of what waits for it.']}
      bar={<ReceivingSections />}
    >
      <WaitingList />
    </MarginPage>
  )
}
