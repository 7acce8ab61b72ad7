import { Readiness } from '../../features/bench'
import { MarginPage } from '../../ui'
import { BenchSections } from './bench-sections'

export function ReadinessPage() {
  return (
    <MarginPage
      title="Bench"
      subtitle="Why work may or may not start today"
      notes={[
        'Work may start when a signed calibration is in force, the instrument’s checks are in date, reagents and a verification standard are in date, and somebody is authorised.',
        'What stands in the way comes first. Each line leads to the place where it is put right.',
      ]}
      bar={<BenchSections />}
    >
      <Readiness />
    </MarginPage>
  )
}
