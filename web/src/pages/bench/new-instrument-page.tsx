import { AddInstrument } from '../../features/instruments'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'

export function NewInstrumentPage() {
  return (
    <MarginPage
      title="Add an instrument"
      back={{ to: paths.instruments, label: 'Instruments' }}
      notes={['It gets a number of its own. Nothing can be read on it before its first check has passed.']}
    >
      <AddInstrument />
    </MarginPage>
  )
}
