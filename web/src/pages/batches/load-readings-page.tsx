import { useParams } from 'react-router-dom'
import { LoadReadings } from '../../features/batches'

export function LoadReadingsPage() {
  const { id = '' } = useParams()
  return <LoadReadings id={id} />
}
