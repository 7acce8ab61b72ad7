import { AddClient } from '../../features/clients'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'

export function NewClientPage() {
  return (
    <MarginPage
      title="Add a client"
      back={{ to: paths.clients, label: 'Clients' }}
      notes={['Next come its sampling points, and the contacts who get alerts and certificates.']}
    >
      <AddClient />
    </MarginPage>
  )
}
