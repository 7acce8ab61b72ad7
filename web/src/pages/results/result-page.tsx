import { useParams } from 'react-router-dom'
import { StoryById } from '../../features/results'

export function ResultPage() {
  const { id = '' } = useParams()
  return <StoryById id={id} />
}
