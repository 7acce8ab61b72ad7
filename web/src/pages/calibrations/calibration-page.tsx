import { useParams } from 'react-router-dom'
import { CalibrationById } from '../../features/calibrations'

export function CalibrationPage() {
  const { id = '' } = useParams()
  return <CalibrationById id={id} />
}
