import { useSearchParams } from 'react-router-dom'
import { StartCalibration } from '../../features/calibrations'
import { paths } from '../../lib'
import { MarginPage } from '../../ui'

export function NewCalibrationPage() {
  const [search] = useSearchParams()
  return (
    <MarginPage
      title="New calibration"
      subtitle="Set-up before the first reading"
      back={{ to: paths.calibrations, label: 'Calibrations' }}
      notes={['Lots and instruments that may not be used today are listed with the reason.']}
    >
      <StartCalibration methodId={search.get('method') ?? ''} />
    </MarginPage>
  )
}
