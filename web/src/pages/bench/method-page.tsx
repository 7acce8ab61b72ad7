import { useParams } from 'react-router-dom'
import { MethodById } from '../../features/methods'
import { useProgrammeNames } from '../../features/programmes'

export function MethodPage() {
  const { id = '' } = useParams()
  return <MethodById id={id} programmeNames={useProgrammeNames()} />
}
