import { Button } from 'antd'
import { formatInstantWithOffset, serverNow, useNotice, useSession } from '../../../lib'
import type { StoryView } from '../api/result-queries'
import { saveStory, storyFileName } from '../save-story'

/** Take away as evidence: on paper, or as the data itself. */
export function TakeAway({ story, canPrint = false }: { story: StoryView; canPrint?: boolean }) {
  const { name, timeZone } = useSession()
  const notice = useNotice()
  return (
    <div className="row no-print">
      {canPrint && <Button onClick={() => window.print()}>Print as evidence</Button>}
      <Button
        onClick={() => {
          saveStory(story, {
            by: name,
            at: formatInstantWithOffset(new Date(serverNow()).toISOString(), timeZone),
          })
          notice.done(`${storyFileName(story)} is saved with your downloads.`)
        }}
      >
        Take away as data
      </Button>
    </div>
  )
}
