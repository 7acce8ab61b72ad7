import { useParams } from 'react-router-dom'
import { PersonById } from '../../features/users'

export function PersonPage() {
  const { id = '' } = useParams()
  return <PersonById key={id} id={id} />
}
