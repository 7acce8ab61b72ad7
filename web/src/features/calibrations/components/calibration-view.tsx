import { useQuery } from '@tanstack/react-query'
import type { CalibrationView } from '@weirlight/shared/contracts'
import { paths, useCan } from '../../../lib'
import { Loaded } from '../../../ui'
import { calibrationQuery } from '../api/calibration-queries'
import { useMethod } from '../hooks/use-bench-facts'
import { CalibrationRecord } from './calibration-record'
import { CalibrationWorkbench } from './calibration-workbench'

const LIST = { to: paths.calibrations, label: 'Calibrations' }

/** One calibration: the workbench while it is a draft, the record ever after. */
export function CalibrationById({ id }: { id: string }) {
  return (
    <Loaded query={useQuery(calibrationQuery(id))} skeleton="page" what="calibration" back={LIST}>
      {(view) => <WithMethod view={view} />}
    </Loaded>
  )
}

function WithMethod({ view }: { view: CalibrationView }) {
  const may = useCan()
  const method = useMethod(view.methodId)
  return (
    <Loaded query={method} skeleton="page" what="method" back={LIST}>
      {(found) =>
        view.state === 'draft' && may('calibrations.prepare') ? (
          <CalibrationWorkbench key={view.id} view={view} method={found} />
        ) : (
          <CalibrationRecord key={view.id} view={view} method={found} />
        )
      }
    </Loaded>
  )
}
