import { useParams } from 'react-router-dom'
import { MaterialById } from '../../features/materials'

export function MaterialPage() {
  const { id = '' } = useParams()
  return <MaterialById key={id} id={id} />
}
