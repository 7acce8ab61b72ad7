import { useParams } from 'react-router-dom'
import { SampleById } from '../../features/samples'

export function SamplePage() {
  const { id = '' } = useParams()
  return <SampleById id={id} />
}
