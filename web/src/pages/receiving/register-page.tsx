import { Link } from 'react-router-dom'
import { SampleRegister } from '../../features/samples'
import { paths, useCan } from '../../lib'
import { Bar, MarginPage } from '../../ui'
import { ReceivingSections } from './receiving-sections'

export function RegisterPage() {
  const may = useCan()
  return (
    <MarginPage
      title="Receiving"
      subtitle="Every sample, from the bottle to its results"
      notes={[
        'A sample is received, then accepted, accepted with a qualification, or rejected. Only then it waits for a batch.',
        'Holding times run from collection. What runs out first stands first on the waiting list.',
      ]}
      bar={
        <>
          <ReceivingSections />
          {may('samples.receive') && (
            <Bar
              lead="Newest first"
              actions={
                <Link className="button main" to={paths.receive}>
                  Receive a sample
                </Link>
              }
            />
          )}
        </>
      }
    >
      <SampleRegister />
    </MarginPage>
  )
}
