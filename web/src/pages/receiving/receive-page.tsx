import { useSearchParams } from 'react-router-dom'
import { ReceiveSample } from '../../features/samples'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'
import { ReceivingSections } from './receiving-sections'

export function ReceivePage() {
  const [search] = useSearchParams()
  return (
    <MarginPage
      title="Receive a sample"
      subtitle="By keyboard or scanner, bottle after bottle"
      back={{ to: paths.receiving, label: 'Receiving' }}
      notes={[
        'Write down what is in front of you: what was not measured stays empty, and is never guessed.',
        'Purpose and kind are fixed at receipt. What was entered is kept on this computer until it is sent.',
      ]}
      bar={<ReceivingSections />}
    >
      <ReceiveSample clientId={search.get('client') ?? ''} />
    </MarginPage>
  )
}
