import { OwnNow } from '../../features/portal'
import { useTitle } from '../../lib'

export function NowPage() {
  useTitle('Now')
  return (
    <>
      <h1 className="visually-hidden">Now</h1>
      <OwnNow />
    </>
  )
}
