import { Link } from 'react-router-dom'
import {
  AllCalibrations,
  CalibrationDrafts,
  CalibrationsInForce,
  CalibrationsSentBack,
  CalibrationsToSign,
} from '../../features/calibrations'
import { paths, useCan } from '../../lib'
import { Bar, MarginPage } from '../../ui'

export function CalibrationsPage() {
  const may = useCan()
  return (
    <MarginPage
      title="Calibrations"
      subtitle="By method and instrument"
      notes={[
        'Only a signed calibration in force can carry results. Whoever prepared it never signs it.',
        'A new one is due when it runs out, with a new reagent lot, after service of the instrument, or when a verification fails.',
      ]}
      bar={
        <Bar
          actions={
            may('calibrations.prepare') && (
              <Link className="button main" to={paths.newCalibration}>
                New calibration
              </Link>
            )
          }
        />
      }
    >
      <div className="stack">
        <CalibrationsToSign isHiddenWhenEmpty={!may('calibrations.sign')} />
        <CalibrationsInForce />
        <CalibrationDrafts />
        <CalibrationsSentBack />
        <AllCalibrations />
      </div>
    </MarginPage>
  )
}
