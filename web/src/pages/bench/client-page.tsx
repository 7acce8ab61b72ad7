import { useParams } from 'react-router-dom'
import { ClientById } from '../../features/clients'

export function ClientPage() {
  const { id = '' } = useParams()
  return <ClientById key={id} id={id} />
}
