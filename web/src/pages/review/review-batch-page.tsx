import { useParams } from 'react-router-dom'
import { ReviewBatchById } from '../../features/review'

export function ReviewBatchPage() {
  const { id = '' } = useParams()
  return <ReviewBatchById id={id} />
}
