import { Link } from 'react-router-dom'
import { InstrumentsList } from '../../features/instruments'
import { paths, useCan } from '../../lib'
import { Bar, MarginPage } from '../../ui'
import { BenchSections } from './bench-sections'

export function InstrumentsPage() {
  const may = useCan()
  return (
    <MarginPage
      title="Instruments"
      subtitle="Spectrophotometers and their checks"
      notes={['Without a check in date no reading is taken. A failed check takes the instrument out of use.']}
      bar={
        <>
          <BenchSections />
          {may('instruments.manage') && (
            <Bar
              actions={
                <Link className="button" to={paths.newInstrument}>
                  Add an instrument
                </Link>
              }
            />
          )}
        </>
      }
    >
      <InstrumentsList />
    </MarginPage>
  )
}
