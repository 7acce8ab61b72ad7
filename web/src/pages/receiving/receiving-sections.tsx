import { paths, useCan } from '../../lib'
import { SectionNav } from '../../ui'

/** The pages of receiving, as far as the person may see them. */
export function ReceivingSections() {
  const may = useCan()
  const mayReceive = may('samples.receive')
  return (
    <SectionNav
      label="Receiving"
      sections={[
        { to: paths.receiving, title: 'Register' },
        { to: paths.waiting, title: 'Waiting for a batch' },
        ...(mayReceive
          ? [
              { to: paths.receive, title: 'Receive a sample' },
              { to: paths.receiveMany, title: 'Receive a manifest' },
            ]
          : []),
      ]}
    />
  )
}
