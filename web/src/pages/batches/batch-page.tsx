import { useParams } from 'react-router-dom'
import { BatchById } from '../../features/batches'

export function BatchPage() {
  const { id = '' } = useParams()
  return <BatchById id={id} />
}
