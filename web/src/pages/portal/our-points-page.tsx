import { useParams } from 'react-router-dom'
import { OurPoint, OurPoints } from '../../features/portal'
import { MarginPage } from '../../ui'

export function OurPointsPage() {
  return (
    <MarginPage title="Our points" subtitle="With the last result of each determination">
      <OurPoints />
    </MarginPage>
  )
}

export function OurPointPage() {
  const { id = '' } = useParams()
  return <OurPoint id={id} />
}
