import { useParams } from 'react-router-dom'
import { InstrumentById } from '../../features/instruments'

export function InstrumentPage() {
  const { id = '' } = useParams()
  return <InstrumentById key={id} id={id} />
}
